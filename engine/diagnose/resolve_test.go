package diagnose

import (
	"slices"
	"strings"
	"testing"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// The rules that the table of contradictions names all exist.
func TestTableNamesRules(t *testing.T) {
	known := func(name string) bool {
		return slices.ContainsFunc(Catalogue, func(r Rule) bool { return r.Name == name })
	}
	for _, y := range yields {
		for _, name := range append([]string{y.stronger}, y.weaker...) {
			if !known(name) {
				t.Errorf("the table of contradictions names %q, which is no rule", name)
			}
		}
		if y.why == "" || slices.Contains(y.weaker, y.stronger) {
			t.Errorf("%s over %v: no reason, or over itself", y.stronger, y.weaker)
		}
	}
}

// Each contradiction: what the weaker rule would say is not told beside the
// stronger one, and is told without it.
func TestContradictionsAreResolved(t *testing.T) {
	for _, y := range yields {
		for _, weaker := range y.weaker {
			strong := Finding{Rule: y.stronger, Weight: Blocker, Subject: "cg+none", Certainty: inspect.Measured, Claim: "a"}
			weak := Finding{Rule: weaker, Subject: "cg+none", Certainty: inspect.Measured, Claim: "b", Evidence: []Evidence{{Value: 0}}}
			if got := resolve([]Finding{weak, strong}); len(got) != 1 || got[0].Rule != y.stronger {
				t.Errorf("%s beside %s leaves %v", weaker, y.stronger, got)
			}
			if got := resolve([]Finding{weak}); len(got) != 1 {
				t.Errorf("%s alone leaves %v", weaker, got)
			}
			strong.Certainty = inspect.Estimated
			if got := resolve([]Finding{weak, strong}); len(got) != 2 {
				t.Errorf("an estimate of %s silences a measured %s", y.stronger, weaker)
			}
		}
	}
}

// What is said alike of several pairings is said once.
func TestEqualCausesAreSaidOnce(t *testing.T) {
	broke := trace.Pivot{Row: 3, Value: -5}
	a, b := solvedTrial("gmres:30+ilu:0", 50, time.Second), solvedTrial("bicgstab+ilu:0", 30, time.Second)
	for _, h := range []*trace.History{&a, &b} {
		h.Stop, h.Notes.Broke = trace.BrokeDown, []trace.Pivot{broke}
	}
	var told []Finding
	for _, f := range Judge(caseOf(definite(), a, b)) {
		if f.Rule == "pivot" {
			told = append(told, f)
		}
	}
	if len(told) != 1 || !slices.Equal(told[0].Also, []string{"bicgstab+ilu:0"}) {
		t.Errorf("the same pivot of two pairings is told as %v", told)
	} else if !strings.HasSuffix(told[0].Claim, "; the same of bicgstab+ilu:0") {
		t.Errorf("the claim does not name the other one: %s", told[0].Claim)
	}
}

// Advice knows what has run: on a trial that stands still while another one
// has solved the system, it names that one, and offers nothing worse.
func TestAdviceKnowsWhatHasRun(t *testing.T) {
	still := solvedTrial("gmres:30+none", 600, time.Second)
	still.Stop = trace.Stagnated
	for range 20 {
		still.Events = append(still.Events, trace.Event{Kind: trace.Restart, Value: 0.9999})
	}
	alone, ok := said(caseOf(definite(), still))["restart-stagnation"]
	if !ok || !slices.Contains(alone.Try, "gmres:120+none") {
		t.Fatalf("alone it is told %v", alone)
	}
	direct := solvedTrial("richardson:1+lu", 1, time.Millisecond)
	f := said(caseOf(definite(), still, direct))["restart-stagnation"]
	if !slices.Equal(f.Try, []string{"richardson:1+lu"}) || !strings.HasPrefix(f.Advice, "richardson:1+lu has solved the system in 1 iteration") {
		t.Errorf("beside a direct solve it is told %q, tries %v", f.Advice, f.Try)
	}
	failed := solvedTrial("gmres:120+none", 3000, time.Second)
	failed.Stop = trace.IterationLimit
	if f := said(caseOf(definite(), still, failed))["restart-stagnation"]; slices.Contains(f.Try, "gmres:120+none") {
		t.Errorf("a try that has failed is offered again: %v", f.Try)
	}
}

// In a race, what befalls a trial that another one has outdone is a note; today's
// pairing keeps its weight, and so does every trial that was asked for.
func TestRaceSoftensWhatNobodyAskedFor(t *testing.T) {
	bad := solvedTrial("cg+gs", 100, time.Second)
	bad.SPDM, bad.PrecondAsymmetry, bad.Stop = true, 1, trace.IterationLimit
	good := solvedTrial("cg+ic:0", 20, time.Millisecond)
	c := caseOf(definite(), bad, good)
	if f := said(c)["preconditioner-not-spd"]; f.Weight != Blocker {
		t.Errorf("asked for, it is a %s", f.Weight)
	}
	c.Race = true
	if f := said(c)["preconditioner-not-spd"]; f.Weight != Note {
		t.Errorf("in a race it is a %s", f.Weight)
	}
	c.Trials[0].Today = true
	if f := said(c)["preconditioner-not-spd"]; f.Weight != Blocker {
		t.Errorf("of today's pairing it is a %s", f.Weight)
	}
}

// A dearer set-up with quicker solves pays off from the right-hand side on at
// which the two lines cross: 0.9 s more set-up, 0.3 s less a solve: 3.
func TestSetUpPaysOff(t *testing.T) {
	plain, dear := solvedTrial("cg+none", 300, 500*time.Millisecond), solvedTrial("cg+ssor:1", 50, 1100*time.Millisecond)
	dear.SetupTime = 900 * time.Millisecond
	f := said(caseOf(definite(), plain, dear))["preconditioner-costs-more"]
	if !strings.Contains(f.Claim, "pays off from 3 right-hand sides on") {
		t.Errorf("it is told %q", f.Claim)
	}
	dear.SetupTime = 100 * time.Millisecond
	if f := said(caseOf(definite(), plain, dear))["preconditioner-costs-more"]; strings.Contains(f.Claim, "pays off") {
		t.Errorf("slower solves never pay off: %q", f.Claim)
	}
}

// The spread of reruns decides what is a win, beside the clock.
func TestNoiseDecidesWhatIsAWin(t *testing.T) {
	today, other := solvedTrial("cg+none", 100, 1300*time.Millisecond), solvedTrial("cg+jacobi", 75, time.Second)
	today.Today = true
	if _, ok := said(caseOf(definite(), today, other))["today-beaten"]; !ok {
		t.Error("30 % on steady counts is no win")
	}
	today.Counts, other.Counts = []int{70, 140, 90, 100}, []int{75, 110, 70, 90}
	got := said(caseOf(definite(), today, other))
	if f, ok := got["today-beaten"]; ok {
		t.Errorf("within the noise of the counts it is called a win: %s", f.Claim)
	}
	if f, ok := got["iteration-noise"]; !ok || !strings.Contains(f.Claim, "105 +- 35") || !strings.Contains(f.Claim, "5 runs") {
		t.Errorf("the noise is told as %q", f.Claim)
	}
}
