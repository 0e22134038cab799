package diagnose

import (
	"math"
	"strings"
	"testing"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// definite are the facts of an ordinary positive definite system.
func definite() *inspect.Facts {
	yes := inspect.Fact{Answer: inspect.Yes, Certainty: inspect.Proved}
	no := inspect.Fact{Answer: inspect.No, Certainty: inspect.Proved}
	return &inspect.Facts{N: 100, Entries: 460, Digits: 17, RHS: "file", RHSNorm: 1, Symmetric: yes, PositiveDefinite: yes,
		NegativeDefinite: no, Singular: no, Unreachable: no, TriangleOnly: no, RowSumsZero: no, DiagPositive: 100,
		RowNorm: inspect.Range{Min: 4, Max: 4}, Components: 1, Complete: true}
}

// solvedTrial is a trial that converged without a word.
func solvedTrial(pairing string, its int, own time.Duration) trace.History {
	nan := math.NaN()
	return trace.History{Pairing: pairing, Stop: trace.Converged, Norm: trace.TwoNorm, Iterations: its, OwnTime: own,
		SymmetricA: strings.Contains(pairing, "cg"), DefiniteA: strings.Contains(pairing, "cg"),
		CPUShare: 1, TrueResidual: 1e-9, BestTrue: 1e-9, Residual: 1e-9, Componentwise: 1e-9, Error: nan, Floor: 1e-14, PrecondAsymmetry: nan}
}

func said(c Case) map[string]Finding {
	m := map[string]Finding{}
	for _, f := range Judge(c) {
		if _, ok := m[f.Rule]; !ok {
			m[f.Rule] = f
		}
	}
	return m
}

func caseOf(f *inspect.Facts, trials ...trace.History) Case {
	return Case{Facts: f, Trials: trials, Tol: 1e-8, StopBy: "rhs"}
}

func TestNothingToSay(t *testing.T) {
	c := caseOf(definite(), solvedTrial("cg+none", 50, time.Second), solvedTrial("cg+jacobi", 50, time.Second))
	if got := Judge(c); len(got) != 0 {
		t.Errorf("an ordinary system gives %v", got)
	}
}

// Each rule: a change to an ordinary case that must make exactly it speak,
// with this weight, certainty and part of the claim.
func TestEachRuleSpeaks(t *testing.T) {
	event := func(e trace.Event) func(*inspect.Facts, *trace.History) {
		return func(_ *inspect.Facts, h *trace.History) { h.Events = append(h.Events, e) }
	}
	for _, c := range []struct {
		rule      string
		change    func(*inspect.Facts, *trace.History)
		weight    Weight
		certainty inspect.Certainty
		claim     string
	}{
		{"outside-assumptions", func(f *inspect.Facts, h *trace.History) {
			f.Symmetric = inspect.Fact{Answer: inspect.No, Certainty: inspect.Proved, Why: "a_12 and a_21 differ"}
			h.Stop = trace.IterationLimit
		}, Blocker, inspect.Proved, "needs a symmetric A"},
		{"outside-assumptions", func(f *inspect.Facts, h *trace.History) {
			f.PositiveDefinite = inspect.Fact{Answer: inspect.No, Certainty: inspect.Proved, Why: "a negative entry on the diagonal"}
			f.DiagNegative = 1
		}, Drag, inspect.Proved, "by no guarantee"},
		{"negative-curvature", event(trace.Event{Iter: 14, Kind: trace.NegativeCurvature, Value: -0.384, Scale: 1e-12,
			Rows: []trace.RowShare{{Row: 210, Share: 0.49}, {Row: 211, Share: 0.48}, {Row: 5, Share: 0.01}}}),
			Blocker, inspect.Proved, "rows 211, 212"},
		{"negative-curvature", event(trace.Event{Iter: 14, Kind: trace.NegativeCurvature, Value: -1e-7, Scale: 1e-12, Slack: 5e-6,
			Rows: []trace.RowShare{{Row: 2, Share: 1}}}), Blocker, inspect.Measured, "digits"},
		{"unreachable-rhs", func(f *inspect.Facts, h *trace.History) {
			f.Unreachable = inspect.Fact{Answer: inspect.Yes, Certainty: inspect.Proved, Value: 0.125, Why: "constants"}
			h.Stop = trace.IterationLimit
		}, Blocker, inspect.Proved, "0.125"},
		{"preconditioner-not-spd", func(_ *inspect.Facts, h *trace.History) {
			h.Pairing, h.SPDM, h.PrecondAsymmetry, h.Stop = "cg+gs", true, 1.9, trace.IterationLimit
		}, Blocker, inspect.Measured, "not symmetric"},
		{"preconditioner-not-spd", func(_ *inspect.Facts, h *trace.History) {
			h.SPDM, h.PrecondAsymmetry = true, 1e-15
			h.Events = []trace.Event{{Kind: trace.PrecondIndefinite, Quantity: "r'z", Value: -0.3}}
		}, Drag, inspect.Measured, "not positive definite"},
		{"false-convergence", func(_ *inspect.Facts, h *trace.History) {
			h.Stop = trace.FalselyConverged
			h.Events = []trace.Event{{Iter: 40, Kind: trace.FalseStop, Value: 2.6e-6, Scale: 9e-9}}
		}, Blocker, inspect.Measured, "2.6e-06"},
		{"not-definite", func(f *inspect.Facts, h *trace.History) {
			f.PositiveDefinite = inspect.Fact{Answer: inspect.No, Certainty: inspect.Proved, Why: "x'Ax < 0"}
			h.DefiniteA = false
		}, Drag, inspect.Proved, "positive diagonal"},
		{"opposite-sign", func(f *inspect.Facts, _ *trace.History) {
			f.NegativeDefinite = inspect.Fact{Answer: inspect.Yes, Certainty: inspect.Proved}
			f.PositiveDefinite = inspect.Fact{Answer: inspect.No, Certainty: inspect.Proved}
			f.DiagPositive, f.DiagNegative = 0, 100
		}, Drag, inspect.Proved, "opposite sign"},
		{"unsolved-rows", func(_ *inspect.Facts, h *trace.History) {
			h.Componentwise, h.UnsolvedRows, h.SmallRows, h.WorstRows = 1, 36, 36, []trace.RowShare{{Row: 210, Share: 1}}
		}, Drag, inspect.Measured, "36 rows"},
		{"breakdown", func(_ *inspect.Facts, h *trace.History) {
			h.Stop = trace.BrokeDown
			h.Events = []trace.Event{{Iter: 7, Kind: trace.Breakdown, Quantity: "omega", Value: 0}}
		}, Drag, inspect.Measured, "omega"},
		{"breakdown", event(trace.Event{Iter: 2, Kind: trace.HalfStep, Value: 1e-17}), Note, inspect.Measured, "half step"},
		{"divergence", func(_ *inspect.Facts, h *trace.History) { h.Stop, h.Reason = trace.Diverged, "grown" },
			Drag, inspect.Measured, "diverged"},
		{"restart-stagnation", func(_ *inspect.Facts, h *trace.History) {
			h.Stop = trace.Stagnated
			for range 20 {
				h.Events = append(h.Events, trace.Event{Kind: trace.Restart, Value: 0.9999})
			}
		}, Drag, inspect.Measured, "cycles"},
		{"accuracy-floor", func(_ *inspect.Facts, h *trace.History) {
			h.Stop, h.FloorHits, h.BestTrue, h.Floor = trace.Stagnated, 5, 5e-14, 1e-14
		},
			Drag, inspect.Measured, "floor"},
		{"pivot", func(_ *inspect.Facts, h *trace.History) {
			h.Notes.Broke, h.Notes.Shift = []trace.Pivot{{Row: 3, Value: -5}}, 0.178
		}, Note, inspect.Measured, "row 4 with pivot -5"},
		{"row-scaling", func(f *inspect.Facts, _ *trace.History) { f.RowNorm = inspect.Range{Min: 1e-3, Max: 1e4} },
			Note, inspect.Measured, "1e+07"},
		{"few-digits", func(f *inspect.Facts, _ *trace.History) { f.Digits, f.Delta = 6, 5e-6 },
			Note, inspect.Measured, "6 digits"},
		{"stored-zeros", func(f *inspect.Facts, _ *trace.History) {
			f.Stored, f.ExplicitZeros = 1000, 500
		}, Drag, inspect.Proved, "500 of 1000 stored entries are zero (50 %)"},
		{"one-triangle", func(f *inspect.Facts, _ *trace.History) {
			f.TriangleOnly = inspect.Fact{Answer: inspect.Yes, Certainty: inspect.Proved}
		}, Drag, inspect.Proved, "one triangle"},
		{"zero-rhs", func(f *inspect.Facts, _ *trace.History) { f.ZeroRHS = true }, Blocker, inspect.Proved, "b = 0"},
		{"not-your-rhs", func(f *inspect.Facts, _ *trace.History) { f.RHS = "made" }, Note, inspect.Proved, "made"},
		{"singleton-rows", func(f *inspect.Facts, _ *trace.History) {
			f.Singletons, f.SingletonDiag = 4, inspect.Range{Min: 1, Max: 1}
			f.RestDiag, f.RestGershgorin = inspect.Range{Min: 1e6, Max: 4e6}, inspect.Range{Min: 2e5, Max: 8e6}
		}, Drag, inspect.Proved, "4 decoupled rows"},
	} {
		f, h := definite(), solvedTrial("cg+ic:0", 50, time.Second)
		c.change(f, &h)
		got := said(caseOf(f, h))
		g, ok := got[c.rule]
		if !ok {
			t.Errorf("%s is silent (%q)", c.rule, c.claim)
			continue
		}
		if g.Weight != c.weight || g.Certainty != c.certainty || !strings.Contains(g.Claim, c.claim) {
			t.Errorf("%s says %s, %s: %s; want %s, %s with %q", c.rule, g.Weight, g.Certainty, g.Claim, c.weight, c.certainty, c.claim)
		}
		delete(got, c.rule)
		for other, o := range got {
			t.Errorf("with %s (%q) %s speaks too: %s", c.rule, c.claim, other, o.Claim)
		}
	}
}

func TestRulesStaySilent(t *testing.T) {
	for what, change := range map[string]func(*inspect.Facts, *trace.History){
		"curvature within its rounding bound": func(_ *inspect.Facts, h *trace.History) {
			h.Events = []trace.Event{{Kind: trace.NegativeCurvature, Value: -1e-16, Scale: 1e-12}}
		},
		"curvature zero to rounding": func(_ *inspect.Facts, h *trace.History) {
			h.Events = []trace.Event{{Kind: trace.ZeroCurvature, Value: -1e-16, Scale: 1e-12}}
		},
		"a false stop by a rounding error": func(_ *inspect.Facts, h *trace.History) {
			h.Events = []trace.Event{{Kind: trace.FalseStop, Value: 1.2e-8, Scale: 9e-9}}
		},
		"cg at an iteration limit": func(_ *inspect.Facts, h *trace.History) { h.Stop = trace.IterationLimit },
		"an unreachable part below the tolerance": func(f *inspect.Facts, _ *trace.History) {
			f.Unreachable = inspect.Fact{Answer: inspect.Yes, Certainty: inspect.Proved, Value: 1e-12}
		},
		"decoupled rows inside the rest's spectrum": func(f *inspect.Facts, _ *trace.History) {
			f.Singletons, f.SingletonDiag = 4, inspect.Range{Min: 1, Max: 1}
			f.RestDiag, f.RestGershgorin = inspect.Range{Min: 2, Max: 4}, inspect.Range{Min: 0, Max: 8}
		},
		"cg on a semi-definite matrix with b in reach": func(f *inspect.Facts, _ *trace.History) {
			f.PositiveDefinite = inspect.Fact{Answer: inspect.No, Certainty: inspect.Proved}
			f.Semidefinite = inspect.Fact{Answer: inspect.Yes, Certainty: inspect.Proved}
		},
		"five flat cycles of a trial that converged": func(_ *inspect.Facts, h *trace.History) {
			for range 5 {
				h.Events = append(h.Events, trace.Event{Kind: trace.Restart, Value: 0.9999})
			}
		},
	} {
		f, h := definite(), solvedTrial("cg+ic:0", 50, time.Second)
		change(f, &h)
		for _, g := range Judge(caseOf(f, h)) {
			t.Errorf("%s: false alarm %s: %s", what, g.Rule, g.Claim)
		}
	}
}

func TestCostAndToday(t *testing.T) {
	plain, dear := solvedTrial("cg+none", 300, time.Second), solvedTrial("cg+ssor:1", 150, 2*time.Second)
	got := said(caseOf(definite(), plain, dear))
	if f, ok := got["preconditioner-costs-more"]; !ok || f.Subject != "cg+ssor:1" || f.Try[0] != "cg+none" {
		t.Errorf("a preconditioner that costs a second more: %v", got)
	}
	dear.Today = true
	c := caseOf(definite(), plain, dear)
	c.Gain = Gain{Times: 2, Today: 2, Best: 1}
	if f, ok := said(c)["today-beaten"]; !ok || !strings.Contains(f.Claim, "2 times faster") || f.Certainty != inspect.Measured {
		t.Errorf("today's pairing at twice the time: %v", f)
	}
	c.Gain.ByWork = true
	if f, ok := said(c)["today-beaten"]; !ok || strings.Contains(f.Claim, "faster") || f.Certainty != inspect.Estimated || f.Weight != Note {
		t.Errorf("by counted work: %v", f)
	}
	for _, g := range []Gain{{}, {Times: 1.05, Today: 1.05, Best: 1}} { // nothing known, and five per cent
		c.Gain = g
		if f, ok := said(c)["today-beaten"]; ok {
			t.Errorf("%v is called a win: %s", g, f.Claim)
		}
	}
}

func TestOrderOfFindings(t *testing.T) {
	f := definite()
	f.RHS = "ones"
	f.RowNorm = inspect.Range{Min: 1, Max: 1e6}
	h := solvedTrial("cg+none", 10, time.Second)
	h.Events = []trace.Event{{Kind: trace.NegativeCurvature, Value: -1, Scale: 1e-9, Rows: []trace.RowShare{{Row: 0, Share: 1}}}}
	var order []string
	for _, g := range Judge(caseOf(f, h)) {
		order = append(order, g.Rule)
	}
	if want := "negative-curvature row-scaling not-your-rhs"; strings.Join(order, " ") != want {
		t.Errorf("told in the order %v, want %s", order, want)
	}
}
