package precond

import (
	"slices"
	"testing"

	"dwindle/engine/linear"
)

// drifting is the 5-point operator with couplings that differ both ways.
func drifting(n int) *linear.CSR {
	a := plate(n)
	for i := 0; i < a.NRows; i++ {
		cols, vals := a.Row(i)
		for k, c := range cols {
			switch d := int(c) - i; {
			case d == 1:
				vals[k] = -0.5
			case d > 1:
				vals[k] = -1.25
			case d == -1:
				vals[k] = -1.5 + 0.1*float64(i%3)
			}
		}
	}
	return a
}

// byRows factors a once more and leaves the triangles in rows.
func byRows(t *testing.T, a *linear.CSR, symmetric bool) *factors {
	t.Helper()
	if symmetric {
		w := newICWork(a)
		if broke, err := w.factor(t.Context(), 0, nil); broke >= 0 || err != nil {
			t.Fatalf("row %d, %v", broke, err)
		}
		f := &factors{lower: w.l, upper: w.l.Transpose(), self: true}
		for _, d := range w.pivots {
			f.inverse = append(f.inverse, 1/d)
		}
		return f
	}
	w := newILUWork(a, "ilu:0", false)
	for i := range a.NRows {
		if _, err := w.row(i); err != nil {
			t.Fatal(err)
		}
	}
	return w.f
}

// Factors stored by diagonals give the bits of those stored by rows, in less
// memory; their transpose agrees to rounding.
func TestFactorsByDiagonals(t *testing.T) {
	for name, a := range map[string]*linear.CSR{"ic:0": plate(110), "ilu:0": drifting(110)} {
		m, notes := made(t, a, name)
		f, rows := m.(*factors), byRows(t, a, name == "ic:0")
		if f.down == nil || f.lower != nil || f.upper != nil {
			t.Fatalf("%s of the plate is not stored by diagonals", name)
		}
		if notes.Bytes != f.bytes() || notes.Bytes >= rows.bytes() {
			t.Errorf("%s: %d bytes noted, %d by diagonals, %d by rows", name, notes.Bytes, f.bytes(), rows.bytes())
		}
		if want := int64(a.Entries()); name == "ilu:0" && notes.Entries != want || notes.Fill != 1 {
			t.Errorf("%s: %d entries, fill %g", name, notes.Entries, notes.Fill)
		}
		x, got, want := make([]float64, a.NRows), make([]float64, a.NRows), make([]float64, a.NRows)
		linear.Uniform(x, 7)
		f.Apply(got, x)
		rows.Apply(want, x)
		if !slices.Equal(got, want) {
			t.Errorf("%s: other bits than by rows", name)
		}
		f.ApplyT(got, x)
		rows.ApplyT(want, x)
		linear.Axpy(-1, want, got)
		if off := linear.NormInf(got); off > 1e-14*linear.NormInf(want) {
			t.Errorf("%s: the transpose differs from that by rows by %g", name, off)
		}
	}
}

// Small factors and those with entries near the diagonal stay in rows.
func TestFactorsByRows(t *testing.T) {
	for name, a := range map[string]*linear.CSR{"ic:0": plate(20), "ilut:0.001,12": plate(110)} {
		m, _ := made(t, a, name)
		if f := m.(*factors); f.down != nil || f.lower == nil || f.upper == nil {
			t.Errorf("%s of %d rows is stored by diagonals", name, a.NRows)
		}
	}
}
