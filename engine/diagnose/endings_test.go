package diagnose

import (
	"math"
	"strings"
	"testing"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// Rounding is to blame only for a residual near its level; an estimate of the
// level that the trial itself came below is no evidence.
func TestRoundingIsBlamedAtItsLevelAlone(t *testing.T) {
	for _, c := range []struct {
		best, level float64
		claim       string
		shown       bool
	}{
		{3.4e-4, 1.3e-15, "its recurrence has lost the true residual", true},
		{3e-12, 1e-12, "at its accuracy floor", true},
		{3e-12, 6.6e-6, "at its accuracy floor", false},
		{3e-12, math.NaN(), "at its accuracy floor", false},
	} {
		f, h := definite(), solvedTrial("cg+none", 50, time.Second)
		h.Stop, h.FloorHits, h.BestTrue, h.Floor, h.Residual = trace.Stagnated, 5, c.best, c.level, 1e-18
		got := said(caseOf(f, h))["accuracy-floor"]
		if !strings.HasPrefix(got.Claim, c.claim) || strings.Contains(got.Claim, "rounding allows") != strings.HasPrefix(c.claim, "at its") {
			t.Errorf("best %g, level %g: %q", c.best, c.level, got.Claim)
		}
		shown := false
		for _, e := range got.Evidence {
			shown = shown || e.Quantity == "u ||A|| max||x|| / ||b||"
		}
		if shown != c.shown {
			t.Errorf("best %g, level %g: evidence %+v", c.best, c.level, got.Evidence)
		}
	}
}

// No tolerance is offered that double precision does not know.
func TestNoToleranceBelowRoundingIsOffered(t *testing.T) {
	for value, want := range map[float64]string{1e-6: "or ask for 1e-10 in this norm", 0.35: ""} {
		h := solvedTrial("cg+none", 50, time.Second)
		h.Stop = trace.FalselyConverged
		h.Events = []trace.Event{{Iter: 40, Kind: trace.FalseStop, Value: value, Scale: 9e-9}}
		f, ok := said(caseOf(definite(), h))["false-convergence"]
		if !ok || f.Certainty != inspect.Measured || want != "" && !strings.Contains(f.Advice, want) || want == "" && strings.Contains(f.Advice, "ask for") {
			t.Errorf("true residual %g: %q", value, f.Advice)
		}
	}
}

// To scale is advised of unsolved rows in small units alone.
func TestScalingIsForSmallUnits(t *testing.T) {
	for small, words := range map[int]string{2: "scale the rows", 0: "smaller tolerance"} {
		h := solvedTrial("cg+none", 50, time.Second)
		h.Componentwise, h.UnsolvedRows, h.SmallRows = 0.9, 2, small
		h.WorstRows = []trace.RowShare{{Row: 1, Share: 0.9}, {Row: 2, Share: 0.5}}
		f := said(caseOf(definite(), h))["unsolved-rows"]
		if !strings.Contains(f.Advice, words) || (len(f.Try) > 0) != (small > 0) {
			t.Errorf("%d in small units: %q, tries %v", small, f.Advice, f.Try)
		}
	}
}

// Factors are held against complete ones as L+U each, whichever of them are
// kept as one triangle: of 100 rows, 1000 entries of one triangle are 1900.
func TestFactorsAreCountedAlike(t *testing.T) {
	for _, c := range []struct {
		kept, whole   string
		entries, full int64
		want          bool
	}{
		{"gmres:30+ilut:1e-3,10", "richardson:1+ldl", 1200, 1000, false},
		{"gmres:30+ilut:1e-3,10", "richardson:1+cholesky", 1600, 1000, true},
		{"gmres:30+ilut:1e-3,10", "richardson:1+lu", 1600, 1900, true},
		{"cg+ict:1e-3,10", "richardson:1+lu", 1000, 1900, true},
		{"cg+ict:1e-3,10", "richardson:1+ldl", 1000, 1500, false},
	} {
		h, d := solvedTrial(c.kept, 10, time.Second), solvedTrial(c.whole, 1, time.Second)
		h.Notes.Entries, d.Notes.Entries, d.Direct = c.entries, c.full, true
		if f, ok := said(caseOf(definite(), h, d))["nothing-dropped"]; ok != c.want {
			t.Errorf("%d entries of %s beside %d of %s: %v %s", c.entries, c.kept, c.full, c.whole, ok, f.Claim)
		}
	}
}
