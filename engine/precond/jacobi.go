package precond

import (
	"context"
	"fmt"
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var jacobiEntry = Entry{
	Name: "jacobi", Title: "diagonal scaling",
	Source:    "Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. (2003), section 10.2; Jacobi, Astron. Nachr. 22 (1845)",
	Needs:     linear.NeedsDiagonal,
	Fixed:     true,
	Symmetric: true, Transposes: true,
	Estimate: func(a *linear.CSR, _ linear.Values) (int64, bool) {
		if a == nil {
			return 0, false
		}
		return 8 * int64(a.NRows), true
	},
	Build: buildJacobi,
}

// jacobi applies M⁻¹ = diag(A)⁻¹.
type jacobi struct {
	inverse []float64 // 1/a_ii, length n
}

// Apply computes dst = M⁻¹ x.
func (j *jacobi) Apply(dst, x []float64) { linear.MulDot(dst, j.inverse, x) }

// ApplyDot computes dst = M⁻¹ x and returns xᵀ dst.
func (j *jacobi) ApplyDot(dst, x []float64) float64 { return linear.MulDot(dst, j.inverse, x) }

// ApplyT computes dst = M⁻ᵀ x, which is M⁻¹ x.
func (j *jacobi) ApplyT(dst, x []float64) { j.Apply(dst, x) }

func buildJacobi(_ context.Context, s linear.System, _ linear.Values, _ func(float64)) (linear.Applier, trace.BuildNotes, error) {
	n := s.N()
	notes := trace.BuildNotes{Entries: int64(n), Bytes: 8 * int64(n), Symmetric: true, Definite: true}
	diag, ok := linear.As[linear.Diagonaler](s.A)
	if !ok {
		return nil, notes, fmt.Errorf("jacobi needs the diagonal; this operator does not give it")
	}
	d := linear.Bulk[float64](n)
	diag.Diagonal(d)
	if m := s.Matrix(); m != nil && m.Entries() > 0 {
		notes.Fill = float64(n) / float64(m.Entries())
	}
	for i, v := range d {
		w := 1 / v
		if v == 0 || math.IsInf(w, 0) || math.IsNaN(w) {
			return nil, notes, &Breakdown{Method: "jacobi", Row: i, Pivot: v, Why: "the diagonal entry has no inverse"}
		}
		pivot(&notes, v)
		notes.Definite = notes.Definite && v > 0
		d[i] = w
	}
	return &jacobi{inverse: d}, notes, nil
}

// pivot takes a pivot's size into the notes.
func pivot(notes *trace.BuildNotes, v float64) {
	size := math.Abs(v)
	if notes.MinPivot == 0 || size < notes.MinPivot {
		notes.MinPivot = size
	}
	notes.MaxPivot = max(notes.MaxPivot, size)
}
