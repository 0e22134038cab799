package samples

import "dwindle/engine/linear"

var duct = Sample{
	Name:  "duct",
	Title: "ventilation duct of the gallery, warm air blown in at one end",
	Shows: "a nonsymmetric system: cg and minres do not apply; with a strong draught eigenvalues say little " +
		"about gmres",
	Source: "convection and diffusion, first-order upwind differences, constant flow along rows, " +
		"scaled by the square of the mesh width h = 1/(n+1)",
	Spectrum: "real: 4 + q - 2 sqrt(1+q) cos(p pi/(n+1)) - 2 cos(r pi/(n+1)), q = peclet/(n+1); far from normal",
	Params: []linear.Param{
		{Name: "n", Kind: linear.Int, Default: 40, Min: 1, Max: 3000, Meaning: "unknowns along each side"},
		{Name: "peclet", Kind: linear.Real, Default: 100, Min: 0, Max: 1e8, Meaning: "flow speed times length over diffusivity"},
	},
	Size: func(v linear.Values) (int, int) {
		n := v.Int("n")
		return n * n, fivePointEntries(n, n)
	},
	Make: makeDuct,
}

func makeDuct(v linear.Values) (linear.System, error) {
	n := v.Int("n")
	q := v.Real("peclet") / float64(n+1)
	row := stencil{-1, -(1 + q), 4 + q, -1, -1}
	b := make([]float64, n*n)
	for j := 0; j < n; j++ {
		b[j*n] = 1 + q // air of temperature 1 enters on the left
	}
	return linear.System{A: fivePoint(n, n, func(int, int) stencil { return row }), B: b}, nil
}
