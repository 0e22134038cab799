package direct

import (
	"context"

	"dwindle/engine/linear"
)

// Definiteness is what VerifiedDefinite found out. At most one of Definite and
// Negative is true; with neither the question is open.
type Definiteness struct {
	// Definite: xᵀA x > 0 for every x ≠ 0, proved with all rounding accounted for.
	Definite bool
	// Negative: xᵀA x < 0 for the vector X, proved in the same way.
	Negative bool
	// WithinDelta: the same holds for every matrix A+E with |E| ≤ delta·|A|.
	WithinDelta bool

	Shift    float64   // c, in units of the scaled matrix, whose diagonal lies in [1,4)
	Row      int       // row at which the factorisation of A − cI broke, from 0; −1 if it did not
	X        []float64 // vector of negative curvature, length n; nil if none was found
	Rayleigh float64   // xᵀA x / xᵀx of X: an upper bound of the smallest eigenvalue
	Rows     []int     // the at most 16 rows that carry X, the largest share first
}

// VerifiedDefinite decides whether the symmetric matrix a is positive definite
// by a floating-point Cholesky factorisation of A − cI, where c exceeds
// everything that rounding can do (Rump, Verification of positive
// definiteness, BIT 46, 2006). If it runs to its end, A is positive definite;
// if it breaks, a vector of negative curvature is built from the factor and
// evaluated with its rounding bound. With delta > 0 it also tells whether the
// same holds for every matrix whose entries differ by up to that relative
// amount. Of a matrix that is symmetric to rounding only, pass a delta that
// covers the difference.
//
// The matrix is scaled by powers of two, which is exact, and factorised in the
// order that takes the fewest operations. VerifiedDefinite keeps to FactLimits
// and returns ErrTooLarge beyond.
func VerifiedDefinite(ctx context.Context, a *linear.CSR, delta float64) (Definiteness, error) {
	return VerifiedDefiniteWithin(ctx, a, delta, FactLimits)
}

// VerifiedDefiniteWithin is VerifiedDefinite within the given limits, which are
// held against what the pattern predicts before anything is allocated.
func VerifiedDefiniteWithin(ctx context.Context, a *linear.CSR, delta float64, within Limits) (Definiteness, error) {
	d := make([]float64, a.NRows)
	a.Diagonal(d)
	for i, v := range d {
		if !(v > 0) {
			x := make([]float64, a.NRows)
			x[i] = 1
			r := Definiteness{Row: i}
			r.judge(a, x, nil, delta)
			return r, nil
		}
	}
	sym, err := within.analyse(ctx, a)
	if err != nil {
		return Definiteness{Row: -1}, err
	}
	return newScaled(a, d).decide(ctx, sym, delta)
}

// decide factorises with the shift for delta and, if that breaks, with the one
// for rounding alone.
func (s *scaled) decide(ctx context.Context, sym *Symbolic, delta float64) (Definiteness, error) {
	l := sym.lay(patternOf(s.a))
	c := roundingShift(l, s.diagonal())
	shifts := []float64{c}
	if delta > 0 {
		shifts = []float64{c + 1.01*delta*s.normInf(), c}
	}
	f := newFactoring(l, symmetricEntries{a: s.a, s: s}, 0)
	r := Definiteness{}
	for k, c := range shifts {
		f.restart(c)
		at, err := f.run(ctx, nil)
		if err != nil {
			return r, err
		}
		r.Shift, r.Row = c, -1
		if at < 0 {
			r.Definite, r.WithinDelta = true, k == 0
			return r, nil
		}
		r.Row = int(sym.Order[at])
		if k == len(shifts)-1 {
			x := f.negativeVector(at)
			s.descend(ctx, x)
			r.judge(s.a, x, s.exp, delta)
		}
	}
	return r, ctx.Err()
}
