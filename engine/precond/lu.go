package precond

import (
	"context"

	"dwindle/engine/direct"
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var luEntry = Entry{
	Name: "lu", Title: "complete LU factorisation with threshold pivots, a direct solve",
	Source:     "Gilbert and Peierls, SIAM J. Sci. Stat. Comput. 9 (1988) 862–874",
	Params:     exactParams,
	Needs:      linear.NeedsEntries,
	Fixed:      true,
	Symmetric:  true,
	Exact:      true,
	Transposes: true,
	Estimate: func(a *linear.CSR, v linear.Values) (int64, bool) {
		if a == nil {
			return 0, false
		}
		if a.NRows > predictRows {
			return 2 * meshBytes(a.NRows), false
		}
		return direct.PredictLU(a, ordering(v)).Bytes() + refineBytes(a.NRows, v), false
	},
	Build: buildLU,
}

// buildLU computes P Dr A Dc Q = L U.
func buildLU(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	var notes trace.BuildNotes
	a, err := entriesOf(s, "lu")
	if err != nil {
		return nil, notes, err
	}
	f, err := direct.FactorLU(ctx, a, direct.PredictLU(a, ordering(v)), progress)
	if err != nil {
		err = broken("lu", err)
		if b, ok := err.(*Breakdown); ok {
			notes.Broke = []trace.Pivot{{Row: b.Row, Value: b.Pivot}}
		}
		return nil, notes, err
	}
	notes.MinPivot, notes.MaxPivot = f.MinPivot, f.MaxPivot
	notes.Entries = f.Entries()
	notes.Fill = float64(f.Entries()) / float64(a.Entries())
	notes.Bytes = f.Bytes() + refineBytes(a.NRows, v)
	return newExact(a, f, direct.Transposed{LU: f}, v), notes, nil
}
