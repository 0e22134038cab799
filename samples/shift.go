package samples

import "dwindle/engine/linear"

var shift = Sample{
	Name:  "shift",
	Title: "rota of the watch: every keeper hands over to the next",
	Shows: "gmres stands still for n-1 steps and ends at step n; restarted, it never moves, though the condition is 1",
	Source: "N. Nachtigal, S. Reddy, L. Trefethen, How fast are nonsymmetric matrix iterations? " +
		"SIAM J. Matrix Anal. Appl. 13 (1992) 778-795 (cited from memory); A e_i = e_(i+1), b = e_1",
	Spectrum: "the n-th roots of unity; normal; every singular value is 1",
	Params: []linear.Param{
		{Name: "n", Kind: linear.Int, Default: 40, Min: 2, Max: 1000000, Meaning: "unknowns"},
	},
	Size:   func(v linear.Values) (int, int) { return v.Int("n"), v.Int("n") },
	Expect: []string{"breakdown", "restart-stagnation", "zero-diagonal"},
	Make: func(v linear.Values) (linear.System, error) {
		n := v.Int("n")
		ones, b := make([]float64, n), make([]float64, n)
		for i := range ones {
			ones[i] = 1
		}
		a := diagonal(ones)
		for i := range a.Col {
			a.Col[i] = int32((i + n - 1) % n)
		}
		b[0] = 1
		return linear.System{A: a, B: b}, nil
	},
}
