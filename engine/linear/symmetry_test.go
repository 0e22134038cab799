package linear

import "testing"

// 0.1 + 0.2 − 0.3 leaves 5.5e-17 in one order of summation and 2.8e-17 in
// another: of parts of size 0.3 that is rounding, of themselves it is half.
func TestSumsThatCancelAreTheSame(t *testing.T) {
	a, b, c := 0.1, 0.2, 0.3
	v, w := a+b-c, b-c+a
	if v == w || w == 0 {
		t.Fatalf("the sums do not differ: %g and %g", v, w)
	}
	for _, k := range []struct {
		name string
		di   float64
		dj   float64
		v, w float64
		same bool
	}{
		{"of parts that cancel", 0.3, 0.3, v, w, true},
		{"nothing on one side", 0.3, 0.3, v, 0, true},
		{"parts as small as they are", 1e-17, 1e-17, v, w, false},
		{"stiff and soft", 3e8, 3e-10, v, w, true},
		{"15 units", 1, 1, 15 * 0x1p-53, 0, true},
		{"17 units", 1, 1, 17 * 0x1p-53, 0, false},
		{"large entries", 0, 0, 1, 1 + 0x1p-52, true},
		{"no diagonal, small rows", 0, 0, v, w, false},
	} {
		m := NewMirror(FromEntries(2, 2, []Entry{{0, 0, k.di}, {0, 1, k.v}, {1, 0, k.w}, {1, 1, k.dj}}))
		if got := m.Same(0, 1, k.v, k.w); got != k.same || m.Same(1, 0, k.w, k.v) != got {
			t.Errorf("%s: %v", k.name, got)
		}
	}
}

// Where one diagonal entry is zero the rows decide, and the smaller one of them.
func TestSameWithoutDiagonal(t *testing.T) {
	a := FromEntries(3, 3, []Entry{{0, 0, 1e10}, {0, 1, 1e-16}, {1, 2, 1}, {2, 1, 1}, {2, 2, 1}})
	m := NewMirror(a)
	if !m.Same(0, 1, 1e-16, 0) || m.Same(0, 1, 1e-14, 0) {
		t.Error("the row of 1 does not decide")
	}
}

// Pairs goes over a row and its mirror, against At.
func TestPairs(t *testing.T) {
	a := FromEntries(4, 4, []Entry{{0, 0, 1}, {0, 2, 2}, {1, 0, 3}, {2, 0, 4}, {3, 1, 5}, {3, 3, 6}})
	at := a.Transpose()
	for i := range 4 {
		last, seen := -1, 0
		Pairs(a, at, i, func(j int, v, w float64) {
			if j <= last || v != a.At(i, j) || w != a.At(j, i) {
				t.Errorf("(%d,%d): %g and %g", i, j, v, w)
			}
			last = j
			seen++
		})
		want := 0
		for j := range 4 {
			if a.At(i, j) != 0 || a.At(j, i) != 0 {
				want++
			}
		}
		if seen != want {
			t.Errorf("row %d: %d pairs, want %d", i, seen, want)
		}
	}
	if a.Symmetric() || !FromEntries(2, 2, []Entry{{0, 0, 1}, {0, 1, 1}, {1, 0, 1 + 0x1p-52}, {1, 1, 1}}).Symmetric() {
		t.Error("symmetric to rounding is not told from not symmetric")
	}
}
