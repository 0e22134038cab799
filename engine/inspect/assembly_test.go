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
