package engine

import (
	"math"
	"testing"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// Seepage with an incompatible right-hand side: the unreachable part is named,
// nothing is called converged, and minres ends at the least-squares solution.
func TestUnreachableRightHandSide(t *testing.T) {
	v := ended(t, "sample:seepage:24", Options{RHS: "unit:5", Pairs: []string{"cg+none", "cg+jacobi", "minres+none", "project/cg+jacobi", "gmres:30+none"}, Iterations: 600})
	f, ok := finding(v, "unreachable-rhs", diagnose.OnSystem)
	want := 1 / math.Sqrt(float64(v.Facts.N)) // the mean of a unit vector
	if !ok || f.Weight != diagnose.Blocker || f.Certainty != inspect.Proved || math.Abs(f.Evidence[0].Value-want) > 1e-6*want {
		t.Errorf("unreachable part %g is not named:%s", want, rules(v))
	}
	for _, u := range v.Trials {
		h := u.History
		t.Logf("%-20s %s true %g", h.Pairing, h.Stop, h.TrueResidual)
		if h.Stop == trace.Converged {
			t.Errorf("%s is called converged", h.Pairing)
		}
		if h.Pairing == "minres+none" && h.Stop != trace.LeastSquares {
			t.Errorf("minres ends %s (%s), want least-squares", h.Stop, h.Reason)
		}
	}
}
