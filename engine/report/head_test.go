package report

import (
	"strings"
	"testing"
	"time"

	"dwindle/engine/choose"
	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// crowded is typical with more to tell than a head has lines: a long name, long
// claims, many doubts, a long command.
func crowded() Document {
	d := typical()
	d.System.Name = "a-stiffness-matrix-with-a-name-of-44-signs.mtx"
	d.Command = "dwindle run a-stiffness-matrix.mtx --rhs a-load-case.mtx --today cg+none --tol 1e-10 --stop backward"
	d.Findings = []diagnose.Finding{
		{Rule: "row-scaling", Weight: diagnose.Drag, Certainty: inspect.Measured, Subject: diagnose.OnSystem,
			Claim: "the condition 1.1e+10 of A is mostly scaling: 5.64e+05 once rows and columns are equilibrated; rows differ in size by 1.36e+07 (row 1680 to row 1613); and more is said of it"},
		{Rule: "mesh-growth", Weight: diagnose.Note, Certainty: inspect.Measured, Subject: diagnose.OnSystem, Claim: "iterations grow with the mesh"},
		{Rule: "breakdown", Weight: diagnose.Note, Certainty: inspect.Measured, Subject: "cg+ic:0", Claim: "a pivot is negative"},
		{Rule: "restart-length", Weight: diagnose.Drag, Certainty: inspect.Estimated, Subject: "cg+none", Claim: "pays for its restarts: 2559 in place of 6691"},
	}
	d.Choice.Doubts = []string{"counts on your own b may differ several-fold: give --rhs", "the machine was busy: trust the counts rather than the times",
		"the times are too short for the clock: ranked by counted work",
		"for 3 right-hand sides and more, richardson:1+cholesky is better: 85.8 ms for 1000, against 1.2 s"}
	return d
}

// What a ticket exists for is in its head however much else there is to tell.
func TestHeadLosesNoFact(t *testing.T) {
	d := crowded()
	head := strings.Join(Head(d), "\n")
	text := strings.Join(strings.Fields(head), " ")
	for _, want := range []string{"symmetric, definite (proved)", "400 unknowns", "WHY [estimated] cg+none: pays for its restarts", "2559 in place of 6691",
		"cg+ic:0, 20 its in 30.0 ms", "2.0 times today's speed", "counts on your own b", "machine was busy", "too short for the clock",
		"for 3 right-hand sides and more, richardson:1+cholesky is better", d.Command, "FINGERPRINT 9f86d081884c7d65", "dwindle 0.1, seed 1"} {
		if !strings.Contains(text, want) {
			t.Errorf("no %q in\n%s", want, head)
		}
	}
	if n := len(Head(d)); n > HeadLines {
		t.Errorf("%d lines", n)
	}
}

// A line that is free goes to what was shortened: with little to tell, nothing
// ends in "...".
func TestHeadFillsItsLines(t *testing.T) {
	if head := strings.Join(Head(typical()), "\n"); strings.Contains(head, "...") {
		t.Errorf("cut although there is room:\n%s", head)
	}
}

// TestWhy: the causes of the head, in order.
func TestWhy(t *testing.T) {
	f := func(rule string, w diagnose.Weight, subject string) diagnose.Finding {
		return diagnose.Finding{Rule: rule, Weight: w, Subject: subject}
	}
	const system = diagnose.OnSystem
	beaten := f("today-beaten", diagnose.Drag, "cg+none")
	growth := f("mesh-growth", diagnose.Note, system)
	for name, c := range map[string]struct {
		in   []diagnose.Finding
		want string
	}{
		"a note on the system is a cause, being beaten none": {[]diagnose.Finding{beaten, growth}, "mesh-growth"},
		"beaten where nothing else is known":                 {[]diagnose.Finding{beaten, f("not-your-rhs", diagnose.Note, system)}, "today-beaten"},
		"nothing of pairings that nobody asked for": {[]diagnose.Finding{f("breakdown", diagnose.Note, "cg+ic:0"),
			f("preconditioner-changes-nothing", diagnose.Note, "cg+jacobi")}, ""},
		"today's before the system's, that before others'": {[]diagnose.Finding{f("not-definite", diagnose.Drag, system),
			f("restart-stagnation", diagnose.Drag, "gmres:30+none"), f("false-convergence", diagnose.Drag, "cg+none"), growth},
			"false-convergence not-definite mesh-growth restart-stagnation"},
		"a blocker first":    {[]diagnose.Finding{f("unstable-factors", diagnose.Drag, "cg+none"), f("mechanism", diagnose.Blocker, system)}, "mechanism unstable-factors"},
		"each rule once":     {[]diagnose.Finding{f("breakdown", diagnose.Drag, "a+b"), f("breakdown", diagnose.Drag, "c+d")}, "breakdown"},
		"a note on today":    {[]diagnose.Finding{f("condition", diagnose.Note, "cg+none")}, "condition"},
		"no cause in itself": {[]diagnose.Finding{f("few-digits", diagnose.Note, system), f("starting-guess", diagnose.Note, system)}, ""},
	} {
		d := Document{Trials: []trace.History{{Pairing: "cg+none", Today: true}, {Pairing: "cg+ic:0"}}, Findings: c.in}
		var rules []string
		for _, f := range why(d) {
			rules = append(rules, f.Rule)
		}
		if got := strings.Join(rules, " "); got != c.want {
			t.Errorf("%s: %q, want %q", name, got, c.want)
		}
	}
}

// TestNothingYet: where nothing is recommended, USE says what ended the trials.
func TestNothingYet(t *testing.T) {
	ended := trace.History{Pairing: "cg+none", Stop: trace.TimeLimit, OwnTime: 400 * time.Millisecond}
	going := trace.History{Pairing: "cg+jacobi", Stop: trace.SettingUp}
	late := choose.Choice{Ranked: []choose.Ranked{{Pairing: "cg+none", Expected: 2.5}}}
	for _, c := range []struct {
		d    Document
		want string
	}{
		{Document{}, "no pairing has been run"},
		{Document{Trials: []trace.History{ended, going}, Settings: Settings{Seconds: 0.5}, Choice: late},
			"the run was ended after 500 ms before any pairing reached the tolerance; cg+none was expected to in 2.50 s"},
		{Document{Trials: []trace.History{ended}}, "the time limit of trials ended them before any"},
		{Document{Trials: []trace.History{going}}, "no pairing has reached the tolerance; trials are still going"},
	} {
		if got := useForms(c.d)[0]; !strings.Contains(got, c.want) {
			t.Errorf("%q, want %q", got, c.want)
		}
	}
}

// TestBeatsWhom: from how many right-hand sides on a pairing pays is told
// against a pairing with a name.
func TestBeatsWhom(t *testing.T) {
	r := choose.Ranked{Pairing: "cg+ic:0", Reached: true, Seconds: 1, BreakEven: 7, Cheapest: "cg+none"}
	if got := strings.Join(rankedWords(r), ", "); !strings.Contains(got, "beats cg+none from 7 right-hand sides on") {
		t.Error(got)
	}
}
