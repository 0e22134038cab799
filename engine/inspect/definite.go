package inspect

import (
	"errors"
	"math"

	"dwindle/engine/direct"
	"dwindle/engine/linear"
)

// definite settles what is left open by a verified Cholesky factorisation,
// where one is affordable, and draws the conclusions.
func (l *look) definite() error {
	f := &l.f
	var err error
	if f.Symmetric.Answer == Yes && f.DiagPositive == f.N && open(f.PositiveDefinite) {
		err = l.verify(l.a, &f.PositiveDefinite, "")
	}
	if f.Symmetric.Answer == Yes && f.DiagNegative == f.N && open(f.NegativeDefinite) {
		err = l.verify(negated(l.a), &f.NegativeDefinite, "-")
	}
	if err != nil {
		return err
	}
	l.conclude()
	return l.countSigns()
}

// countSigns counts the negative eigenvalues of a symmetric matrix that is not
// known to be definite, by the signs of its LDLᵀ pivots (Sylvester's law of
// inertia), where a factorisation is affordable.
func (l *look) countSigns() error {
	f := &l.f
	switch {
	case f.PositiveDefinite.Answer == Yes:
		f.NegativeCount = fact(No, f.PositiveDefinite.Certainty, 0, nil, "A is positive definite")
		return nil
	case f.NegativeDefinite.Answer == Yes:
		f.NegativeCount = fact(Yes, f.NegativeDefinite.Certainty, float64(f.N), nil, "-A is positive definite")
		return nil
	case f.Symmetric.Answer != Yes:
		f.NegativeCount = unknown("A is not symmetric")
		return nil
	}
	n, err := direct.CountSigns(l.ctx, l.a, direct.FactLimits)
	var pivot *direct.PivotError
	switch {
	case errors.Is(err, direct.ErrTooLarge):
		f.NegativeCount = unknown("too large to be factorised for a fact")
	case errors.As(err, &pivot):
		f.NegativeCount = unknown("the factorisation breaks down: %v", err)
	case err != nil:
		return err
	default:
		f.ZeroPivots = n.Zero
		f.NegativeCount = fact(No, Measured, float64(n.Negative), nil, "LDL' has %d negative, %d positive pivots, %d zero to rounding",
			n.Negative, n.Positive, n.Zero)
		if n.Negative > 0 {
			f.NegativeCount.Answer = Yes
		}
	}
	return nil
}

// open reports whether more work can make the fact surer.
func open(f Fact) bool {
	return f.Answer == "" || f.Answer == Unknown || f.Answer == Yes && f.Certainty != Proved
}

func negated(a *linear.CSR) *linear.CSR {
	b := *a
	b.Val = make([]float64, len(a.Val))
	for k, v := range a.Val {
		b.Val[k] = -v
	}
	return &b
}

// verify tries to prove a, which is sign times A, definite or not.
func (l *look) verify(a *linear.CSR, side *Fact, sign string) error {
	r, err := direct.VerifiedDefinite(l.ctx, a, l.slack)
	switch {
	case errors.Is(err, direct.ErrTooLarge):
		l.beyondReach(side)
		return nil
	case err != nil:
		return err
	}
	switch {
	case r.Definite:
		*side = fact(Yes, Proved, r.Shift, nil, "Cholesky of %sA - cI completes, with c = %.2g above all rounding (diagonal scaled to 1..4)", sign, r.Shift)
		if !r.WithinDelta {
			*side = l.doubt(*side, "yours may not be definite")
		}
	case r.Negative:
		l.negativeFound(r, side, sign)
	case side.Answer == "" || side.Answer == Unknown:
		*side = unknown("Cholesky of %sA breaks at %s, yet no negative curvature beyond rounding was found", sign, l.f.Names.Both(r.Row))
		side.Rows = []int{r.Row}
	}
	return nil
}

// negativeFound states that a vector of negative curvature was found.
func (l *look) negativeFound(r direct.Definiteness, side *Fact, sign string) {
	no := fact(No, Proved, r.Rayleigh, r.Rows, "a vector x, carried by %s, has %sx'Ax/x'x = %.3g, beyond its rounding bound", l.f.Names.Both(r.Rows[:min(2, len(r.Rows))]...), sign, r.Rayleigh)
	if !r.WithinDelta {
		no = l.doubt(no, "yours may not be indefinite")
	}
	*side = no
	if sign == "" {
		l.f.Semidefinite = no
	}
}

// beyondReach settles a system that is too large to factorise: dominance to
// rounding is the only measure left.
func (l *look) beyondReach(side *Fact) {
	switch {
	case side.Answer == Yes:
	case l.chained(near, beyond):
		*side = fact(Yes, Measured, math.NaN(), nil, "diagonally dominant to rounding, clearly so in at least one row of each component")
	default:
		*side = unknown("symmetric with a diagonal of one sign; too large to be proved here")
	}
}

// conclude draws what the facts found imply for one another.
func (l *look) conclude() {
	f := &l.f
	pd, nd := &f.PositiveDefinite, &f.NegativeDefinite
	if pd.Answer == "" {
		*pd = unknown("not settled")
	}
	if nd.Answer == "" && pd.Answer == Yes {
		*nd = fact(No, pd.Certainty, math.NaN(), nil, "A is positive definite")
	}
	if nd.Answer == "" {
		*nd = unknown("not settled")
	}
	switch {
	case pd.Answer == Yes:
		f.Semidefinite = fact(Yes, pd.Certainty, pd.Value, nil, "A is positive definite")
		l.regular("A is positive definite", pd.Certainty)
	case nd.Answer == Yes:
		f.Semidefinite = fact(No, nd.Certainty, math.NaN(), nil, "-A is positive definite")
		l.regular("-A is positive definite", nd.Certainty)
	case f.Semidefinite.Answer == "":
		f.Semidefinite = unknown("not settled")
	}
}

// regular notes that a definite matrix has no null vector.
func (l *look) regular(why string, sure Certainty) {
	f := &l.f
	if f.Singular.Answer == Unknown || f.Singular.Answer == No && f.Singular.Certainty != Proved {
		f.Singular = fact(No, sure, 0, nil, "%s", why)
	}
	if f.Unreachable.Answer == Unknown && f.Singular.Answer == No && len(l.s.B) == f.N {
		f.Unreachable = fact(No, f.Singular.Certainty, 0, nil, "A is regular: %s", f.Singular.Why)
	}
}
