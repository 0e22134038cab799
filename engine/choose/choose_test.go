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
	c := Rank(facts(inspect.Yes, inspect.Yes), trials, nil, "", 0)
	var order []string
	for _, r := range c.Ranked {
		order = append(order, r.Pairing)
	}
	if c.Pairing != "cg+ic:0" || strings.Join(order, " ") != "cg+ic:0 cg+jacobi cg+none sd+none" {
		t.Fatalf("choice %s, order %v", c.Pairing, order)
	}
	if c.Gain.Times != 2 {
		t.Errorf("gain over today %g, want 2", c.Gain.Times)
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
	for _, f := range []diagnose.Finding{
		{Rule: "unsolved-rows", Subject: "cg+none"},
		{Rule: "unsolved-rows", Subject: "minres+none", Also: []string{"cr+none", "cg+none"}},
	} {
		if c := Rank(facts(inspect.Yes, inspect.Yes), trials, []diagnose.Finding{f}, "", 0); c.Pairing != "scale/cg+none" {
			t.Errorf("chose %s, which leaves rows unsolved", c.Pairing)
		}
	}
	trials[0].UnsolvedRows = 2499 // whether or not a finding speaks of it
	if c := Rank(facts(inspect.Yes, inspect.Yes), trials, nil, "", 0); c.Pairing != "scale/cg+none" {
		t.Errorf("chose %s, which leaves 2499 rows unsolved", c.Pairing)
	}
}

func TestDoubts(t *testing.T) {
	f := facts(inspect.Yes, inspect.Yes)
	f.RHS = "ones"
	busy := trial("cg+none", trace.Converged, 0, time.Second)
	busy.CPUShare = 0.5
	near := trial("cg+jacobi", trace.Converged, 0, 1050*time.Millisecond)
	all := strings.Join(Rank(f, []trace.History{busy, near}, nil, "", 0).Doubts, "; ")
	for _, want := range []string{"--rhs", "busy", "not told apart"} {
		if !strings.Contains(all, want) {
			t.Errorf("doubts %q lack %q", all, want)
		}
	}
}

func TestNothingReachedIsNoChoice(t *testing.T) {
	c := Rank(facts(inspect.Yes, inspect.Yes), []trace.History{trial("cg+none", trace.TimeLimit, 0, time.Second)}, nil, "", 0)
	if c.Pairing != "" {
		t.Errorf("chose %s although nothing converged", c.Pairing)
	}
}

// A trial that was run again counts with its median run.
func TestMedianOfRuns(t *testing.T) {
	lucky := trial("cg+none", trace.Converged, 0, time.Second)
	lucky.Reruns = []trace.Run{{Own: 4 * time.Second}, {Own: 3 * time.Second}}
	steady := trial("cg+jacobi", trace.Converged, 0, 2*time.Second)
	steady.Reruns = []trace.Run{{Own: 2 * time.Second}, {Own: 2 * time.Second}}
	c := Rank(facts(inspect.Yes, inspect.Yes), []trace.History{lucky, steady}, nil, "", 0)
	if c.Pairing != "cg+jacobi" || c.Ranked[1].Seconds != 3 || c.Ranked[0].Runs != 3 {
		t.Errorf("chose %s; %+v", c.Pairing, c.Ranked)
	}
	if !strings.Contains(c.Reasons[0], "median of 3 runs") {
		t.Errorf("reasons %v", c.Reasons)
	}
}

func TestGoals(t *testing.T) {
	quick := trial("gmres+ilu", trace.Converged, 0, time.Second)
	quick.MemoryBytes, quick.Restarted = 100, true
	small := trial("bicgstab+none", trace.Converged, 0, 3*time.Second)
	small.MemoryBytes = 10
	safe := trial("minres+none", trace.Converged, 0, 2*time.Second)
	safe.MemoryBytes, safe.Monotone = 20, true
	for goal, want := range map[string]string{"": "gmres+ilu", Seconds: "gmres+ilu", Memory: "bicgstab+none", Robust: "minres+none"} {
		if c := Rank(facts(inspect.Yes, inspect.No), []trace.History{quick, small, safe}, nil, goal, 0); c.Pairing != want {
			t.Errorf("goal %q: chose %s, want %s", goal, c.Pairing, want)
		}
	}
}

// Seconds for many right-hand sides share one set-up; what is better for many
// is told with the number from which it is.
func TestManyRightHandSides(t *testing.T) {
	a := trial("cg+none", trace.Converged, 0, 2*time.Second)
	b := trial("cg+ic", trace.Converged, 10*time.Second, 11*time.Second)
	c := Rank(facts(inspect.Yes, inspect.Yes), []trace.History{a, b}, nil, "", 0)
	if c.Pairing != "cg+none" || c.Ranked[0].For != [3]float64{2, 20, 2000} || c.Ranked[1].For != [3]float64{11, 20, 1010} {
		t.Errorf("chose %s; %v, %v", c.Pairing, c.Ranked[0].For, c.Ranked[1].For)
	}
	if got := strings.Join(c.Doubts, "; "); !strings.Contains(got, "for 11 right-hand sides and more, cg+ic is better") {
		t.Errorf("doubts %q", got)
	}
	a.Columns = []trace.Column{{Seconds: 0.5}, {Seconds: 1.5}}
	if c := Rank(facts(inspect.Yes, inspect.Yes), []trace.History{a}, nil, "", 0); c.Ranked[0].For[1] != 10 {
		t.Errorf("for 10: %g s, measured 1 s a column", c.Ranked[0].For[1])
	}
}

func TestWhatIsRuledOutIsGrouped(t *testing.T) {
	l := list()
	for i := range l {
		l[i].Symmetric = l[i].Solver == "cg" || l[i].Solver == "minres"
		if l[i].Precond == "ic" {
			l[i].Refused = "ic needs a nonzero diagonal: row 3"
		}
	}
	got := RuledOut(facts(inspect.No, inspect.Unknown), l)
	if len(got) != 2 || got[0].Pairing != "cg, minres + none, jacobi, ssor, ilu" || got[1].Pairing != "cg, minres, bicgstab, gmres + ic" ||
		!strings.Contains(got[0].Reason, "assumes A symmetric") || got[1].Reason != "ic needs a nonzero diagonal: row 3" {
		t.Errorf("%+v", got)
	}
}

// What was told last before half of the iterations is held against the end;
// so is what a finding foresaw for a pairing that was then tried.
func TestOutcomes(t *testing.T) {
	h := trial("cg+none", trace.Converged, 0, time.Second)
	h.Iterations = 100
	h.Predictions = []trace.Prediction{{Iter: 40, Total: 130}, {Iter: 50, Total: 110}, {Iter: 55, Total: 101}}
	f := []diagnose.Finding{{Rule: "outliers", Predicts: []diagnose.Predicted{{Pairing: "cg+none", Quantity: "iterations", Value: 90}, {Pairing: "cg+ic", Quantity: "iterations", Value: 9}}}}
	got := outcomes([]trace.History{h}, f)
	want := []Outcome{{"cg+none", HalfTime, 110, 100}, {"cg+none", "iterations, foreseen by outliers", 90, 100}}
	if !slices.Equal(got, want) {
		t.Errorf("got %+v", got)
	}
}

// What is better by the clock from the first right-hand side on, and was not
// told apart, overturns nothing.
func TestNothingIsOverturnedFromTheStart(t *testing.T) {
	first := Ranked{Pairing: "cg+jacobi", Reached: true, Setup: 1e-4, For: [3]float64{2e-4, 1.1e-3, 0.1001}}
	other := Ranked{Pairing: "cg+mic", Reached: true, Setup: 5e-5, For: [3]float64{1e-4, 5.5e-4, 0.05005}}
	if got := overturned(Choice{Ranked: []Ranked{first, other}}); len(got) != 0 {
		t.Errorf("told: %q", got)
	}
	other.Setup, other.For = 1e-2, [3]float64{1.005e-2, 1.05e-2, 0.06}
	if got := overturned(Choice{Ranked: []Ranked{first, other}}); len(got) != 1 {
		t.Errorf("told: %q", got)
	}
}

// What needs more iterations than it may take is not expected at any time.
func TestBeyondTheLimitOfIterations(t *testing.T) {
	h := trial("cgs+none", trace.IterationLimit, 0, time.Second)
	h.Iterations, h.Predictions = 90, []trace.Prediction{{Iter: 85, Total: 125, Low: 105, High: 161}}
	f := facts(inspect.No, inspect.Unknown)
	if r := Rank(f, []trace.History{h}, nil, "", 90).Ranked[0]; !math.IsNaN(r.Expected) || r.Beyond != 125 {
		t.Errorf("expected %g, beyond %g", r.Expected, r.Beyond)
	}
	h.Stop, h.Iterations = trace.Outpaced, 50
	if r := Rank(f, []trace.History{h}, nil, "", 1000).Ranked[0]; r.Expected != 2.5 || !math.IsNaN(r.Beyond) {
		t.Errorf("expected %g, beyond %g", r.Expected, r.Beyond)
	}
}
