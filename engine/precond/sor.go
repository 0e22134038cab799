package precond

import (
	"context"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var sorEntry = Entry{
	Name: "sor", Title: "successive over-relaxation, one sweep",
	Source: "Young, Trans. Amer. Math. Soc. 76 (1954) 92–111; Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. (2003), section 4.1",
	Params: []linear.Param{{Name: "omega", Kind: linear.Real, Default: 1,
		Min: 1e-6, Max: 1.999999, Meaning: "relaxation, above 0 and below 2"}},
	Needs: linear.NeedsEntries | linear.NeedsDiagonal,
	Fixed: true, Transposes: true,
	Estimate: ssorEntry.Estimate,
	Build: func(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
		return makeSOR(ctx, s, "sor", v.Real("omega"), progress)
	},
}

var gsEntry = Entry{
	Name: "gs", Title: "Gauss-Seidel, one sweep",
	Source: "Seidel, Abh. Bayer. Akad. Wiss. 11 (1874) 81–108; Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. (2003), section 4.1",
	Needs:  linear.NeedsEntries | linear.NeedsDiagonal,
	Fixed:  true, Transposes: true,
	Estimate: ssorEntry.Estimate,
	Build: func(ctx context.Context, s linear.System, _ linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
		return makeSOR(ctx, s, "gs", 1, progress)
	},
}

// sor applies the inverse of M = (D + ωL)/ω, where A = L + D + U, by one sweep
// down in natural order:
//
//	z_i = (ω/d_i) (x_i − Σ_{j<i} a_ij z_j)
//
// It works on the rows of A itself.
type sor struct {
	a       *linear.CSR
	diag    []int     // position of a_ii among A's entries, length n
	inverse []float64 // ω/d_i, length n
}

// Apply computes dst = M⁻¹ x.
func (s *sor) Apply(dst, x []float64) { relaxDown(s.a, s.diag, s.inverse, dst, x, 1) }

// ApplyT computes dst = M⁻ᵀ x by a sweep up that scatters the rows of L.
func (s *sor) ApplyT(dst, x []float64) {
	copy(dst, x)
	for i := len(dst) - 1; i >= 0; i-- {
		dst[i] *= s.inverse[i]
		from, to := s.a.Ptr[i], s.diag[i]
		scatter(dst, dst[i], s.a.Col[from:to], s.a.Val[from:to])
	}
}

func makeSOR(ctx context.Context, sys linear.System, name string, omega float64, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	var notes trace.BuildNotes
	a, err := entriesOf(sys, name)
	if err != nil {
		return nil, notes, err
	}
	s := &sor{a: a}
	if s.diag, s.inverse, err = pivots(ctx, a, name, omega, &notes, progress); err != nil {
		return nil, notes, err
	}
	lower := 0
	for i, at := range s.diag {
		lower += at - a.Ptr[i]
	}
	notes.Entries = int64(a.NRows + lower)
	notes.Fill = float64(notes.Entries) / float64(a.Entries())
	notes.Bytes = 16 * int64(a.NRows)
	return s, notes, nil
}
