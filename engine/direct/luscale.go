package direct

import (
	"math"

	"dwindle/engine/linear"
)

// equilibrateBoth returns powers of two for rows and columns that bring the
// largest entry of each near 1 (Ruiz 2001).
func equilibrateBoth(a *linear.CSR) (left, right []float64) {
	n := a.NRows
	r, c, norm := make([]float64, n), make([]float64, n), make([]float64, n)
	for range 6 {
		for _, rows := range []bool{true, false} {
			for i := range norm {
				norm[i] = math.Inf(-1)
			}
			for i := range n {
				cols, vals := a.Row(i)
				for k, j := range cols {
					at := i
					if !rows {
						at = int(j)
					}
					norm[at] = max(norm[at], math.Log2(math.Abs(vals[k]))+r[i]+c[j])
				}
			}
			d := r
			if !rows {
				d = c
			}
			for i, v := range norm {
				if !math.IsInf(v, 0) {
					d[i] -= v / 2
				}
			}
		}
	}
	return powersOfTwo(r), powersOfTwo(c)
}

func powersOfTwo(e []float64) []float64 {
	d := make([]float64, len(e))
	for i, v := range e {
		d[i] = math.Ldexp(1, int(math.Round(min(max(v, -500), 500))))
	}
	return d
}
