package report

import (
	"testing"

	"dwindle/engine/diagnose"
	"dwindle/engine/trace"
)

// TestReached: today's pairing decides when there is one.
func TestReached(t *testing.T) {
	trial := func(stop trace.Stop, today bool) trace.History { return trace.History{Stop: stop, Today: today} }
	for i, c := range []struct {
		trials []trace.History
		want   bool
	}{
		{nil, false},
		{[]trace.History{trial(trace.Stagnated, false), trial(trace.Converged, false)}, true},
		{[]trace.History{trial(trace.LeastSquares, false), trial(trace.FalselyConverged, false)}, false},
		{[]trace.History{trial(trace.Converged, false), trial(trace.Diverged, true)}, false},
		{[]trace.History{trial(trace.Diverged, false), trial(trace.Converged, true)}, true},
	} {
		if got := (Document{Trials: c.trials}).Reached(); got != c.want {
			t.Errorf("case %d: %v", i, got)
		}
	}
}

// TestSystemOnly keeps what concerns the system and nothing of the trials.
func TestSystemOnly(t *testing.T) {
	d := typical()
	if d.Blocked() {
		t.Error("a drag and a note block")
	}
	d.Findings = append(d.Findings, diagnose.Finding{Weight: diagnose.Blocker, Subject: "cg+none"})
	if !d.Blocked() {
		t.Error("a blocker does not block")
	}
	d = d.SystemOnly()
	if len(d.Findings) != 1 || d.Findings[0].Subject != diagnose.OnSystem || d.Trials != nil || d.Choice.Pairing != "" || d.Blocked() {
		t.Errorf("%+v", d)
	}
}
