package precond

import (
	"math"

	"dwindle/engine/linear"
)

// growth returns ‖M⁻¹1‖∞ ‖A‖∞, which tells factors that are fine from
// factors whose solves explode (Chow and Saad, J. Comput. Appl. Math. 86
// (1997) 387–414).
func growth(m linear.Applier, a *linear.CSR) float64 {
	ones, y := linear.Bulk[float64](a.NRows), linear.Bulk[float64](a.NRows)
	for i := range ones {
		ones[i] = 1
	}
	m.Apply(y, ones)
	return linear.NormInf(y) * rowNorm(a)
}

// rowNorm returns ‖A‖∞, the largest row sum of sizes.
func rowNorm(a *linear.CSR) float64 {
	norm := 0.0
	for i := 0; i < a.NRows; i++ {
		_, vals := a.Row(i)
		sum := 0.0
		for _, v := range vals {
			sum += math.Abs(v)
		}
		norm = max(norm, sum)
	}
	return norm
}
