package precond

import (
	"context"
	"math"
)

// leastSquares solves min ‖B x − c‖₂ by Householder's reflections (J. ACM 5
// (1958) 339–342). b holds the columns of B, of cols columns and rows ≥ cols
// rows, and is overwritten, as is c, of length rows, whose head is x on
// return. Where a column depends on those before it to rounding, its unknown
// is 0. It returns false where ctx has ended, with no answer.
func leastSquares(ctx context.Context, b []float64, rows, cols int, c []float64) bool {
	diag := make([]float64, cols)
	for j := 0; j < cols; j++ {
		if j%heedEvery == heedEvery-1 && ctx.Err() != nil {
			return false
		}
		col := b[j*rows : (j+1)*rows]
		whole, below := norm2(col), norm2(col[j:])
		if below <= 1e-13*whole || below == 0 {
			continue
		}
		if col[j] > 0 {
			below = -below
		}
		diag[j] = below
		col[j] -= below // v = col[j:], vᵀv = −2 below v₀
		scale := -1 / (below * col[j])
		for k := j + 1; k < cols; k++ {
			reflect(b[k*rows+j:(k+1)*rows], col[j:], scale)
		}
		reflect(c[j:], col[j:], scale)
	}
	for j := cols - 1; j >= 0; j-- {
		if diag[j] == 0 {
			c[j] = 0
			continue
		}
		for k := j + 1; k < cols; k++ {
			c[j] -= b[k*rows+j] * c[k]
		}
		c[j] /= diag[j]
	}
	return true
}

// reflect computes y −= scale (vᵀy) v, with scale = 2/vᵀv.
func reflect(y, v []float64, scale float64) {
	s := 0.0
	for i, x := range v {
		s += x * y[i]
	}
	s *= scale
	if s == 0 || math.IsNaN(s) {
		return
	}
	for i, x := range v {
		y[i] -= s * x
	}
}
