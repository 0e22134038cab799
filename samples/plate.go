package samples

import "dwindle/engine/linear"

var plate = Sample{
	Name:  "plate",
	Title: "gate plate, heated evenly, its rim held cold",
	Shows: "the model problem: cg needs a number of iterations proportional to n, whatever stays one-level; " +
		"with jump or aniso point methods fall behind further",
	Source: "five-point Laplacian, h-scaled to 4 and -1 (Varga, Matrix Iterative Analysis, 1962); " +
		"faces between unlike materials by harmonic means",
	Spectrum: "jump=1, aniso=1: 4 - 2 cos(p pi/(n+1)) - 2 cos(q pi/(n+1)); condition cot^2(pi/(2(n+1)))",
	Params: []linear.Param{
		{Name: "n", Kind: linear.Int, Default: 60, Min: 1, Max: 5000, Meaning: "unknowns along each side"},
		{Name: "jump", Kind: linear.Real, Default: 1, Min: 1e-12, Max: 1e12, Meaning: "conductivity of the square patch in the middle third"},
		{Name: "aniso", Kind: linear.Real, Default: 1, Min: 1e-12, Max: 1e12, Meaning: "conductivity along rows over that along columns"},
	},
	Size: func(v linear.Values) (int, int) {
		n := v.Int("n")
		return n * n, fivePointEntries(n, n)
	},
	Make:   makePlate,
	Expect: []string{"not-your-rhs", "mesh-growth", "preconditioner-changes-nothing"},
}

func makePlate(v linear.Values) (linear.System, error) {
	n, jump, aniso := v.Int("n"), v.Real("jump"), v.Real("aniso")
	lo, hi := n/3, n-n/3 // the patch is lo <= i, j < hi
	at := func(i, j int) float64 {
		if i >= lo && i < hi && j >= lo && j < hi {
			return jump
		}
		return 1
	}
	face := func(k float64, i, j int) float64 { // towards (i, j); the rim is of the cell's own material
		if i < 0 || j < 0 || i == n || j == n {
			return k
		}
		return harmonic(k, at(i, j))
	}
	return linear.System{A: fivePoint(n, n, func(i, j int) stencil {
		k := at(i, j)
		south, north := face(k, i, j-1), face(k, i, j+1)
		west, east := aniso*face(k, i-1, j), aniso*face(k, i+1, j)
		return stencil{-south, -west, south + west + east + north, -east, -north}
	})}, nil
}
