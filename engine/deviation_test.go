package engine

import "testing"

// How far incomplete factors are from A is measured at set-up, of the system as
// it was prepared: less with more fill, and not at all of what has no factors.
func TestDeviationOfTrials(t *testing.T) {
	v := ended(t, "sample:plate:20", Options{Pairs: []string{"cg+ic:0", "cg+ic:2", "scale/cg+ic:0", "gmres:30+ilutp:1e-2,5", "cg+jacobi"}})
	zero, two, scaled := trial(t, v, "cg+ic:0").Probe, trial(t, v, "cg+ic:2").Probe, trial(t, v, "scale/cg+ic:0").Probe
	// A of constant diagonal is scaled by a constant: the share stays
	if d := scaled.Deviation - zero.Deviation; !(zero.Deviation > 0.01 && zero.Deviation < 0.3) || d > 1e-12 || d < -1e-12 {
		t.Errorf("ic:0 %g, scaled %g", zero.Deviation, scaled.Deviation)
	}
	if !(two.Deviation > 0 && two.Deviation < zero.Deviation/2) {
		t.Errorf("ic:2 %g, ic:0 %g", two.Deviation, zero.Deviation)
	}
	if p := trial(t, v, "gmres:30+ilutp:0.01,5,0.1").Probe; !(p.Deviation > 0 && p.Deviation < 0.3) {
		t.Errorf("ilutp %g", p.Deviation)
	}
	if p := trial(t, v, "cg+jacobi").Probe; p.Deviation != 0 {
		t.Errorf("jacobi %g", p.Deviation)
	}
}
