package diagnose

import (
	"strings"
	"testing"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// A direct solve that is right to the last bit and misses the tolerance: the
// tolerance is told, and what other trials show of it is not. A coarser answer,
// a solved system and a singular one are no such case.
func TestBeyondDoublePrecision(t *testing.T) {
	direct := solvedTrial("richardson:1+lu", 3, time.Millisecond)
	direct.Stop, direct.TrueResidual, direct.BestTrue, direct.Componentwise = trace.FalselyConverged, 1.24e-7, 1.24e-7, 2.4e-16
	other := solvedTrial("bicgstab+none", 900, time.Second)
	other.Stop, other.TrueResidual, other.FloorHits, other.Componentwise = trace.Stagnated, 1e-3, 9, 1e-5
	facts := func() *inspect.Facts { return &inspect.Facts{N: 100, DiagPositive: 100} }
	c := Case{Facts: facts(), Trials: []trace.History{other, direct}, Tol: 1e-8, Race: true}
	f := Judge(c)
	if len(f) == 0 || f[0].Rule != "double-precision" || !strings.Contains(f[0].Advice, "ask for 2e-07") {
		t.Fatalf("findings %+v", f)
	}
	if said(c)["accuracy-floor"].Rule != "" {
		t.Error("the floor of a trial is told beside it")
	}
	for what, spoil := range map[string]func(*Case){
		"a coarser answer": func(c *Case) { c.Trials[1].Componentwise = 1e-12 },
		"solved":           func(c *Case) { c.Trials[0].Stop = trace.Converged },
		"singular":         func(c *Case) { c.Facts.Study = &inspect.Study{Null: []inspect.NullDirection{{Quotient: 1e-16}}} },
		"no answer at all": func(c *Case) { c.Trials[1].TrueResidual = 0.9 },
	} {
		d := Case{Facts: facts(), Trials: []trace.History{other, direct}, Tol: 1e-8, Race: true}
		spoil(&d)
		if got, spoke := said(d)["double-precision"]; spoke {
			t.Errorf("%s: %s", what, got.Claim)
		}
	}
}

func TestAskForHasOneDigit(t *testing.T) {
	for _, c := range [][2]float64{{1.24e-7, 2e-7}, {0.0189, 0.03}, {9e-5, 2e-4}} {
		if got := AskFor(c[0]); got < 0.999*c[1] || got > 1.001*c[1] {
			t.Errorf("with %g left: ask for %g, want %g", c[0], got, c[1])
		}
	}
}
