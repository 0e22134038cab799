package samples

import "dwindle/engine/linear"

var seepage = Sample{
	Name:  "seepage",
	Title: "ground water under the weir, no pressure fixed anywhere",
	Shows: "a singular system: pressures are known up to a constant; with b=leaky more water goes in than out, " +
		"and no solver can reach what is left over",
	Source: "cell-centred finite volumes with no flow through the rim (Neumann); integer conductivities, " +
		"so that row sums vanish exactly",
	Spectrum: "semi-definite; one zero eigenvalue, its vector constant",
	Params: []linear.Param{
		{Name: "n", Kind: linear.Int, Default: 32, Min: 2, Max: 3000, Meaning: "cells along each side"},
		{Name: "b", Kind: linear.Choice, Choices: []string{"consistent", "leaky"},
			Meaning: "wells: 1 in and 1 out, or 1 in and 0.25 out"},
	},
	Size: func(v linear.Values) (int, int) {
		n := v.Int("n")
		return n * n, fivePointEntries(n, n)
	},
	Make: makeSeepage,

	Expect: []string{"up-to-a-constant", "lost-orthogonality"},
}

func makeSeepage(v linear.Values) (linear.System, error) {
	n := v.Int("n")
	// The face between two cells takes the smaller of their conductivities:
	// it stays an integer, and the same from both sides.
	face := func(i, j, p, q int) float64 {
		if p < 0 || q < 0 || p == n || q == n {
			return 0
		}
		return min(soil(i, j, n), soil(p, q, n))
	}
	a := fivePoint(n, n, func(i, j int) stencil {
		south, north := face(i, j, i, j-1), face(i, j, i, j+1)
		west, east := face(i, j, i-1, j), face(i, j, i+1, j)
		return stencil{-south, -west, south + west + east + north, -east, -north}
	})
	b := make([]float64, n*n)
	b[0], b[n*n-1] = 1, -1
	if v.Choice("b") == "leaky" {
		b[n*n-1] = -0.25
	}
	return linear.System{A: a, B: b}, nil
}

// soil is the integer conductivity of a cell: layered sand with a lens of
// gravel in the middle.
func soil(i, j, n int) float64 {
	if i >= n/4 && i < n-n/4 && j >= n/2 && j < n/2+max(1, n/8) {
		return 60
	}
	return float64(2 + (3*j+i/4)%5)
}
