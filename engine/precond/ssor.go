package precond

import (
	"context"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var ssorEntry = Entry{
	Name: "ssor", Title: "symmetric successive over-relaxation",
	Source: "Axelsson, BIT 12 (1972) 443–467; Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. (2003), section 10.2",
	Params: []linear.Param{{Name: "omega", Kind: linear.Real, Default: 1,
		Min: 1e-6, Max: 1.999999, Meaning: "relaxation, above 0 and below 2"}},
	Needs:     linear.NeedsEntries | linear.NeedsDiagonal,
	Fixed:     true,
	Symmetric: true, Transposes: true,
	Estimate: func(a *linear.CSR, _ linear.Values) (int64, bool) {
		if a == nil {
			return 0, false
		}
		return 16 * int64(a.NRows), true
	},
	Build: buildSSOR,
}

// ssor applies the inverse of M = (D + ωL) D⁻¹ (D + ωU) / (ω(2−ω)), where
// A = L + D + U, by a sweep down and a sweep up in natural order:
//
//	y_i = (ω(2−ω) x_i − ω Σ_{j<i} a_ij y_j) / d_i
//	z_i = y_i − (ω/d_i) Σ_{j>i} a_ij z_j
//
// It works on the rows of A itself.
type ssor struct {
	a       *linear.CSR
	diag    []int     // position of a_ii among A's entries, length n
	inverse []float64 // ω/d_i, length n
	omega   float64
	self    bool // A is symmetric, and so is M
}

// Apply computes dst = M⁻¹ x.
func (s *ssor) Apply(dst, x []float64) {
	relaxDown(s.a, s.diag, s.inverse, dst, x, 2-s.omega)
	relaxUp(s.a, s.diag, s.inverse, dst)
}

// ApplyDot computes dst = M⁻¹ x and returns xᵀ dst.
func (s *ssor) ApplyDot(dst, x []float64) float64 {
	s.Apply(dst, x)
	return linear.Dot(x, dst)
}

func buildSSOR(ctx context.Context, sys linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	return makeSSOR(ctx, sys, "ssor", v.Real("omega"), progress)
}

// makeSSOR builds the symmetric relaxation called name.
func makeSSOR(ctx context.Context, sys linear.System, name string, omega float64, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	var notes trace.BuildNotes
	a, err := entriesOf(sys, name)
	if err != nil {
		return nil, notes, err
	}
	s := &ssor{a: a, omega: omega}
	if s.diag, s.inverse, err = pivots(ctx, a, name, omega, &notes, progress); err != nil {
		return nil, notes, err
	}
	s.self = symmetric(a)
	notes.Entries, notes.Fill = int64(a.Entries()), 1
	notes.Bytes = 16 * int64(a.NRows)
	notes.Symmetric = s.self
	notes.Definite = s.self && positive(s.inverse)
	return s, notes, nil
}
