package precond

import (
	"context"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var ictEntry = Entry{
	Name: "ict", Title: "incomplete Cholesky by threshold",
	Source: "Lin and Moré, SIAM J. Sci. Comput. 21 (1999) 24–45; shift: Manteuffel, Math. Comp. 34 (1980) 473–497",
	Params: []linear.Param{
		{Name: "tau", Kind: linear.Real, Default: 1e-3, Min: 0, Max: 1,
			Meaning: "drops entries up to tau times the 2-norm of their column of A"},
		{Name: "p", Kind: linear.Int, Default: 10, Min: 0, Max: 1 << 30,
			Meaning: "keeps at most p entries of a column of L more than A's lower triangle has there"},
		storeParam,
	},
	Needs:   linear.NeedsEntries | linear.NeedsDiagonal,
	Assumes: linear.AssumesSymmetric | linear.AssumesDefinite,
	Fixed:   true, Symmetric: true, Transposes: true,
	Estimate: func(a *linear.CSR, v linear.Values) (int64, bool) {
		if a == nil {
			return 0, false
		}
		n := a.NRows
		_, upper := halves(a)
		most := n * (n - 1) / 2
		if p := v.Int("p"); p < n {
			most = min(most, upper+n*p)
		}
		return factorBytes(n, most, most, v), false
	},
	Build: buildICT,
}

// buildICT factors A = L D Lᵀ column by column, with the rule of dropping that
// the parameters tell. Where a pivot is not positive it factors A + α diag(A)
// instead, with the smallest workable α that leastShift finds.
func buildICT(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	const name = "ict"
	var notes trace.BuildNotes
	a, err := entriesOf(s, name)
	if err != nil {
		return nil, notes, err
	}
	if err := positiveDiagonal(a, name); err != nil {
		return nil, notes, err
	}
	w := newICTWork(a, v.Real("tau"), v.Int("p"))
	if err := leastShift(ctx, w, name, &notes, progress); err != nil {
		return nil, notes, err
	}
	for _, d := range w.pivots {
		pivot(&notes, d)
	}
	f := &factors{lower: w.l.Transpose(), upper: w.l, inverse: w.w, self: true}
	for i, d := range w.pivots {
		f.inverse[i] = 1 / d
	}
	if err := f.settleAs(v, name); err != nil {
		return nil, notes, err
	}
	factorNotes(&notes, f, a)
	return built(f, notes, nil)
}
