package engine

import (
	"slices"
	"strings"
	"testing"
)

// On a frame that nothing holds no trial can reach the target: what is said is
// that, and nothing of floors, restarts and pivots beside it.
func TestCauseIsToldNotItsConsequences(t *testing.T) {
	v := ended(t, "sample:frame:support=unsupported", Options{Iterations: 1000,
		Pairs: []string{"cg+none", "cg+jacobi", "minres+jacobi", "gmres:30+none", "bicgstab+ilu:0", "richardson+cholesky"}})
	if len(v.Findings) == 0 || v.Findings[0].Rule != "mechanism" {
		t.Fatalf("the lead is not the missing supports:%s", rules(v))
	}
	silent(t, v, "accuracy-floor", "restart-stagnation", "restart-length", "breakdown", "divergence", "pivot", "false-convergence")
}

// rajat19: today's gmres stands still, a direct solve has the answer. The lead
// says so, and no finding offers a longer restart.
func TestLeadKnowsWhatHasSolvedTheSystem(t *testing.T) {
	v := ended(t, openFile(t, "rajat19.mtx"), Options{Today: "gmres:30+none", Pairs: []string{"richardson+lu"}, Iterations: 2000})
	if f := v.Findings[0]; f.Rule != "today-beaten" || !slices.Equal(f.Try, []string{"richardson:1+lu"}) {
		t.Errorf("the lead is %s, tries %v:%s", f.Rule, f.Try, rules(v))
	}
	for _, f := range v.Findings {
		for _, p := range f.Try {
			if strings.HasPrefix(p, "gmres:120") {
				t.Errorf("%s offers %s although a direct solve has the answer", f.Rule, p)
			}
		}
	}
}
