package spectrum

import (
	"context"
	"math"

	"dwindle/engine/linear"
)

// refined is the residual, relative to the Rayleigh quotient, at which a
// direction needs no more refining: the rows that carry it are plain.
const refined = 1e-3

// RefineNegative improves a direction p (length n, not changed) in which the
// symmetric operator a curves downwards, pᵀAp < 0, towards the eigenvector of
// the smallest eigenvalue, so that the rows that carry the negative curvature
// stand out. It returns a unit vector and its Rayleigh quotient, measured by a
// product of its own; the quotient is never above that of p. It takes at most
// steps products plus two, fewer once ‖Ax − θx‖ is below a thousandth of |θ|,
// and stops early when ctx ends. A p that is zero or not finite gives nil and
// NaN.
//
// The method is the locally optimal gradient iteration without preconditioner
// (Knyazev, SIAM J. Sci. Comput. 23, 2001): the Rayleigh–Ritz problem on the
// span of the iterate, its residual and the last change. The three are made
// orthonormal first, and one that depends on the others is left out.
func RefineNegative(ctx context.Context, a linear.Operator, p []float64, steps int) (vector []float64, quotient float64) {
	norm := linear.Norm2(p)
	if norm == 0 || !finite(norm) {
		return nil, math.NaN()
	}
	x, change, residual := newImage(len(p)), newImage(len(p)), newImage(len(p))
	linear.Scale(x.v, 1/norm, p)
	a.Apply(x.av, x.v)
	first := append([]float64(nil), x.v...)
	quotient = linear.Dot(x.v, x.av)
	for step := 0; step < steps && ctx.Err() == nil; step++ {
		theta := linear.Dot(x.v, x.av)
		linear.Lin(residual.v, 1, x.av, -theta, x.v)
		if !(linear.Norm2(residual.v) > refined*math.Abs(theta)) {
			break
		}
		basis := []*image{x}
		if step > 0 && change.orthonormalise(basis) {
			basis = append(basis, change)
		}
		if !residual.orthonormalise(basis) {
			break
		}
		a.Apply(residual.av, residual.v)
		lead, ok := lowest(append(basis, residual))
		if !ok {
			break
		}
		advance(x, change, residual, lead)
	}
	linear.Scale(x.v, 1/linear.Norm2(x.v), x.v)
	a.Apply(x.av, x.v)
	if q := linear.Dot(x.v, x.av); q <= quotient {
		return x.v, q
	}
	return first, quotient
}

// advance moves x to the combination lead of x, the change (absent where lead
// has two parts) and the residual, and keeps the part that is new as change.
func advance(x, change, residual *image, lead []float64) {
	old, fresh := 0.0, lead[len(lead)-1]
	if len(lead) == 3 {
		old = lead[1]
	} else {
		clear(change.v)
		clear(change.av)
	}
	linear.Lin(change.v, old, change.v, fresh, residual.v)
	linear.Lin(change.av, old, change.av, fresh, residual.av)
	linear.Lin(x.v, lead[0], x.v, 1, change.v)
	linear.Lin(x.av, lead[0], x.av, 1, change.av)
}
