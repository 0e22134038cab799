package inspect_test

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
)

// ring is seepage on a ring of n cells without a fixed head.
func ring(n int, weight func(i int) float64) *linear.CSR {
	var out []linear.Entry
	for i := range n {
		j, w := (i+1)%n, weight(i)
		out = append(out, e(i, i, w), e(j, j, w), e(i, j, -w), e(j, i, -w))
	}
	return linear.FromEntries(n, n, out)
}

func unit(i int) float64 { return 1 }

func TestRingIsSingular(t *testing.T) {
	n := 64
	s := ones(ring(n, unit), 17)
	f := inspected(t, s)
	expect(t, "singular", f.Singular, inspect.Yes, inspect.Proved)
	expect(t, "row sums", f.RowSumsZero, inspect.Yes, inspect.Proved)
	expect(t, "definite", f.PositiveDefinite, inspect.No, inspect.Proved)
	expect(t, "semidefinite", f.Semidefinite, inspect.Yes, inspect.Proved)
	expect(t, "all of ones", f.Unreachable, inspect.Yes, inspect.Proved)
	if math.Abs(f.Unreachable.Value-1) > 1e-15 || f.NullComponents != 1 || f.Components != 1 {
		t.Errorf("value %g, %d null components", f.Unreachable.Value, f.NullComponents)
	}
	// The part of a unit vector along the constants is 1/√n.
	clear(s.B)
	s.B[5] = 1
	f = inspected(t, s)
	expect(t, "part of e", f.Unreachable, inspect.Yes, inspect.Proved)
	if math.Abs(f.Unreachable.Value-0.125) > 1e-16 {
		t.Errorf("value %g, want 1/8", f.Unreachable.Value)
	}
	s.B[9] = -1
	expect(t, "consistent b", inspected(t, s).Unreachable, inspect.No, inspect.Measured)
	clear(s.B)
	expect(t, "b = 0", inspected(t, s).Unreachable, inspect.No, inspect.Proved)
}

// With weights that are not exact in binary, the sums vanish to rounding only:
// nothing may be called proved, and no negative curvature reported.
func TestRingToRounding(t *testing.T) {
	f := inspected(t, ones(ring(50, func(i int) float64 { return 1 / float64(3+i) }), 17))
	expect(t, "singular", f.Singular, inspect.Yes, inspect.Measured)
	expect(t, "definite", f.PositiveDefinite, inspect.No, inspect.Measured)
	expect(t, "semidefinite", f.Semidefinite, inspect.Yes, inspect.Measured)
	expect(t, "unreachable", f.Unreachable, inspect.Yes, inspect.Measured)
}

func TestRingWithinDigits(t *testing.T) {
	a := ring(50, func(i int) float64 { return 1 / float64(3+i) })
	for k, v := range a.Val {
		a.Val[k] = printed(v, 6)
	}
	f := inspected(t, ones(a, 6))
	expect(t, "singular", f.Singular, inspect.Yes, inspect.Measured)
	expect(t, "definite", f.PositiveDefinite, inspect.No, inspect.Measured)
	// The same matrix with full digits has sums that differ from zero.
	f = inspected(t, ones(a, 17))
	expect(t, "row sums with full digits", f.RowSumsZero, inspect.No, inspect.Proved)
	// Exact sums of few printed digits prove nothing about the full numbers.
	f = inspected(t, ones(ring(50, unit), 6))
	expect(t, "singular with few digits", f.Singular, inspect.Yes, inspect.Measured)
}

// Two rings and an empty row: three null vectors.
func TestSeveralNullVectors(t *testing.T) {
	r := ring(4, unit)
	var out []linear.Entry
	for i := range 4 {
		cols, vals := r.Row(i)
		for k, j := range cols {
			out = append(out, e(i, int(j), vals[k]), e(i+4, int(j)+4, 3*vals[k]))
		}
	}
	s := ones(linear.FromEntries(9, 9, out), 17)
	s.B = []float64{1, 0, 0, 0, 0, 2, 0, 0, 3}
	f := inspected(t, s)
	if f.Components != 3 || f.NullComponents != 3 || !slices.Equal(f.EmptyRows, []int{8}) {
		t.Errorf("%d components, %d null, empty %v", f.Components, f.NullComponents, f.EmptyRows)
	}
	want := math.Sqrt((0.25 + 1 + 9) / (1 + 4 + 9)) // (1/2)² + (2/2)² + 3² of ‖b‖² = 14
	if expect(t, "unreachable", f.Unreachable, inspect.Yes, inspect.Proved); math.Abs(f.Unreachable.Value-want) > 1e-15 {
		t.Errorf("value %g, want %g", f.Unreachable.Value, want)
	}
	if f.Unreachable.Rows[0] != 8 {
		t.Errorf("rows %v: the empty row carries most", f.Unreachable.Rows)
	}
}

// Columns of a rate matrix sum to zero, its rows do not: the left null vector
// is known, the right one is not.
func TestColumnSums(t *testing.T) {
	a := dense([]float64{-3, 1, 0}, []float64{1, -1, 4}, []float64{2, 0, -4})
	f := inspected(t, ones(a, 17))
	expect(t, "rows", f.RowSumsZero, inspect.No, inspect.Proved)
	expect(t, "columns", f.ColSumsZero, inspect.Yes, inspect.Proved)
	expect(t, "singular", f.Singular, inspect.Yes, inspect.Proved)
	if expect(t, "unreachable", f.Unreachable, inspect.Yes, inspect.Proved); math.Abs(f.Unreachable.Value-1) > 1e-15 {
		t.Errorf("value %g", f.Unreachable.Value)
	}
	// The transpose: its right null vector is known, its left one is not.
	f = inspected(t, ones(a.Transpose(), 17))
	expect(t, "singular", f.Singular, inspect.Yes, inspect.Proved)
	expect(t, "unreachable", f.Unreachable, inspect.Unknown, "")
}

func TestStructuralDefect(t *testing.T) {
	// Rows 0, 2 and 3 have nonzeros in columns 1 and 2 only.
	a := linear.FromEntries(5, 5, []linear.Entry{e(0, 1, 1), e(0, 2, 2), e(1, 0, 1), e(1, 3, 1), e(2, 1, 3), e(3, 2, 4), e(3, 4, 0), e(4, 4, 1), e(4, 0, 1), e(0, 0, 0)})
	f := inspected(t, ones(a, 3))
	expect(t, "singular", f.Singular, inspect.Yes, inspect.Proved)
	rows := slices.Clone(f.Singular.Rows)
	slices.Sort(rows)
	if !slices.Equal(rows, []int{0, 2, 3}) || f.Singular.Why != "3 rows have nonzeros in only 2 columns" {
		t.Errorf("rows %v: %s", f.Singular.Rows, f.Singular.Why)
	}
}

// The oracle tries all assignments. A pattern without one is singular; the
// rows named must indeed have fewer columns than they are.
func TestStructureAgainstAllAssignments(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	defects := 0
	for range 300 {
		n := 2 + rng.IntN(6)
		var out []linear.Entry
		used := make([][]bool, n)
		for i := range used {
			used[i] = make([]bool, n)
			for j := range used[i] {
				if used[i][j] = rng.IntN(n) == 0; used[i][j] {
					out = append(out, e(i, j, rng.Float64()+0.5))
				}
			}
		}
		f := inspected(t, ones(linear.FromEntries(n, n, out), 17))
		if assignable(used, 0, make([]bool, n)) {
			if f.Singular.Answer == inspect.Yes {
				t.Fatalf("%v: %s", used, f.Singular.Why)
			}
			continue
		}
		defects++
		expect(t, "pattern without an assignment", f.Singular, inspect.Yes, inspect.Proved)
		if f.EmptyRowCount+f.EmptyColCount > 0 {
			continue
		}
		cols := map[int]bool{}
		for _, i := range f.Singular.Rows {
			for j := range n {
				if used[i][j] {
					cols[j] = true
				}
			}
		}
		if len(cols) != len(f.Singular.Rows)-1 {
			t.Fatalf("%v: rows %v have %d columns", used, f.Singular.Rows, len(cols))
		}
	}
	if defects < 50 {
		t.Errorf("only %d defects", defects)
	}
}

func assignable(used [][]bool, i int, taken []bool) bool {
	if i == len(used) {
		return true
	}
	for j, u := range used[i] {
		if u && !taken[j] {
			taken[j] = true
			if assignable(used, i+1, taken) {
				return true
			}
			taken[j] = false
		}
	}
	return false
}

// A path whose weights spread over many powers of two is one part with constants:
// one direction is free, whatever else is nearly so in other units.
func TestConstantsAreCountedOnce(t *testing.T) {
	for _, powers := range [][]float64{{-40, 30, -10, 0, 20, -30, 5}, {-20, 25, -5, 10}, {-40, 12}, {-10, 25, -10, 25, -10}} {
		n := len(powers) + 1
		var out []linear.Entry
		for i, p := range powers {
			w := math.Exp2(p)
			out = append(out, e(i, i, w), e(i+1, i+1, w), e(i, i+1, -w), e(i+1, i, -w))
		}
		s := ones(linear.FromEntries(n, n, out), 17)
		s.B[0] = 1 - float64(n)
		d := studied(t, s, inspect.Quick).Study
		zero := 0
		for _, v := range d.Null {
			if v.Quotient <= inspect.ZeroLimit {
				zero++
			}
		}
		if d.Nullity != 1 || zero != 1 || d.More {
			t.Errorf("2^%v: %d free, %d to rounding, more %v; the kernel of a connected graph is the constants", powers, d.Nullity, zero, d.More)
		}
		if f := studied(t, s, inspect.Quick); f.Unreachable.Answer == inspect.Yes {
			t.Errorf("2^%v: b sums to zero, and is called out of reach: %s", powers, f.Unreachable.Why)
		}
	}
}
