package inspect_test

import (
	"math"
	"testing"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
)

// enclosed is slow flow in a closed square of m x m cells: velocities on the
// inner faces, first those along x, then those along y, last a pressure a cell,
// without an entry on the diagonal. A constant pressure moves nothing.
func enclosed(m int) *linear.CSR {
	u := func(i, j int) int { return i + (m-1)*j } // face between cells i and i+1 of row j
	v := func(i, j int) int { return m*(m-1) + i + m*j }
	p := func(i, j int) int { return 2*m*(m-1) + i + m*j }
	var out []linear.Entry
	drag := func(k, other int) {
		out = append(out, e(k, k, 1), e(other, other, 1), e(k, other, -1), e(other, k, -1))
	}
	flow := func(k, from, to int) {
		out = append(out, e(k, k, 1), e(k, from, -1), e(from, k, -1), e(k, to, 1), e(to, k, 1))
	}
	for j := range m {
		for i := range m - 1 {
			flow(u(i, j), p(i, j), p(i+1, j))
			flow(v(j, i), p(j, i), p(j, i+1))
			if j > 0 {
				drag(u(i, j), u(i, j-1))
				drag(v(j, i), v(j-1, i))
			}
		}
	}
	n := 2*m*(m-1) + m*m
	return linear.FromEntries(n, n, out)
}

// The pressure of an enclosed flow is known up to a constant: the direction is
// one number on the rows with a zero on the diagonal. A source of 1 in one of
// 25 cells, beside nothing else, is out of reach with 1/5 of its norm.
func TestPressureUpToAConstant(t *testing.T) {
	const m = 5
	s := ones(enclosed(m), 17)
	n, first := s.N(), 2*m*(m-1)
	clear(s.B)
	s.B[3], s.B[17] = 1, 2 // forces
	f := studied(t, s, inspect.Quick)
	expect(t, "forces", f.Unreachable, inspect.No, inspect.Measured)
	if len(f.Study.Null) != 1 || f.Study.Null[0].Level == nil {
		t.Fatalf("directions %+v", f.Study.Null)
	}
	if l := *f.Study.Null[0].Level; l != (inspect.Level{Count: m * m, First: first, Last: n - 1, ZeroDiagonal: true}) {
		t.Errorf("%+v", l)
	}
	clear(s.B)
	s.B[first+7] = 1
	f = studied(t, s, inspect.Quick)
	expect(t, "source", f.Unreachable, inspect.Yes, inspect.Measured)
	if math.Abs(f.Unreachable.Value-0.2) > 1e-12 {
		t.Errorf("%g of b, want 1/5", f.Unreachable.Value)
	}
}

// A direction that is one number on some rows, and small on another, is no
// level; rows are told by their range, or by how many of it they are.
func TestLevelsAreExact(t *testing.T) {
	const m = 6
	chain := func(last float64) linear.System { // null vector (1, ..., 1, last)
		var out []linear.Entry
		for i := range m - 1 {
			c := 1.0
			if i == m-2 {
				c = 1 / last
			}
			out = append(out, e(i, i, 1), e(i, i+1, -c), e(i+1, i, -c), e(i+1, i+1, c*c))
		}
		return ones(linear.FromEntries(m, m, out), 17)
	}
	for last, level := range map[float64]bool{1: true, 0.5: false, 1.001: false} {
		f := studied(t, chain(last), inspect.Quick)
		if len(f.Study.Null) != 1 || (f.Study.Null[0].Level != nil) != level {
			t.Errorf("last entry %g: %+v", last, f.Study.Null)
		}
	}
	for want, l := range map[string]inspect.Level{
		"rows 3 to 6, zero on all others":                                          {Count: 4, First: 2, Last: 5},
		"4 of rows 3 to 9 (those with a zero on the diagonal), zero on all others": {Count: 4, First: 2, Last: 8, ZeroDiagonal: true},
	} {
		if got := l.Text(linear.RowNames{}); got != want {
			t.Errorf("%q, want %q", got, want)
		}
	}
}
