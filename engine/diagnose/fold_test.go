package diagnose

import (
	"fmt"
	"slices"
	"strings"
	"testing"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// What befell many trials that another one has outdone is one line that counts
// them; what is told of the system, of today's pairing, or by another rule
// stays by itself and in its place.
func TestFold(t *testing.T) {
	of := func(rule, subject, claim string, outdone bool) Finding {
		return Finding{Rule: rule, Subject: subject, Claim: claim, Outdone: outdone, Weight: Note, Certainty: inspect.Measured}
	}
	all := []Finding{of("ill-conditioned", OnSystem, "A is", false), of("breakdown", "today", "broke down: rho", false)}
	for i := range 9 {
		all = append(all, of("breakdown", fmt.Sprintf("p%d", i), fmt.Sprintf("broke down at iteration %d", i), true))
	}
	all[3].Also, all[3].Claim = []string{"q", "p0"}, all[3].Claim+alsoOf([]string{"q", "p0"})
	all[5].Certainty = inspect.Estimated
	all = append(all, of("divergence", "p1", "diverged: p1 grew", true), of("breakdown", "p2", "broke down again", true))
	got := Fold(all)
	if len(got) != 4 {
		t.Fatalf("%d findings: %v", len(got), got)
	}
	want := "10 pairings broke down: p0, p1, q and 7 more; the first: broke down at iteration 0"
	if f := got[2]; f.Claim != want || f.Subject != "10 pairings" || f.Certainty != inspect.Estimated || len(f.Also) != 9 {
		t.Errorf("%+v\nwant the claim %q", f, want)
	}
	if got[1].Claim != "broke down: rho" || got[3].Claim != "diverged: p1 grew" {
		t.Errorf("%v", got)
	}
	if !slices.Equal(all[2].Also, nil) || all[2].Claim != "broke down at iteration 0" {
		t.Errorf("the findings themselves have changed: %+v", all[2])
	}
}

// Every rule that has words for a fold exists, and in a race the losers'
// breakdowns are folded as Judge tells them.
func TestFoldKnowsRules(t *testing.T) {
	for rule := range befell {
		if !slices.ContainsFunc(Catalogue, func(r Rule) bool { return r.Name == rule }) {
			t.Errorf("no rule is called %q", rule)
		}
	}
	trials := []trace.History{solvedTrial("gmres:30+none", 50, time.Second)}
	for i, p := range []string{"bicgstab+none", "bicgstab+jacobi", "bicgstab+ilu:0", "bicgstab+sor:1"} {
		h := solvedTrial(p, 20, time.Second)
		h.Stop = trace.BrokeDown
		h.Events = []trace.Event{{Iter: uint32(10 + i), Kind: trace.Breakdown, Quantity: "rho", Value: 1e-40}}
		trials = append(trials, h)
	}
	c := caseOf(definite(), trials...)
	c.Race, c.Chosen = true, "gmres:30+none"
	var told []string
	for _, f := range Fold(Judge(c)) {
		if f.Rule == "breakdown" {
			told = append(told, f.Claim)
		}
	}
	if len(told) != 1 || !strings.HasPrefix(told[0], "4 pairings broke down: bicgstab+none, bicgstab+jacobi, bicgstab+ilu:0 and 1 more; ") {
		t.Errorf("%q", told)
	}
}
