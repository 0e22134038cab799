package precond

import (
	"context"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var ilutpEntry = Entry{
	Name: "ilutp", Title: "incomplete LU by threshold, with column pivoting",
	Source: "Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. (2003), section 10.4.4",
	Params: append(thresholdParams[:2:2], linear.Param{Name: "permtol", Kind: linear.Real, Default: 0.1, Min: 1e-6, Max: 1,
		Meaning: "exchanges columns where the diagonal entry is less than permtol times the largest"}, storeParam),
	Needs: linear.NeedsEntries,
	Fixed: true, Transposes: true,
	Estimate: func(a *linear.CSR, v linear.Values) (int64, bool) {
		bytes, exact := estimateILUT(a, v)
		if a != nil {
			bytes += 12 * int64(a.NRows)
		}
		return bytes, exact
	},
	Build: func(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
		w, notes, err := buildILUT(ctx, s, "ilutp", v, v.Real("permtol"), progress)
		if err != nil {
			return nil, notes, err
		}
		notes.Bytes += 12 * int64(len(w.col))
		return &permuted{f: w.f, col: w.col, work: make([]float64, len(w.col))}, notes, nil
	},
}

// permuted applies M⁻¹ = P (L D R)⁻¹, where A P ≈ L D R.
type permuted struct {
	f    *factors
	col  []int32   // the column of A at position k, length n
	work []float64 // length n
}

// Apply computes dst = M⁻¹ x.
func (m *permuted) Apply(dst, x []float64) {
	m.f.Apply(m.work, x)
	for k, c := range m.col {
		dst[c] = m.work[k]
	}
}

// ApplyT computes dst = M⁻ᵀ x.
func (m *permuted) ApplyT(dst, x []float64) {
	for k, c := range m.col {
		m.work[k] = x[c]
	}
	m.f.ApplyT(dst, m.work)
}
