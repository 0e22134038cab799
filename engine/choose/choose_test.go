package choose

import (
	"math"
	"slices"
	"strings"
	"testing"
	"time"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

func facts(symmetric, definite inspect.Answer) *inspect.Facts {
	return &inspect.Facts{N: 100, DiagPositive: 100, RHS: "file", RowNorm: inspect.Range{Min: 1, Max: 4},
		Symmetric: inspect.Fact{Answer: symmetric}, PositiveDefinite: inspect.Fact{Answer: definite}}
}

// list is a small catalogue: every solver with every preconditioner.
func list() []Candidate {
	var out []Candidate
	for _, s := range []string{"cg", "minres", "bicgstab", "gmres"} {
		for _, p := range []string{"none", "jacobi", "ssor", "ic", "ilu"} {
			out = append(out, Candidate{Pairing: s + "+" + p, Solver: s, Precond: p})
		}
	}
	return out
}

func TestLineUpFollowsTheFacts(t *testing.T) {
	for _, c := range []struct {
		what    string
		facts   *inspect.Facts
		has     []string
		without []string // solvers that must not appear
	}{
		{"definite", facts(inspect.Yes, inspect.Unknown), []string{"cg+none", "cg+jacobi", "cg+ic"}, []string{"gmres", "minres"}},
		{"indefinite", facts(inspect.Yes, inspect.No), []string{"minres+none"}, []string{"cg+"}},
		{"nonsymmetric", facts(inspect.No, inspect.Unknown), []string{"bicgstab+ilu", "gmres+none"}, []string{"minres", "cg+"}},
	} {
		got := LineUp(c.facts, list(), "")
		for _, p := range c.has {
			if !slices.Contains(got, p) {
				t.Errorf("%s: %v lacks %s", c.what, got, p)
			}
		}
		for _, p := range got {
			for _, w := range c.without {
				if strings.HasPrefix(p, w) {
					t.Errorf("%s: %v holds %s", c.what, got, p)
				}
			}
		}
	}
}

func TestLineUpLeavesOutWhatIsRefusedOrToday(t *testing.T) {
	l := list()
	for i := range l {
		if l[i].Precond == "ic" {
			l[i].Refused = "needs a nonzero diagonal"
		}
	}
	got := LineUp(facts(inspect.Yes, inspect.Yes), l, "cg+jacobi")
	if slices.Contains(got, "cg+ic") || slices.Contains(got, "cg+jacobi") || !slices.Contains(got, "cg+none") {
		t.Errorf("line-up %v", got)
	}
}

func trial(pairing string, stop trace.Stop, setup, own time.Duration) trace.History {
	return trace.History{Pairing: pairing, Stop: stop, SetupTime: setup, OwnTime: own, Iterations: 10, TrueResidual: 1e-9, CPUShare: 1}
}

func TestRankByOwnTime(t *testing.T) {
	trials := []trace.History{
		trial("cg+none", trace.Converged, 0, 4*time.Second),
		trial("cg+ic:0", trace.Converged, time.Second, 2*time.Second),
		trial("sd+none", trace.IterationLimit, 0, time.Second),
		trial("cg+jacobi", trace.Converged, 0, 3*time.Second),
	}
	trials[0].Today = true
	c := Rank(facts(inspect.Yes, inspect.Yes), trials, nil, "")
	var order []string
	for _, r := range c.Ranked {
		order = append(order, r.Pairing)
	}
	if c.Pairing != "cg+ic:0" || strings.Join(order, " ") != "cg+ic:0 cg+jacobi cg+none sd+none" {
		t.Fatalf("choice %s, order %v", c.Pairing, order)
	}
	if c.Gain != 2 {
		t.Errorf("gain over today %g, want 2", c.Gain)
	}
	// set-up 1 s, then 1 s a solve instead of 4 s: it pays from the first one on
	if c.Ranked[0].BreakEven != 1 {
		t.Errorf("pays from %g right-hand sides on, want 1", c.Ranked[0].BreakEven)
	}
	if !math.IsNaN(c.Ranked[3].Seconds) {
		t.Errorf("a trial that missed has %g s to the target", c.Ranked[3].Seconds)
	}
}

func TestUnsolvedRowsRankBelow(t *testing.T) {
	trials := []trace.History{
		trial("cg+none", trace.Converged, 0, time.Second),
		trial("scale/cg+none", trace.Converged, 0, 2*time.Second),
	}
	f := []diagnose.Finding{{Rule: "unsolved-rows", Subject: "cg+none"}}
	if c := Rank(facts(inspect.Yes, inspect.Yes), trials, f, ""); c.Pairing != "scale/cg+none" {
		t.Errorf("chose %s, which leaves rows unsolved", c.Pairing)
	}
}

func TestDoubts(t *testing.T) {
	f := facts(inspect.Yes, inspect.Yes)
	f.RHS = "ones"
	busy := trial("cg+none", trace.Converged, 0, time.Second)
	busy.CPUShare = 0.5
	near := trial("cg+jacobi", trace.Converged, 0, 1050*time.Millisecond)
	all := strings.Join(Rank(f, []trace.History{busy, near}, nil, "").Doubts, "; ")
	for _, want := range []string{"--rhs", "busy", "not told apart"} {
		if !strings.Contains(all, want) {
			t.Errorf("doubts %q lack %q", all, want)
		}
	}
}

func TestNothingReachedIsNoChoice(t *testing.T) {
	c := Rank(facts(inspect.Yes, inspect.Yes), []trace.History{trial("cg+none", trace.TimeLimit, 0, time.Second)}, nil, "")
	if c.Pairing != "" {
		t.Errorf("chose %s although nothing converged", c.Pairing)
	}
}
