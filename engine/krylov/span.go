package krylov

import (
	"math"

	"dwindle/engine/linear"
)

// span holds orthonormal vectors of one length.
type span [][]float64

// orthogonalise removes the span of v_0…v_k from w and fills col with the k+1
// coefficients and then ‖w‖, which is left as it is. It returns ‖w‖ before and
// after. A second pass over the v_i is made when the first cancels: when ‖w‖
// falls below 0.1/√2 of what it was.
func (v span) orthogonalise(w, col []float64, k int) (before, after float64) {
	clear(col)
	after = v.project(w, col, k)
	before = after
	for _, h := range col[:k+1] {
		before = math.Hypot(before, h)
	}
	if after < 0.1*math.Sqrt2/2*before {
		after = v.project(w, col, k)
	}
	col[k+1] = after
	return before, after
}

// project makes one pass of modified Gram–Schmidt, adds the coefficients to
// col and returns ‖w‖. Each subtraction shares its pass over w with the next
// dot product.
func (v span) project(w, col []float64, k int) float64 {
	d := linear.Dot(v[0], w)
	for i := 0; i < k; i++ {
		col[i] += d
		d = linear.AxpyDot(-d, v[i], w, v[i+1])
	}
	col[k] += d
	return root(linear.AxpyDot(-d, v[k], w, w), w)
}
