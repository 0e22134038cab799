package spectrum

import (
	"context"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// Arnoldi returns the Ritz values of an operator of order n after steps steps
// of the Arnoldi process from a fixed random vector: points of its field of
// values that approach the outermost eigenvalues first (Arnoldi 1951; Saad,
// Numerical Methods for Large Eigenvalue Problems, §6.2). Nil where they are
// not found.
func Arnoldi(ctx context.Context, n int, apply func(dst, x []float64), steps int) ([]complex128, error) {
	steps = min(steps, n)
	b := newBasis(n, apply, Wanted{Basis: steps})
	if !b.start() {
		return nil, nil
	}
	h := mat.NewDense(steps, steps, nil)
	k := 0
	for ; k < steps && !b.closed; k++ {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		b.extend()
		for i := range k + 1 {
			h.Set(i, k, b.h[i*steps+k])
		}
		if k+1 < steps {
			h.Set(k+1, k, b.beta)
		}
	}
	var e mat.Eigen
	if !e.Factorize(h.Slice(0, k, 0, k), mat.EigenNone) {
		return nil, nil
	}
	return e.Values(nil), nil
}

// Combined returns the operator x ↦ s·(Ax ± Aᵀx)/2 as a function: the
// symmetric part of A for plus, and for minus the skew part, whose eigenvalues
// are imaginary.
func Combined(a, at linear.Applier, n int, sign float64) func(dst, x []float64) {
	w := make([]float64, n)
	return func(dst, x []float64) {
		a.Apply(dst, x)
		at.Apply(w, x)
		linear.Lin(dst, 0.5, dst, 0.5*sign, w)
	}
}
