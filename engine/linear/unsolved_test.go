package linear

import "testing"

// A row counts as unsolved where its residual is large against what it would
// have with the largest x of its component, or where its norm is far below the others', and not
// where x has merely died away.
func TestUnsolvedRows(t *testing.T) {
	a := FromEntries(5, 5, []Entry{{0, 0, 2}, {0, 1, -1}, {1, 1, 2}, {2, 2, 2}, {3, 3, 2e-12}, {4, 4, 1e10}})
	x := []float64{1, 1e-9, 1, 1, 1}
	u := NewUnsolved(a, x, 1e-4)
	for _, c := range []struct {
		what            string
		row             int
		r, b            float64
		unsolved, small bool
	}{
		{"solved", 0, 1e-9, 2, false, false},
		{"x has died away", 1, 2e-9, 0, false, false},
		{"large against all of x", 2, 1, 2, true, false},
		{"in small units", 3, 1e-12, 2e-12, true, true},
		{"in small units, solved", 3, 1e-18, 2e-12, false, false},
		{"no residual", 1, 0, 0, false, false},
	} {
		if _, unsolved, small := u.Row(c.row, c.r, c.b); unsolved != c.unsolved || small != c.small {
			t.Errorf("%s: unsolved %v, small %v", c.what, unsolved, small)
		}
	}
	if share, _, _ := u.Row(1, 2e-9, 0); share != 1 {
		t.Errorf("the share of a row whose residual is its only term is %g, want 1", share)
	}
}

// An island whose x is small beside another's is unsolved like any: both rows of
// the second block miss all of their b.
func TestUnsolvedIslandOfSmallX(t *testing.T) {
	a := FromEntries(4, 4, []Entry{{0, 0, 2}, {0, 1, 1}, {1, 0, 1}, {1, 1, 2}, {2, 2, 2}, {2, 3, 1}, {3, 2, 1}, {3, 3, 2}})
	u := NewUnsolved(a, []float64{1, 1, 1e-12, 1e-12}, 1e-4)
	for i, r := range []float64{0, 0, 1e-9, 1e-9} {
		if _, unsolved, _ := u.Row(i, r, r); unsolved != (i >= 2) {
			t.Errorf("row %d: unsolved %v", i, unsolved)
		}
	}
}
