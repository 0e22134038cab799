package samples

import (
	"math"

	"dwindle/engine/linear"
)

var acoustics = Sample{
	Name:  "acoustics",
	Title: "sound of one frequency in the turbine hall, its walls soft",
	Shows: "a symmetric indefinite system: cg has no right to converge, minres has; more wavelengths, more " +
		"negative eigenvalues",
	Source: "Helmholtz equation, five-point differences, h = 1/(n+1): the plate minus s times the identity, " +
		"s = (2 pi wave h)^2",
	Spectrum: "4 - 2 cos(p pi/(n+1)) - 2 cos(q pi/(n+1)) - s; the negative ones can be counted",
	Params: []linear.Param{
		{Name: "n", Kind: linear.Int, Default: 40, Min: 1, Max: 3000, Meaning: "unknowns along each side"},
		{Name: "wave", Kind: linear.Real, Default: 2.3, Min: 0, Max: 1000, Meaning: "wavelengths along each side"},
	},
	Size: func(v linear.Values) (int, int) {
		n := v.Int("n")
		return n * n, fivePointEntries(n, n)
	},
	Make:   makeAcoustics,
	Expect: []string{"not-definite", "restoring-shift", "restart-length"},
}

func makeAcoustics(v linear.Values) (linear.System, error) {
	n := v.Int("n")
	kh := 2 * math.Pi * v.Real("wave") / float64(n+1)
	row := stencil{-1, -1, 4 - kh*kh, -1, -1}
	b := make([]float64, n*n)
	b[n/3*n+n/5] = 1 // one loudspeaker
	return linear.System{A: fivePoint(n, n, func(int, int) stencil { return row }), B: b}, nil
}
