package diagnose

import (
	"strings"
	"testing"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

func TestUnsolvedField(t *testing.T) {
	h := solvedTrial("cg+none", 50, time.Second)
	h.Stop, h.TrueResidual = trace.IterationLimit, 1e-9
	h.Fields = []trace.Field{{Name: "u", Rows: 40, Residual: 1e-9}, {Name: "p", Rows: 40, Residual: 0.3, Tol: 1e-6}}
	f, ok := said(caseOf(definite(), h))["unsolved-field"]
	if !ok || f.Certainty != inspect.Measured || !strings.Contains(f.Claim, "field p (40 rows) ends at 0.3") || f.Try[0] != "scale/cg+none" {
		t.Errorf("%v %+v", ok, f)
	}
	h.FloorHits, h.Floor, h.BestTrue, h.Residual = 7, 1e-9, 1e-9, 1e-14
	if f, ok := said(caseOf(definite(), h))["accuracy-floor"]; ok {
		t.Errorf("a floor below the tolerance is told as one above: %s", f.Claim)
	}
	for what, change := range map[string]func(*trace.History){
		"a field without a tolerance of its own": func(h *trace.History) { h.Fields = []trace.Field{{Name: "p", Residual: 0.3}} },
		"a field that holds":                     func(h *trace.History) { h.Fields = []trace.Field{{Name: "p", Residual: 1e-7, Tol: 1e-6}} },
		"a norm that is not met":                 func(h *trace.History) { h.TrueResidual = 1e-3 },
		"a trial under way":                      func(h *trace.History) { h.Stop = trace.Running },
	} {
		g := h
		change(&g)
		if f, ok := said(caseOf(definite(), g))["unsolved-field"]; ok {
			t.Errorf("%s: false alarm: %s", what, f.Claim)
		}
	}
}

// Rows are told with their labels, and with their field where all share one.
func TestRowsByName(t *testing.T) {
	f := definite()
	f.Names.Labels = []string{"1:ux", "1:rz", "2:rz"}
	f.Names.Fields, f.Names.FieldOf = []string{"u", "r"}, []int32{0, 1, 1}
	h := solvedTrial("cg+none", 50, time.Second)
	h.Componentwise, h.UnsolvedRows = 0.9, 2
	h.WorstRows = []trace.RowShare{{Row: 1, Share: 0.9}, {Row: 2, Share: 0.5}}
	g, ok := said(caseOf(f, h))["unsolved-rows"]
	if want := "worst in rows 2 = 1:rz, 3 = 2:rz, all in field r"; !ok || !strings.Contains(g.Claim, want) {
		t.Errorf("%q, want %q", g.Claim, want)
	}
}
