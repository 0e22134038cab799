package spectrum

import "math"

// Extremes are the outermost Ritz values of a Lanczos matrix of order Order.
//
// Smallest is never below the smallest eigenvalue of the operator and Largest
// never above the largest, beyond rounding, so that Largest/Smallest is a
// lower bound of the condition number of a definite one. A residual is
// |T_{k+1,k}| times the last component of the unit eigenvector: an eigenvalue
// of the operator lies within it of the Ritz value (NaN where T_{k+1,k} is
// unknown). Settled says that both residuals are at most a hundredth of their
// Ritz values, hence that an eigenvalue lies within 1 % of each; a smaller one
// that the starting residual hardly contains may still be missing.
//
// All numbers are NaN at order 0.
type Extremes struct {
	Smallest, Largest                 float64
	ResidualSmallest, ResidualLargest float64
	Negative                          int // Ritz values below zero beyond rounding
	Settled                           bool
	Order                             int
	floor                             float64 // absolute accuracy of Smallest
}

// settledAt is the residual, relative to the Ritz value, at which it counts
// as settled.
const settledAt = 0.01

// Condition returns Largest/Smallest, a lower bound of the condition number
// of the (preconditioned) operator, or NaN where a Ritz value is negative or
// none is known.
func (x Extremes) Condition() float64 {
	if x.Order == 0 || x.Negative > 0 {
		return math.NaN()
	}
	return x.Largest / (math.Max(x.Smallest, 0) + x.floor)
}

// Extremes returns the outermost Ritz values to about twelve digits. A call
// costs O(k): a few passes where the ends moved little since the last call,
// about sixty at worst. Call it when the order has grown by 5 % or more, and
// all calls together cost less than some thousand operations a step.
func (t *Tridiagonal) Extremes() Extremes {
	k := len(t.c)
	if k == 0 {
		nan := math.NaN()
		return Extremes{Smallest: nan, Largest: nan, ResidualSmallest: nan, ResidualLargest: nan}
	}
	if t.last.Order == k {
		return t.last
	}
	floor := 0.0
	if t.form == fromLanczos {
		floor = 8 * epsilon * t.radius
	}
	x := Extremes{Order: k, Negative: t.negative(floor), floor: floor}
	t.low, t.high = t.searchLow(x.Negative, floor), t.searchHigh(floor)
	x.Smallest, x.Largest = t.low, t.high
	out := t.coupling(k - 1)
	x.ResidualSmallest = ritzResidual(out, t.lastComponent(x.Smallest))
	x.ResidualLargest = ritzResidual(out, t.lastComponent(x.Largest))
	x.Settled = x.ResidualSmallest <= settledAt*math.Abs(x.Smallest) &&
		x.ResidualLargest <= settledAt*math.Abs(x.Largest)
	t.last = x
	return x
}

// ritzResidual is out·y, 0 where the matrix is complete (out = 0).
func ritzResidual(out, y float64) float64 {
	if out == 0 {
		return 0
	}
	return out * y
}

// negative counts the negative eigenvalues: by inertia the negative α_j of
// CG, else those below −floor.
func (t *Tridiagonal) negative(floor float64) int {
	if t.form == fromCG {
		return t.negatives
	}
	return t.below([probes]float64{-floor, -floor, -floor, -floor})[0]
}
