package samples

import (
	"math"

	"dwindle/engine/linear"
)

var strut = Sample{
	Name:  "strut",
	Title: "prop of the old gate, clamped below, loaded on its free top",
	Shows: "definiteness is lost in a known place: at load=1 the prop buckles, beyond it the stiffness has one " +
		"negative eigenvalue",
	Source: "Euler strut, cubic Hermite elements: bending stiffness minus the load times the geometric stiffness; " +
		"EI = 1, L = 1, buckling load pi^2 EI/(4 L^2)",
	Spectrum: "definite for load < 1; one negative eigenvalue for 1 < load < 9, the next at load = 9",
	Params: []linear.Param{
		{Name: "n", Kind: linear.Int, Default: 40, Min: 1, Max: 200000, Meaning: "elements"},
		{Name: "load", Kind: linear.Real, Default: 1.2, Min: 0, Max: 1e6, Meaning: "load over the buckling load"},
	},
	Size:   func(v linear.Values) (int, int) { return 2 * v.Int("n"), 12 * v.Int("n") },
	Make:   makeStrut,
	Expect: []string{"not-definite", "restoring-shift", "ill-conditioned", "accuracy-floor", "restart-stagnation"},
}

// Buckling is the load at which the strut of length 1 and bending stiffness 1
// buckles, by Euler's formula for a clamped and a free end.
const Buckling = math.Pi * math.Pi / 4

func makeStrut(v linear.Values) (linear.System, error) {
	n := v.Int("n")
	load := v.Real("load") * Buckling
	l := 1 / float64(n)
	ke, kg := bending(1, l), geometric(l)
	var s assembly
	for e := 0; e < n; e++ {
		first := 2 * (e - 1) // unknowns of the lower node: deflection, rotation
		dof := []int{first, first + 1, first + 2, first + 3}
		s.add(dof, []float64{1, 1, 1, 1}, func(i, j int) float64 { return ke[i][j] - load*kg[i][j] })
	}
	b := make([]float64, 2*n)
	b[2*n-2] = 1 // a sideways push at the top
	return linear.System{A: linear.FromEntries(2*n, 2*n, s.entries), B: b}, nil
}
