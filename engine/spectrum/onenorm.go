package spectrum

import "gonum.org/v1/gonum/lapack/gonum"

// OneNorm estimates ‖B‖₁ of an operator of order n that is known by its
// products dst = B x and dst = Bᵀ x alone, in a handful of them. The estimate
// is a lower bound, in practice rarely below a third of the norm (Hager, SIAM
// J. Sci. Stat. Comput. 5 (1984) 311–316; Higham, ACM TOMS 14 (1988) 381–396).
// With B = A⁻¹ from a factorisation, ‖A‖₁ times it estimates the condition
// number. apply and applyT get vectors of length n that do not overlap.
func OneNorm(n int, apply, applyT func(dst, x []float64)) float64 {
	if n == 0 {
		return 0
	}
	var (
		v, x, y = make([]float64, n), make([]float64, n), make([]float64, n)
		signs   = make([]int, n)
		state   [3]int
		est     float64
		kind    int
		lapack  gonum.Implementation
	)
	for {
		est, kind = lapack.Dlacn2(n, v, x, signs, est, kind, &state)
		switch kind {
		case 0:
			return est
		case 1:
			apply(y, x)
		default:
			applyT(y, x)
		}
		copy(x, y)
	}
}
