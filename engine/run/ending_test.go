package run

import (
	"math"
	"strings"
	"testing"

	"dwindle/engine/trace"
)

// A trial that is cut after a false stop keeps its ending, for it might yet
// have got there; one that comes to its own end is falsely-converged. Either
// tells of the false stop.
func TestFalseStopAndWhatEndsTheTrial(t *testing.T) {
	for stop, want := range map[trace.Stop]trace.Stop{trace.Outpaced: trace.Outpaced, trace.TimeLimit: trace.TimeLimit,
		trace.IterationLimit: trace.FalselyConverged, trace.Stagnated: trace.FalselyConverged, trace.BrokeDown: trace.FalselyConverged} {
		u := new(Trial)
		u.ending = ending{falseStop: true, falseValue: 1.0139e-6, falseIter: 17}
		u.end(stop, "because")
		h := u.History()
		if h.Stop != want || !strings.Contains(h.Reason, "met the target at iteration 17, the true residual was 1.01e-06") || !strings.HasSuffix(h.Reason, "because") {
			t.Errorf("%s becomes %s: %s", stop, h.Stop, h.Reason)
		}
	}
}

// What misses the target by less than a factor of two is no false stop.
func TestFalseStopMissesByAFactor(t *testing.T) {
	const tol = 1e-8
	for by, want := range map[float64]bool{1.0139: false, 1.9: false, 2.1: true, 100: true} {
		u := new(Trial)
		u.limits, u.sizes.b, u.hist.BestTrue = limits(tol, 1000), 1, math.Inf(1)
		u.judgeAudit(trace.Record{Iter: 9, Audit: by * tol, Residual: 0.9 * tol}, 0.9*tol, &audit{true2: by * tol})
		if u.ending.falseStop != want || len(u.hist.Events) > 0 != want {
			t.Errorf("missed by %g: false stop %v, want %v", by, u.ending.falseStop, want)
		}
	}
}

// The theory of conjugate gradients bounds nothing where b is out of range or
// A is indefinite; a method of minimal residual is bounded by its very
// definition.
func TestRunawayIsJudgedWhereNothingBoundsIt(t *testing.T) {
	for _, c := range []struct {
		pairing string
		limits  Limits
		want    trace.Stop
	}{
		{"cg+none", Limits{}, trace.Waiting},
		{"cg+none", Limits{Unreachable: 0.3}, trace.Diverged},
		{"cg+none", Limits{NoNorm: true}, trace.Diverged},
		{"symmlq+none", Limits{NoNorm: true}, trace.Waiting},
		{"minres+none", Limits{Unreachable: 0.3}, trace.Waiting},
		{"cr+none", Limits{NoNorm: true}, trace.Waiting},
		{"idr+none", Limits{}, trace.Diverged},
	} {
		m, err := Parse(c.pairing)
		if err != nil {
			t.Fatal(err)
		}
		c.limits.Target = Target{Rule: StopRHS, Tol: 1e-8}
		u := newTrial(1, m, sample(t, "line:5"), sizes{b: 1}, c.limits, watch{}, nil, 0)
		u.ending.firstTrue = 1
		u.judgeAudit(trace.Record{Iter: 9, Audit: 1e9, Residual: 1e9}, 1e9, &audit{true2: 1e9, normal: 1})
		if u.hist.Stop != c.want {
			t.Errorf("%s with %+v: %s (%s)", c.pairing, c.limits, u.hist.Stop, u.hist.Reason)
		}
	}
}
