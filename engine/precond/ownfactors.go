package precond

import (
	"context"
	"fmt"
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var ownFactorsEntry = Entry{
	Name: "factors", Title: "your own triangular factors, M = L U", Source: "given by the user",
	Params: []linear.Param{
		{Name: "lower", Kind: linear.Path, Meaning: "lower triangular L, diagonal stored"},
		{Name: "upper", Kind: linear.Path, Meaning: "upper triangular U, diagonal stored"},
	},
	Fixed:       true,
	Symmetric:   true,
	InUserUnits: true,
	Estimate:    ownEstimate,
	Build:       buildOwnFactors,
}

// buildOwnFactors reads L and U and rewrites them as M = L' D R with unit
// triangles: L' = L diag(L)⁻¹, D = diag(L) diag(U), R = diag(U)⁻¹ U.
func buildOwnFactors(_ context.Context, s linear.System, v linear.Values, _ func(float64)) (linear.Applier, trace.BuildNotes, error) {
	var notes trace.BuildNotes
	l, err := own(s, v.Path("lower"))
	if err != nil {
		return nil, notes, err
	}
	u, err := own(s, v.Path("upper"))
	if err != nil {
		return nil, notes, err
	}
	dl, err := pivotsOf(l, v.Path("lower"), func(i, j int) bool { return j <= i })
	if err != nil {
		return nil, notes, err
	}
	du, err := pivotsOf(u, v.Path("upper"), func(i, j int) bool { return j >= i })
	if err != nil {
		return nil, notes, err
	}
	f := &factors{lower: strict(l, func(_, j int) float64 { return dl[j] }),
		upper: strict(u, func(i, _ int) float64 { return du[i] }), inverse: linear.Bulk[float64](s.N())}
	notes.MinPivot = math.Inf(1)
	for i := range f.inverse {
		d := dl[i] * du[i]
		f.inverse[i] = 1 / d
		notes.MinPivot, notes.MaxPivot = math.Min(notes.MinPivot, math.Abs(d)), math.Max(notes.MaxPivot, math.Abs(d))
	}
	f.settle()
	entries := l.Entries() + u.Entries() - s.N()
	notes.Entries, notes.Fill, notes.Bytes = int64(entries), fillOf(s, entries), f.bytes()
	return f, notes, nil
}

// pivotsOf returns the diagonal of a triangular matrix, every entry nonzero,
// and checks that no entry lies outside the triangle.
func pivotsOf(t *linear.CSR, name string, inside func(i, j int) bool) ([]float64, error) {
	d := make([]float64, t.NRows)
	for i := range d {
		cols, vals := t.Row(i)
		for k, c := range cols {
			if !inside(i, int(c)) && vals[k] != 0 {
				return nil, fmt.Errorf("%s: entry (%d,%d) lies outside the triangle", name, i+1, c+1)
			}
			if int(c) == i {
				d[i] = vals[k]
			}
		}
		if d[i] == 0 {
			return nil, &Breakdown{Method: "factors", Row: i, Why: "zero on the diagonal of " + name}
		}
	}
	return d, nil
}

// strict copies the off-diagonal entries, each divided by what over says.
func strict(t *linear.CSR, over func(i, j int) float64) *linear.CSR {
	s := triangle(t.NRows, t.Entries()-t.NRows)
	for i := 0; i < t.NRows; i++ {
		cols, vals := t.Row(i)
		for k, c := range cols {
			if int(c) != i && vals[k] != 0 {
				s.Col = append(s.Col, c)
				s.Val = append(s.Val, vals[k]/over(i, int(c)))
			}
		}
		s.Ptr[i+1] = len(s.Col)
	}
	return s
}
