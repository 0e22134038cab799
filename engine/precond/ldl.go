package precond

import (
	"context"

	"dwindle/engine/direct"
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var ldlEntry = Entry{
	Name: "ldl", Title: "complete LDLᵀ factorisation with pivots of order 1 and 2, a direct solve",
	Source:     "Bunch and Kaufman, Math. Comp. 31 (1977) 163–179; Duff and Reid, ACM Trans. Math. Softw. 9 (1983) 302–325",
	Params:     exactParams,
	Needs:      linear.NeedsEntries,
	Assumes:    linear.AssumesSymmetric,
	Fixed:      true,
	Symmetric:  true,
	Exact:      true,
	Transposes: true,
	Estimate: func(a *linear.CSR, v linear.Values) (int64, bool) {
		if a == nil {
			return 0, false
		}
		if a.NRows > predictRows {
			return meshBytes(a.NRows), false
		}
		sym := direct.Predict(a, ordering(v))
		return sym.Bytes() + sym.Stack + refineBytes(a.NRows, v), false // pivots that must wait cost more
	},
	Build: buildLDL,
}

// buildLDL computes P D A D Pᵀ = L B Lᵀ.
func buildLDL(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	var notes trace.BuildNotes
	a, err := symmetricOf(ctx, s, "ldl")
	if err != nil {
		return nil, notes, err
	}
	f, err := direct.FactorLDL(ctx, a, direct.Predict(a, ordering(v)), progress)
	if err != nil {
		return nil, notes, err
	}
	notes.MinPivot, notes.MaxPivot = f.MinPivot, f.MaxPivot
	if f.ZeroRow >= 0 {
		notes.Broke = []trace.Pivot{{Row: f.ZeroRow}}
		return nil, notes, &Breakdown{Method: "ldl", Row: f.ZeroRow, Why: "the pivot vanishes to rounding"}
	}
	notes.Entries = f.Entries()
	notes.Fill = float64(2*f.Entries()-int64(a.NRows)) / float64(a.Entries())
	notes.Bytes = f.Bytes() + refineBytes(a.NRows, v)
	notes.Symmetric, notes.Definite = true, f.Inertia.Negative == 0 && f.Inertia.Zero == 0
	return newExact(a, f, f, v), notes, nil
}
