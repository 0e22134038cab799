package precond

import (
	"context"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var icEntry = Entry{
	Name: "ic", Title: "incomplete Cholesky, no fill",
	Source: "Meijerink and van der Vorst, Math. Comp. 31 (1977) 148–162; shift: Manteuffel, Math. Comp. 34 (1980) 473–497",
	Params: []linear.Param{{Name: "level", Kind: linear.Int, Default: 0, Min: 0, Max: 0,
		Meaning: "fill level: 0 keeps the pattern of A"}},
	Needs:     linear.NeedsEntries | linear.NeedsDiagonal,
	Assumes:   linear.AssumesSymmetric | linear.AssumesDefinite,
	Fixed:     true,
	Symmetric: true, Transposes: true,
	Estimate: func(a *linear.CSR, _ linear.Values) (int64, bool) {
		if a == nil {
			return 0, false
		}
		lower, _ := halves(a)
		return factorBytes(a.NRows, lower, lower), true
	},
	Build: buildIC,
}

// buildIC factors the lower triangle of A as L D Lᵀ on its own pattern. Where
// a pivot is not positive it factors A + α diag(A) instead, with the smallest
// workable α that leastShift finds.
func buildIC(ctx context.Context, s linear.System, _ linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	var notes trace.BuildNotes
	a, err := entriesOf(s, "ic")
	if err != nil {
		return nil, notes, err
	}
	if err := positiveDiagonal(a); err != nil {
		return nil, notes, err
	}
	w := newICWork(a)
	if err := leastShift(ctx, w, &notes, progress); err != nil {
		return nil, notes, err
	}
	f := w.finish()
	for _, d := range w.pivots {
		pivot(&notes, d)
	}
	notes.Entries = int64(a.NRows + f.lower.Entries())
	notes.Fill = float64(a.NRows+2*f.lower.Entries()) / float64(a.Entries())
	notes.Bytes = f.bytes()
	notes.Symmetric, notes.Definite = true, true
	notes.Growth = growth(f, a)
	return f, notes, nil
}

// positiveDiagonal refuses a diagonal entry that no shift of the form
// α diag(A) can repair.
func positiveDiagonal(a *linear.CSR) error {
	for i := 0; i < a.NRows; i++ {
		at, ok := diagonal(a, i)
		if !ok {
			return &Breakdown{Method: "ic:0", Row: i, Why: "missing diagonal entry"}
		}
		if d := a.Val[at]; !(d > 0) {
			return &Breakdown{Method: "ic:0", Row: i, Pivot: d, Why: "the diagonal entry is not positive, no shift repairs it"}
		}
	}
	return nil
}
