package inspect

import (
	"errors"

	"dwindle/engine/direct"
	"dwindle/engine/linear"
)

// solver solves with a factorisation, and with the transpose.
type solver interface {
	Solve(dst, b []float64)
	SolveT(dst, b []float64)
}

// both is a symmetric solver.
type both struct{ direct.Solver }

func (s both) SolveT(dst, b []float64) { s.Solve(dst, b) }

// tinyShift makes a singular matrix, equilibrated, one that can be factorised:
// its free directions stand out all the more.
const tinyShift = 1e-9

// equilibrateWork is the operations an entry that an equilibration takes.
const equilibrateWork = 150

// bytesOfFactor is the memory a factorisation of a study may take.
const bytesOfFactor = 256 << 20

// factor factorises A equilibrated where that fits the budget.
func (e *exam) factor() error {
	if !e.spend(equilibrateWork * float64(len(e.a.Val))) {
		return nil
	}
	if err := e.equilibrate(); err != nil {
		return err
	}
	var err error
	if e.symmetric {
		err = e.factorSymmetric()
	} else {
		err = e.factorGeneral()
	}
	var pivot *direct.PivotError
	switch {
	case errors.As(err, &pivot):
		e.singular = true
		return nil
	case errors.Is(err, direct.ErrTooLarge):
		return nil
	}
	return err
}

// worthwhile says whether enough is left after a factorisation for a few steps
// towards both ends of the spectrum, with factors of that many entries, used so
// many times a step.
func (e *exam) worthwhile(work, entries float64, uses int) bool {
	const few = 12
	return work+2*lanczosWork(e.f.N, float64(uses)*4*entries, few)+2*lanczosWork(e.f.N, e.product(), few) <= e.left
}

// within says whether a factorisation of that work and memory fits.
func (e *exam) within(work float64, bytes int64) bool {
	limit := int64(bytesOfFactor)
	if b := e.budget.Bytes; b > 0 {
		limit = min(limit, b/2)
	}
	return work <= most*e.budget.Work && bytes <= limit && e.spend(work)
}

func (e *exam) factorSymmetric() error {
	if e.tooLargeToOrder() {
		return nil
	}
	sym := direct.Predict(e.a, direct.Best)
	if !e.worthwhile(sym.Work, float64(sym.Entries), 1) || !e.within(sym.Work, sym.Bytes()+sym.Stack) {
		return nil
	}
	if e.f.PositiveDefinite.Answer == Yes {
		if c, err := direct.FactorCholesky(e.ctx, e.scaled, sym, nil); err == nil {
			e.solver = both{c}
			return nil
		}
	}
	b := e.scaled
	e.out.ZeroPivots = e.f.ZeroPivots
	if e.f.SingularAtSight() { // no need to try
		e.singular, e.shift = true, tinyShift
		b = plusIdentity(e.scaled, e.shift)
	}
	f, err := direct.FactorLDL(e.ctx, b, sym, nil)
	if err != nil {
		return err
	}
	if f.Inertia.Zero > 0 && e.shift == 0 {
		e.out.ZeroPivots = f.Inertia.Zero
		e.singular, e.shift = true, tinyShift
		if f, err = direct.FactorLDL(e.ctx, plusIdentity(e.scaled, e.shift), sym, nil); err != nil {
			return err
		}
	}
	e.solver = both{f}
	return nil
}

func (e *exam) factorGeneral() error {
	if e.tooLargeToOrder() {
		return nil
	}
	plan := direct.PredictLU(e.a, direct.Best)
	if !e.worthwhile(plan.Work, float64(plan.Entries), 2) || !e.within(plan.Work, plan.Bytes()) {
		return nil
	}
	f, err := direct.FactorLU(e.ctx, e.scaled, plan, nil)
	var pivot *direct.PivotError
	if errors.As(err, &pivot) && e.spend(plan.Work) {
		e.singular = true
		b := plusIdentity(e.scaled, tinyShift)
		if f, err = direct.FactorLU(e.ctx, b, direct.PredictLU(b, direct.Best), nil); err == nil {
			e.shift = tinyShift
		}
	}
	if err != nil {
		return err
	}
	e.solver = f
	return nil
}

// tooLargeToOrder says whether even an order of elimination costs more than a
// study may.
func (e *exam) tooLargeToOrder() bool {
	return !e.spend(200 * float64(len(e.a.Val)+e.f.N))
}

// plusIdentity returns a + s·I; a zero on the diagonal that is not stored is
// added.
func plusIdentity(a *linear.CSR, s float64) *linear.CSR {
	entries := make([]linear.Entry, 0, len(a.Val)+a.NRows)
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, j := range cols {
			entries = append(entries, linear.Entry{I: i, J: int(j), V: vals[k]})
		}
		entries = append(entries, linear.Entry{I: i, J: i, V: s})
	}
	return linear.FromEntries(a.NRows, a.NRows, entries)
}
