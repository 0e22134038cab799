package choose

import (
	"strings"
	"testing"
	"time"

	"dwindle/engine/trace"
)

// Near the end of a run nothing is begun that could not come to an end, and the
// best is left time to be run again; set-ups take no more than a share of it.
func TestWhatDoesNotFitTheTimeIsNotBegun(t *testing.T) {
	best := trial("cg+ic", trace.Converged, 0, second)
	r := race(best)
	for _, c := range []struct {
		left  time.Duration
		adds  bool
		setup time.Duration
	}{
		{0, true, 4 * second},
		{20 * second, true, 4 * second},
		{12 * second, true, 3 * second},
		{5100 * time.Millisecond, false, 1275 * time.Millisecond},
		{2 * second, false, second},
	} {
		r.Left = c.left
		o := r.Next()
		if got := len(o.Add) > 0; got != c.adds || o.Setup != c.setup {
			t.Errorf("%v left: adds %v, set-ups of %v", c.left, o.Add, o.Setup)
		}
	}
	for i := range r.Trials { // a busy machine gives half
		r.Trials[i].OwnCPU, r.Trials[i].OwnTime, r.Trials[i].CPUShare = second, 2*second, 0.5
	}
	r.Left = 9 * second
	if o := r.Next(); len(o.Add) > 0 {
		t.Errorf("adds %v in 9 s, of which 4.5 s are its own", o.Add)
	}
}

// An answer that leaves rows unsolved ends no trial that is a little slower.
func TestUnsolvedRowsAreNoBest(t *testing.T) {
	quick := trial("cg+none", trace.Converged, 0, second)
	quick.UnsolvedRows = 10
	late := running("cg+ic", 0, 3*second)
	if o := race(quick, late).Next(); len(o.End) != 0 {
		t.Errorf("ended %+v", o.End)
	}
	if o := race(quick, trial("cg+jacobi", trace.Converged, 0, 2*second), late).Next(); len(o.End) != 1 || !strings.Contains(o.End[0].Reason, "cg+jacobi has") {
		t.Errorf("ended %+v", o.End)
	}
}
