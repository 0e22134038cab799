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
			strong := Finding{Rule: y.stronger, Weight: Blocker, Subject: "cg+none", Certainty: inspect.Measured, Claim: "a", Evidence: []Evidence{{Value: 1}}}
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

// No try is offered whose preconditioner could not be built in this run, on the
// system prepared alike; prepared otherwise it is.
func TestNoTryThatCannotBeBuilt(t *testing.T) {
	f := definite()
	f.Symmetric = inspect.Fact{Answer: inspect.No}
	f.DiagZero = 3
	const try = "scale/gmres:30+ilutp:1e-3,10,0.1"
	for prep, want := range map[string]bool{"": true, "scale/": false} {
		h := solvedTrial(prep+"bicgstab+ilutp:1e-3,10,0.1", 0, time.Millisecond)
		h.Stop, h.Notes.Broke = trace.BrokeDown, []trace.Pivot{{Row: 4}}
		if g := said(caseOf(f, h))["zero-diagonal"]; slices.Contains(g.Try, try) != want {
			t.Errorf("after %s broke down at set-up it offers %v", h.Pairing, g.Try)
		}
	}
}

// Factors that a shift has made stand are advised of by what was measured: a
// factor that needed none, or no preconditioner where that took fewer steps.
func TestRepairedPivots(t *testing.T) {
	shifted := solvedTrial("cg+mic:0", 261, time.Millisecond)
	shifted.Notes.Broke, shifted.Notes.Shift = []trace.Pivot{{Row: 7}}, 1e-4
	plain, whole := solvedTrial("cg+none", 36, time.Millisecond), solvedTrial("cg+ic:0", 19, time.Millisecond)
	singular := definite()
	singular.Singular = inspect.Fact{Answer: inspect.Yes}
	for _, c := range []struct {
		words string
		said  Case
	}{
		{"keep the shift", caseOf(definite(), shifted)},
		{"leave it out: cg+none took 36", caseOf(definite(), shifted, plain)},
		{"use cg+ic:0, which needs no shift and took 19", caseOf(definite(), shifted, plain, whole)},
		{"A is singular", caseOf(singular, shifted, plain, whole)},
	} {
		if f := said(c.said)["pivot"]; !strings.Contains(f.Advice, c.words) {
			t.Errorf("advice %q, want %q", f.Advice, c.words)
		}
	}
}

// In a race nobody hears of the noise, the half step or the false norm of a
// trial that solved the system and is not recommended.
func TestNobodyAskedForIt(t *testing.T) {
	best, other := solvedTrial("cg+ic:0", 20, time.Millisecond), solvedTrial("bicgstab+spai", 42, time.Second)
	other.Counts = []int{30, 50, 44}
	other.Events = []trace.Event{{Iter: 3, Kind: trace.HalfStep, Value: 1e-17}, {Iter: 40, Kind: trace.FalseStop, Value: 2.6e-6, Scale: 9e-9}}
	c := caseOf(definite(), best, other)
	rules := []string{"iteration-noise", "breakdown", "false-convergence"}
	for _, r := range rules {
		if said(c)[r].Claim == "" {
			t.Errorf("%s is silent where the trial was asked for", r)
		}
	}
	c.Race = true
	for _, r := range rules {
		if f := said(c)[r]; f.Claim != "" {
			t.Errorf("%s speaks in a race: %s", r, f.Claim)
		}
	}
	c.Chosen = other.Pairing
	for _, r := range rules {
		if said(c)[r].Claim == "" {
			t.Errorf("%s is silent of the pairing that is recommended", r)
		}
	}
}

// Rounding in factors is no want of linearity or symmetry; in what is no factor
// it is told.
func TestFactorsAreLinear(t *testing.T) {
	for m, want := range map[string]bool{"cholesky": false, "ilu:0": false, "from:a/b.mtx/ilu:0": false, "given:a/b.mtx": true} {
		h := solvedTrial("cg+"+m, 20, time.Millisecond)
		h.FixedM, h.Probe = true, &trace.MProbe{Nonlinear: 0.16}
		if _, ok := said(caseOf(definite(), h))["preconditioner-not-linear"]; ok != want {
			t.Errorf("%s called not linear: %v, want %v", m, ok, want)
		}
	}
}

// Rows of different size are a note where nothing shows that scaling helps, and
// a drag where a trial does.
func TestScalingIsBlamedWhereItHelps(t *testing.T) {
	f := definite()
	f.RowNorm = inspect.Range{Min: 1e-3, Max: 1e4}
	plain, scaled := solvedTrial("cg+none", 773, time.Second), solvedTrial("cg+jacobi", 232, time.Second)
	if g := said(caseOf(f, plain))["row-scaling"]; g.Weight != Note {
		t.Errorf("unproved: %v", g)
	}
	if g := said(caseOf(f, plain, scaled))["row-scaling"]; g.Weight != Drag || !strings.Contains(g.Claim, "cg+none took 773 iterations, cg+jacobi 232") {
		t.Errorf("shown: %v", g)
	}
	scaled.Iterations = 700
	if g := said(caseOf(f, plain, scaled))["row-scaling"]; g.Weight != Note {
		t.Errorf("no help: %v", g)
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
	c := caseOf(definite(), today, other)
	c.Gain = Gain{Times: 1.3, Today: 1.3, Best: 1}
	if _, ok := said(c)["today-beaten"]; !ok {
		t.Error("30 % on steady counts is no win")
	}
	today.Counts, other.Counts = []int{70, 140, 90, 100}, []int{75, 110, 70, 90}
	c.Trials = []trace.History{today, other}
	got := said(c)
	if f, ok := got["today-beaten"]; ok {
		t.Errorf("within the noise of the counts it is called a win: %s", f.Claim)
	}
	if f, ok := got["iteration-noise"]; !ok || !strings.Contains(f.Claim, "105 +- 35") || !strings.Contains(f.Claim, "5 runs") {
		t.Errorf("the noise is told as %q", f.Claim)
	}
}
