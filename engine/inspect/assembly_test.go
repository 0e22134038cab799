package inspect_test

import (
	"reflect"
	"testing"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
	"dwindle/samples"
)

// changedPlate is the Laplacian of a plate with each entry as change makes it.
func changedPlate(t *testing.T, spec string, change func(i, j int, v float64) float64) *inspect.Study {
	t.Helper()
	s, err := samples.Build(spec)
	if err != nil {
		t.Fatal(err)
	}
	var out []linear.Entry
	a := s.Matrix()
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, j := range cols {
			if v := change(i, int(j), vals[k]); v != 0 {
				out = append(out, e(i, int(j), v))
			}
		}
	}
	return studied(t, ones(linear.FromEntries(a.NRows, a.NRows, out), 17), inspect.Quick).Study
}

// A penalty on the diagonal is no jump of the coefficients; what jumps beside
// it still is one.
func TestPenaltyIsNoJump(t *testing.T) {
	held := func(i, j int, v float64) float64 {
		if i == j && (i == 3 || i == 100) {
			return v + 1e10
		}
		return v
	}
	if s := changedPlate(t, "plate:12", held); s.Couplings.Jump != 1 || len(s.Lines) != 1 || s.Lines[0].Count != 2 {
		t.Errorf("%+v, lines %+v", s.Couplings, s.Lines)
	}
	if c := changedPlate(t, "plate:60,jump=1e4", held).Couplings; c.Jump < 1e3 || c.Jump > 1e5 {
		t.Errorf("%+v", c)
	}
}

// Single entries without their equal across are named, up to three pairs.
func TestUnequalPairsAreNamed(t *testing.T) {
	for k, want := range [][][2]int{nil, {{50, 51}}, {{50, 51}, {120, 121}}, {{50, 51}, {120, 121}, {180, 195}}, nil} {
		changed := [][2]int{{50, 51}, {121, 120}, {195, 180}, {199, 198}}[:k]
		l := changedPlate(t, "plate:15", func(i, j int, v float64) float64 {
			for c, p := range changed {
				if i == p[0] && j == p[1] {
					return float64(c) * v / 5 // 0: the entry is missing
				}
			}
			return v
		}).Lopsided
		if k == 0 && l != nil || k > 0 && (l == nil || l.Count != 2*k || !reflect.DeepEqual(l.Pairs, want)) {
			t.Errorf("%d entries changed: %+v", k, l)
		}
	}
}
