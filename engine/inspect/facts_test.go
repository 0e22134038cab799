package inspect_test

import (
	"context"
	"math"
	"reflect"
	"slices"
	"testing"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
)

func TestCountsAndRanges(t *testing.T) {
	a := linear.FromEntries(4, 4, []linear.Entry{e(0, 0, 2), e(0, 3, -5), e(1, 1, 0), e(1, 0, 1), e(2, 2, -4), e(3, 1, 0), e(3, 2, 0.5)})
	s := ones(a, 17)
	s.Source = linear.Source{Format: "made up", Stored: 7, Duplicates: 1, ExplicitZeros: 2, Notes: []string{"note"}}
	f := inspected(t, s)
	if f.N != 4 || f.Entries != 7 || f.Format != "made up" || f.Stored != 7 || f.Duplicates != 1 || f.ExplicitZeros != 2 || f.Notes[0] != "note" {
		t.Errorf("heading: %+v", f)
	}
	if f.RHSNorm != 2 || f.ZeroRHS || f.RHS != linear.Ones {
		t.Errorf("right-hand side: %g %v", f.RHSNorm, f.ZeroRHS)
	}
	if f.RowEntries != (inspect.Range{Min: 1, Max: 2, MinRow: 2, MaxRow: 0}) || f.Bandwidth != 3 {
		t.Errorf("entries a row %+v, bandwidth %d", f.RowEntries, f.Bandwidth)
	}
	if f.DiagPositive != 1 || f.DiagNegative != 1 || f.DiagZero != 1 || f.DiagMissing != 1 || !slices.Equal(f.DiagRows, []int{2, 1, 3}) {
		t.Errorf("diagonal %d %d %d %d, rows %v", f.DiagPositive, f.DiagNegative, f.DiagZero, f.DiagMissing, f.DiagRows)
	}
	if f.Diag != (inspect.Range{Min: 2, Max: 4, MinRow: 0, MaxRow: 2}) {
		t.Errorf("diagonal range %+v", f.Diag)
	}
	if f.RowNorm != (inspect.Range{Min: 0.5, Max: 5, MinRow: 3, MaxRow: 0}) || f.ColNorm != (inspect.Range{Min: 2, Max: 5, MinRow: 0, MaxRow: 3}) {
		t.Errorf("norms of rows %+v, columns %+v", f.RowNorm, f.ColNorm)
	}
	if fro := math.Sqrt(4 + 25 + 1 + 16 + 0.25); f.NormInf != 7 || f.NormOne != 5 || math.Abs(f.NormFro-fro) > 1e-14*fro {
		t.Errorf("norms %g %g %g", f.NormInf, f.NormOne, f.NormFro)
	}
	if f.Gershgorin != (inspect.Range{Min: -4, Max: 7, MinRow: 2, MaxRow: 0}) {
		t.Errorf("discs %+v", f.Gershgorin)
	}
	if f.EmptyColCount != 1 || !slices.Equal(f.EmptyCols, []int{1}) || f.EmptyRowCount != 0 {
		t.Errorf("empty rows %d, columns %v", f.EmptyRowCount, f.EmptyCols)
	}
	expect(t, "singular", f.Singular, inspect.Yes, inspect.Proved)
}

// 0.1 + 0.2 exceeds 0.3 in the doubles themselves, by 2.8e-17; the float sum
// of -0.1, -0.2 and 0.3 alone would not tell by how much. Halves are exact.
func TestDominanceIsExact(t *testing.T) {
	a := dense([]float64{0.3, -0.1, -0.2}, []float64{0.25, 0.5, 0.25}, []float64{0.5, 0, 0.5 + 0x1p-53})
	if f := inspected(t, ones(a, 17)); f.Dominant != 2 || f.StrictlyDominant != 1 {
		t.Errorf("%d rows dominant, %d strictly", f.Dominant, f.StrictlyDominant)
	}
}

func TestSymmetry(t *testing.T) {
	next := math.Nextafter(1, 2)
	for _, c := range []struct {
		name   string
		a      *linear.CSR
		digits int
		answer inspect.Answer
		sure   inspect.Certainty
		value  float64
		rows   []int
	}{
		{"exact", dense([]float64{4, 1}, []float64{1, 4}), 17, inspect.Yes, inspect.Proved, 0, nil},
		{"to rounding", dense([]float64{4, 1}, []float64{next, 4}), 17, inspect.Yes, inspect.Measured, 0x1p-52 / 4, []int{0, 1}},
		{"a sum that cancels", dense([]float64{4, 4e-16}, []float64{0, 9}), 17, inspect.Yes, inspect.Measured, 4e-16 / 6, []int{0, 1}},
		{"a small entry", dense([]float64{4, 4e-13}, []float64{0, 9}), 17, inspect.No, inspect.Proved, 4e-13 / 6, []int{0, 1}},
		{"within digits", dense([]float64{4, 1.00001}, []float64{1, 4}), 6, inspect.Yes, inspect.Measured, 1.00001 - 1, []int{0, 1}},
		{"beyond digits", dense([]float64{4, 1.0001}, []float64{1, 9}), 6, inspect.No, inspect.Proved, (1.0001 - 1) / 6, []int{0, 1}},
		{"no", dense([]float64{4, 0, 1}, []float64{0, 4, 0}, []float64{2, 0, 4}), 17, inspect.No, inspect.Proved, 0.25, []int{0, 2}},
		{"one zero is stored", linear.FromEntries(2, 2, []linear.Entry{e(0, 0, 1), e(0, 1, 0), e(1, 1, 1)}), 17, inspect.Yes, inspect.Proved, 0, nil},
		{"zero diagonal", dense([]float64{0, 2}, []float64{1, 0}), 17, inspect.No, inspect.Proved, 0.5, []int{0, 1}},
	} {
		f := inspected(t, ones(c.a, c.digits))
		expect(t, c.name, f.Symmetric, c.answer, c.sure)
		if want := c.value; c.name != "within digits" && math.Abs(f.Symmetric.Value-want) > 1e-12*want || !slices.Equal(f.Symmetric.Rows, c.rows) {
			t.Errorf("%s: value %g in rows %v, want %g in %v", c.name, f.Symmetric.Value, f.Symmetric.Rows, want, c.rows)
		}
	}
	f := inspected(t, ones(dense([]float64{1, 1}, []float64{0, 1}), 17))
	expect(t, "pattern", f.PatternSymmetric, inspect.No, inspect.Proved)
	if want := math.Sqrt(2.0 / 3); math.Abs(f.Asymmetry-want) > 1e-15 {
		t.Errorf("asymmetry %g, want %g", f.Asymmetry, want)
	}
}

func TestTriangleOnly(t *testing.T) {
	lower := dense([]float64{1, 0}, []float64{3, 1})
	s := ones(lower, 17)
	expect(t, "lower", inspected(t, s).TriangleOnly, inspect.Yes, inspect.Proved)
	s.Source.Symmetric = true
	expect(t, "declared symmetric", inspected(t, s).TriangleOnly, inspect.No, inspect.Proved)
	expect(t, "upper", inspected(t, ones(lower.Transpose(), 17)).TriangleOnly, inspect.Yes, inspect.Proved)
	expect(t, "diagonal", inspected(t, ones(dense([]float64{1}), 17)).TriangleOnly, inspect.No, inspect.Proved)
	expect(t, "both", inspected(t, ones(dense([]float64{1, 2}, []float64{3, 1}), 17)).TriangleOnly, inspect.No, inspect.Proved)
}

func TestSingletons(t *testing.T) {
	a := linear.FromEntries(5, 5, []linear.Entry{e(0, 0, 1e6), e(0, 2, -2), e(1, 1, 3), e(1, 0, 0), e(2, 2, 5e5), e(3, 3, -7), e(4, 2, 1), e(4, 4, 9)})
	f := inspected(t, ones(a, 17))
	if f.Singletons != 2 || !slices.Equal(f.SingletonRows, []int{1, 3}) || f.SingletonDiag != (inspect.Range{Min: -7, Max: 3, MinRow: 3, MaxRow: 1}) {
		t.Errorf("%d singletons %v, %+v", f.Singletons, f.SingletonRows, f.SingletonDiag)
	}
	if f.RestGershgorin != (inspect.Range{Min: 8, Max: 1e6 + 2, MinRow: 4, MaxRow: 0}) || f.RestDiag != (inspect.Range{Min: 9, Max: 1e6, MinRow: 4, MaxRow: 0}) {
		t.Errorf("the rest: %+v, %+v", f.RestGershgorin, f.RestDiag)
	}
}

func TestPicture(t *testing.T) {
	n := 130
	var out []linear.Entry
	for i := range n {
		out = append(out, e(i, i, 1), e(i, 0, 1))
	}
	p := inspected(t, ones(linear.FromEntries(n, n, out), 17)).Pattern
	if len(p) != 64 || len(p[0]) != 64 {
		t.Fatalf("picture of %d cells", len(p))
	}
	for i := range p {
		for j := range p {
			if want := i == j || j == 0; (p[i][j] > 0) != want || p[i][j] > 1 {
				t.Fatalf("cell (%d,%d) is %g", i, j, p[i][j])
			}
		}
	}
	if p := inspected(t, ones(dense([]float64{1, 0}, []float64{0, 1}), 17)).Pattern; len(p) != 2 || p[0][0] != 1 || p[0][1] != 0 {
		t.Errorf("small picture %v", p)
	}
}

// Facts given out are never changed afterwards, and only the last is complete.
func TestFactsGivenOutStay(t *testing.T) {
	a := dense([]float64{1, 2, 0}, []float64{2, -1, 0}, []float64{0, 0, 0})
	var given, kept []inspect.Facts
	var pointers []*inspect.Facts
	last, err := inspect.Inspect(context.Background(), ones(a, 17), func(f *inspect.Facts) {
		pointers = append(pointers, f)
		given, kept = append(given, *f), append(kept, clone(*f))
	})
	if err != nil {
		t.Fatal(err)
	}
	for k, p := range pointers {
		if !same(*p, kept[k]) || !same(given[k], kept[k]) {
			t.Errorf("facts %d were changed after they were given out", k)
		}
		if p.Complete != (k == len(pointers)-1) {
			t.Errorf("facts %d: complete is %v", k, p.Complete)
		}
	}
	if len(pointers) < 4 || !same(*last, kept[len(kept)-1]) {
		t.Errorf("%d stages", len(pointers))
	}
}

// clone copies every slice of the facts.
func clone(f inspect.Facts) inspect.Facts {
	v := reflect.ValueOf(&f).Elem()
	for k := range v.NumField() {
		switch x := v.Field(k); {
		case x.Kind() == reflect.Slice:
			x.Set(reflect.AppendSlice(reflect.MakeSlice(x.Type(), 0, x.Len()), x))
		case x.Type() == reflect.TypeFor[inspect.Fact]():
			rows := x.FieldByName("Rows")
			rows.Set(reflect.AppendSlice(reflect.MakeSlice(rows.Type(), 0, rows.Len()), rows))
		}
	}
	return f
}

// same compares, taking NaN for equal to itself.
func same(f, g inspect.Facts) bool {
	v, w := reflect.ValueOf(&f).Elem(), reflect.ValueOf(&g).Elem()
	for k := range v.NumField() {
		x, y := v.Field(k), w.Field(k)
		if x.Type() == reflect.TypeFor[inspect.Fact]() {
			a, b := x.Interface().(inspect.Fact), y.Interface().(inspect.Fact)
			if a.Answer != b.Answer || a.Why != b.Why || a.Certainty != b.Certainty || !slices.Equal(a.Rows, b.Rows) ||
				a.Value != b.Value && !(math.IsNaN(a.Value) && math.IsNaN(b.Value)) {
				return false
			}
		} else if x.Kind() == reflect.Slice && x.Len() == 0 && y.Len() == 0 {
			continue
		} else if !reflect.DeepEqual(x.Interface(), y.Interface()) {
			return false
		}
	}
	return true
}

func TestCancelledAtAnyStage(t *testing.T) {
	for stop := range 5 {
		ctx, cancel := context.WithCancel(context.Background())
		k := 0
		_, err := inspect.Inspect(ctx, ones(dense([]float64{2, 1}, []float64{1, 2}), 17), func(*inspect.Facts) {
			if k == stop {
				cancel()
			}
			k++
		})
		if err == nil || k != stop+1 {
			t.Errorf("cancelled after stage %d: err %v after %d stages", stop, err, k)
		}
		cancel()
	}
}

func TestMatrixFree(t *testing.T) {
	f := inspected(t, linear.System{A: linear.Func{N: 3, Do: func(dst, x []float64) { copy(dst, x) }}, B: make([]float64, 3)})
	if !f.MatrixFree || f.N != 3 || !f.ZeroRHS {
		t.Errorf("%+v", f)
	}
	expect(t, "definite", f.PositiveDefinite, inspect.Unknown, "")
}
