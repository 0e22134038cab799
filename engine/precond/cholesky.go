package precond

import (
	"context"

	"dwindle/engine/direct"
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var choleskyEntry = Entry{
	Name: "cholesky", Title: "complete Cholesky factorisation, a direct solve",
	Source:     "Duff and Reid, ACM Trans. Math. Softw. 9 (1983) 302–325; orders: Amestoy, Davis and Duff, SIAM J. Matrix Anal. Appl. 17 (1996) 886–905, George, SIAM J. Numer. Anal. 10 (1973) 345–363",
	Params:     exactParams,
	Needs:      linear.NeedsEntries | linear.NeedsDiagonal,
	Assumes:    linear.AssumesSymmetric | linear.AssumesDefinite,
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
		return sym.Bytes() + sym.Stack + refineBytes(a.NRows, v), true
	},
	Build: buildCholesky,
}

// buildCholesky computes P A Pᵀ = L Lᵀ. The bytes noted include the stack that
// is needed while it is built.
func buildCholesky(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	var notes trace.BuildNotes
	a, err := symmetricOf(ctx, s, "cholesky")
	if err != nil {
		return nil, notes, err
	}
	sym := direct.Predict(a, ordering(v))
	f, err := direct.FactorCholesky(ctx, a, sym, progress)
	if err != nil {
		err = broken("cholesky", err)
		if b, ok := err.(*Breakdown); ok {
			notes.Broke = []trace.Pivot{{Row: b.Row, Value: b.Pivot}}
		}
		return nil, notes, err
	}
	f.Pivots(func(d float64) { pivot(&notes, d) })
	notes.Entries = f.Entries()
	notes.Fill = float64(2*f.Entries()-int64(a.NRows)) / float64(a.Entries())
	notes.Bytes = f.Bytes() + sym.Stack + refineBytes(a.NRows, v)
	notes.Symmetric, notes.Definite = true, true
	return newExact(a, f, f, v), notes, nil
}
