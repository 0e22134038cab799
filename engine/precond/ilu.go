package precond

import (
	"context"
	"fmt"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var iluEntry = Entry{
	Name: "ilu", Title: "incomplete LU by levels of fill",
	Source: "Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. (2003), algorithm 10.4 and section 10.3.3",
	Params: []linear.Param{levelParam, storeParam},
	Needs:  linear.NeedsEntries,
	Fixed:  true, Symmetric: true, Transposes: true,
	Estimate: func(a *linear.CSR, v linear.Values) (int64, bool) {
		if a == nil {
			return 0, false
		}
		lower, upper, exact := fillCounts(a, v.Int("level"))
		return factorBytes(a.NRows, lower, upper, v), exact && a.NRows < bandsFrom
	},
	Build: func(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
		level := v.Int("level")
		return built(buildILU(ctx, s, fmt.Sprintf("ilu:%d", level), level, false, v, progress))
	},
}

// levelParam is the level of fill of ilu and ic.
var levelParam = linear.Param{Name: "level", Kind: linear.Int, Default: 0, Min: 0, Max: 20,
	Meaning: "fill level: 0 keeps the pattern of A"}

var miluEntry = Entry{
	Name: "milu", Title: "modified incomplete LU, no fill",
	Source: "Dupont, Kendall and Rachford, SIAM J. Numer. Anal. 5 (1968) 559–573; Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. (2003), section 10.3.5",
	Params: []linear.Param{noFillParam, storeParam},
	Needs:  linear.NeedsEntries,
	Fixed:  true, Symmetric: true, Transposes: true,
	Estimate: iluEntry.Estimate,
	Build: func(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
		return built(buildILU(ctx, s, "milu:0", 0, true, v, progress))
	},
}

// noFillParam is the level of the modified factorisations.
var noFillParam = linear.Param{Name: "level", Kind: linear.Int, Default: 0, Min: 0, Max: 0,
	Meaning: "fill level: 0 keeps the pattern of A"}

// buildILU factors A on its pattern filled in to a level. The modified
// factorisation takes what it drops to the diagonal, so that it keeps the row
// sums of A.
func buildILU(ctx context.Context, s linear.System, name string, level int, modified bool, v linear.Values, progress func(float64)) (*factors, trace.BuildNotes, error) {
	var notes trace.BuildNotes
	a, err := entriesOf(s, name)
	if err != nil {
		return nil, notes, err
	}
	padded, err := filled(ctx, a, level)
	if err != nil {
		return nil, notes, err
	}
	work := newILUWork(padded, name, modified)
	for i := 0; i < a.NRows; i++ {
		if err := look(ctx, progress, i, a.NRows); err != nil {
			return nil, notes, err
		}
		d, err := work.row(i)
		if err != nil {
			notes.Broke = []trace.Pivot{{Row: i, Value: d}}
			return nil, notes, err
		}
		pivot(&notes, d)
	}
	if err := work.f.settleAs(v, name); err != nil {
		return nil, notes, err
	}
	factorNotes(&notes, work.f, a)
	return work.f, notes, nil
}

// factorNotes takes size and growth of settled factors of A into the notes.
func factorNotes(notes *trace.BuildNotes, f *factors, a *linear.CSR) {
	notes.Entries = int64(a.NRows + f.entries)
	notes.Fill = float64(notes.Entries) / float64(a.Entries())
	if f.self {
		notes.Entries = int64(a.NRows + f.entries/2)
		notes.Symmetric, notes.Definite = true, true
	}
	notes.Bytes = f.bytes()
	notes.Growth = growth(f, a)
}
