package samples

import "dwindle/engine/linear"

var line = Sample{
	Name:  "line",
	Title: "taut signal cable, pushed beside its first post",
	Shows: "residuals known in closed form: cg has 1/(k+1) after k < n steps, " +
		"minres and gmres sqrt(6/((k+1)(k+2)(2k+3)))",
	Source:   "one-dimensional Laplacian tridiag(-1,2,-1), b = e_1",
	Spectrum: "4 sin^2(k pi/(2(n+1))), k = 1..n",
	Params: []linear.Param{
		{Name: "n", Kind: linear.Int, Default: 100, Min: 1, Max: 10000000, Meaning: "unknowns"},
	},
	Size: func(v linear.Values) (int, int) { return v.Int("n"), fivePointEntries(v.Int("n"), 1) },
	Make: func(v linear.Values) (linear.System, error) {
		n := v.Int("n")
		b := make([]float64, n)
		b[0] = 1
		row := stencil{west: -1, centre: 2, east: -1}
		return linear.System{A: fivePoint(n, 1, func(int, int) stencil { return row }), B: b}, nil
	},
	Expect: []string{"preconditioner-changes-nothing"},
}
