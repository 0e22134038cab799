package precond

import (
	"context"
	"fmt"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var icEntry = Entry{
	Name: "ic", Title: "incomplete Cholesky by levels of fill",
	Source:  "Meijerink and van der Vorst, Math. Comp. 31 (1977) 148–162; shift: Manteuffel, Math. Comp. 34 (1980) 473–497",
	Params:  []linear.Param{levelParam, storeParam},
	Needs:   linear.NeedsEntries | linear.NeedsDiagonal,
	Assumes: linear.AssumesSymmetric | linear.AssumesDefinite,
	Fixed:   true, Symmetric: true, Transposes: true,
	Estimate: func(a *linear.CSR, v linear.Values) (int64, bool) {
		if a == nil {
			return 0, false
		}
		lower, _, exact := fillCounts(a, v.Int("level"))
		return factorBytes(a.NRows, lower, lower, v), exact && a.NRows < bandsFrom
	},
	Build: func(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
		return built(buildIC(ctx, s, v.Int("level"), v, progress))
	},
}

// buildIC factors the lower triangle of A as L D Lᵀ on its own pattern, filled
// in to the level asked for. Where a pivot is not positive it factors
// A + α diag(A) instead, with the smallest workable α that leastShift finds.
func buildIC(ctx context.Context, s linear.System, level int, v linear.Values, progress func(float64)) (*factors, trace.BuildNotes, error) {
	var notes trace.BuildNotes
	name := fmt.Sprintf("ic:%d", level)
	a, err := entriesOf(s, name)
	if err != nil {
		return nil, notes, err
	}
	if err := positiveDiagonal(a, name); err != nil {
		return nil, notes, err
	}
	padded, err := filled(ctx, a, level)
	if err != nil {
		return nil, notes, err
	}
	w := newICWork(padded)
	if err := leastShift(ctx, w, name, &notes, progress); err != nil {
		return nil, notes, err
	}
	for _, d := range w.pivots {
		pivot(&notes, d)
	}
	f, err := w.finish(v, name)
	if err != nil {
		return nil, notes, err
	}
	factorNotes(&notes, f, a)
	return f, notes, nil
}

// positiveDiagonal refuses a diagonal entry that no shift of the form
// α diag(A) can repair.
func positiveDiagonal(a *linear.CSR, name string) error {
	for i := 0; i < a.NRows; i++ {
		at, ok := diagonal(a, i)
		if !ok {
			return &Breakdown{Method: name, Row: i, Why: "missing diagonal entry"}
		}
		if d := a.Val[at]; !(d > 0) {
			return &Breakdown{Method: name, Row: i, Pivot: d, Why: "the diagonal entry is not positive, no shift repairs it"}
		}
	}
	return nil
}
