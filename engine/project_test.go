package engine

import (
	"math"
	"testing"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// A frame without supports: three motions cost no energy, b pushes along them,
// and no sum of rows shows it. The part of b that x can reach is solved for;
// what is left is the part along the motions, which is found before any trial,
// and cg as b stands does not get there.
func TestProjectOntoWhatIsHeld(t *testing.T) {
	v := ended(t, "sample:frame:unsupported", Options{Pairs: []string{"project/cg+ic:0", "project,scale/cg+none", "cg+ic:0"}, Iterations: 2000})
	u := v.Facts.Unreachable
	if u.Answer != inspect.Yes || u.Certainty != inspect.Measured {
		t.Fatalf("unreachable: %+v", u)
	}
	for _, p := range []string{"project/cg+ic:0", "project,scale/cg+none"} {
		h := trial(t, v, p)
		t.Logf("%s: %s after %d, true %g, unreachable %g", p, h.Stop, h.Iterations, h.TrueResidual, u.Value)
		if h.Stop != trace.LeastSquares || math.Abs(h.TrueResidual-u.Value) > 1e-6*u.Value {
			t.Errorf("%s ends %s (%s) at %g, want least-squares at %g", p, h.Stop, h.Reason, h.TrueResidual, u.Value)
		}
	}
	if h := trial(t, v, "cg+ic:0"); h.Stop == trace.LeastSquares || h.Stop == trace.Converged {
		t.Errorf("cg as b stands ends %s", h.Stop)
	}
	f := mustSay(t, v, "mechanism", diagnose.OnSystem, diagnose.Blocker, inspect.Measured, "3 zero-energy motions", "no x can answer that")
	if len(f.Try) != 1 || f.Try[0] != "project/cg+ic:0" {
		t.Errorf("offers %v", f.Try)
	}
	if g, ok := finding(v, "unreachable-rhs", diagnose.OnSystem); ok {
		t.Errorf("told twice: %s", g.Claim)
	}
}
