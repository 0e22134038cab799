package run

import (
	"fmt"
	"math"
)

// The part of b that A reaches leaves √(r²−u²) of the residual r, where u is the
// part out of reach, both relative to b. So much of u may hide in rounding:
const (
	reached = 1e-6         // of what r and u themselves have
	nearly  = 1e-4         // of directions known to rounding alone
	hidden  = 1e-6         // most that the products with a large x may put on r
	toZero  = 16 * 0x1p-53 // of ‖A‖_F‖r‖: Aᵀr is zero to rounding
)

// leastSquares says why no x leaves less than this residual, where b has a part
// out of A's range. A small Aᵀr alone says nothing: a smooth r, or an A with one
// stiff coupling, makes it small far above the minimum. It counts where the
// residual has come down to what is out of reach as well, or where it is zero
// to rounding, as it is when more is out of reach than is known.
func (t *Trial) leastSquares(r float64, a *audit) (reason string, ok bool) {
	u, tol := t.limits.Unreachable, t.limits.Target.Tol
	if !(u > tol) || !(r > tol) {
		return "", false
	}
	left := math.Sqrt(math.Abs(r-u) * (r + u)) // below u it is the residual that is off, by an enormous x
	products := math.Min(hidden*u, over(2*0x1p-53*t.sizes.fro*a.x2, t.sizes.b))
	switch {
	case left <= max(tol, reached*u, math.Sqrt(2*u*products)), a.normal <= tol && left <= nearly*u:
		return fmt.Sprintf("b is not in the range of A; the residual %.3g is the smallest there is", r), true
	case a.normal <= toZero:
		return fmt.Sprintf("b is not in the range of A; at the residual %.3g A'r is zero to rounding: none is smaller, as far as double precision can tell", r), true
	}
	return "", false
}
