package diagnose

import (
	"slices"
	"strings"
	"testing"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// beyondOne is a system of which one double leaves 1.24e-7 at best, and a trial
// that keeps x in two.
func beyondOne() (one, two trace.History) {
	one = solvedTrial("richardson:1+lu", 3, time.Millisecond)
	one.Stop, one.TrueResidual, one.BestTrue, one.Componentwise, one.Direct = trace.FalselyConverged, 1.24e-7, 1.24e-7, 2.4e-16, true
	one.Near = &trace.Nearness{Of: "richardson:1,2+lu", Error: 3e-10, Worst: 2e-8, Doubt: 1e-20, WorstDoubt: 1e-19}
	two = solvedTrial("richardson:1,2+lu", 2, time.Millisecond)
	two.TwoDoubles, two.Rounded, two.TrueResidual, two.BestTrue, two.Direct = true, 7.6e-8, 4e-12, 4e-12, true
	two.Near = &trace.Nearness{Of: "richardson:1,2+lu", Error: 4e-17, Worst: 1.1e-16, Doubt: 1e-20, WorstDoubt: 1e-19}
	return one, two
}

func beyondCase(trials ...trace.History) Case {
	return Case{Facts: &inspect.Facts{N: 100, DiagPositive: 100}, Trials: trials, Tol: 1e-8, Race: true}
}

// What one double does not hold is first offered to two; once they have it,
// the claim stands, with what they leave, and with the digits of the answer in
// one double as they were measured.
func TestBeyondOneDouble(t *testing.T) {
	one, two := beyondOne()
	alone := one
	alone.Near = nil
	if f := said(beyondCase(alone))["double-precision"]; !slices.Equal(f.Try, []string{two.Pairing}) || !strings.Contains(f.Advice, "richardson:1,2+lu tells") {
		t.Errorf("before: %q, tries %v", f.Advice, f.Try)
	}
	if got := Offered(beyondCase(alone)); got != two.Pairing {
		t.Errorf("a race is offered %q", got)
	}
	f := said(beyondCase(one, two))["double-precision"]
	for _, want := range []string{"double precision cannot be counted on for 1e-08 here: richardson:1+lu solves A to the last bit of its entries, and 1.2e-07 is left",
		"x in two doubles leaves 4e-12, 7.6e-08 once rounded to one"} {
		if !strings.Contains(f.Claim, want) {
			t.Errorf("claim %q lacks %q", f.Claim, want)
		}
	}
	for _, want := range []string{"ask for 2e-07, or stop by the backward error", "right to 9 digits (7 in its worst entry)", "for 1e-08 itself keep x in two doubles: richardson:1,2+lu"} {
		if !strings.Contains(f.Advice, want) {
			t.Errorf("advice %q lacks %q", f.Advice, want)
		}
	}
	if i, k := strings.Index(f.Advice, "ask for"), strings.Index(f.Advice, "keep x in two"); i > k {
		t.Errorf("what one double holds is not told first: %q", f.Advice)
	}
	if f.Weight != Blocker || f.Certainty != inspect.Measured || len(f.Evidence) != 6 {
		t.Errorf("%s, %s, evidence %+v", f.Weight, f.Certainty, f.Evidence)
	}
}

// Where two doubles do not get there either, that is said and nothing offered.
func TestBeyondTwoDoubles(t *testing.T) {
	one, two := beyondOne()
	two.Stop, two.TrueResidual, two.Records, one.Near = trace.Stagnated, 3e-8, make([]trace.Record, 7), nil
	f := said(beyondCase(one, two))["double-precision"]
	if len(f.Try) > 0 || !strings.Contains(f.Advice, "does not get there either: richardson:1,2+lu ends stagnated at 3e-08") || strings.Contains(f.Claim, "two doubles") {
		t.Errorf("%q, %q, tries %v", f.Claim, f.Advice, f.Try)
	}
}

// Where one double holds the solution in two to the tolerance, the rule is
// silent; where it holds it far better than the answer taken for the utmost,
// that answer is not named.
func TestTwoDoublesOverturnTheLimit(t *testing.T) {
	one, two := beyondOne()
	two.Rounded = 0.9e-8
	if f, spoke := said(beyondCase(one, two))["double-precision"]; spoke {
		t.Errorf("rounded it meets the tolerance: %s", f.Claim)
	}
	two.Rounded = 3e-8
	if f := said(beyondCase(one, two))["double-precision"]; !strings.Contains(f.Claim, "3e-08 once rounded") || strings.Contains(f.Claim, one.Pairing) {
		t.Errorf("rounded it leaves far less: %s", f.Claim)
	}
	two.Rounded = 1.5e-8
	if f, spoke := said(beyondCase(two))["double-precision"]; spoke {
		t.Errorf("by luck another x could get there: %s", f.Claim)
	}
}

// Alone, a trial in two doubles is told for what it is; beside an answer in one
// double it is nothing to speak of.
func TestTwoDoublesAlone(t *testing.T) {
	_, two := beyondOne()
	f := said(beyondCase(two))["double-precision"]
	if !strings.Contains(f.Claim, "richardson:1,2+lu keeps x in two doubles and leaves 4e-12, 7.6e-08 once rounded to one") ||
		!strings.Contains(f.Advice, "ask for 2e-07, or stop by the backward error") {
		t.Errorf("%q, %q", f.Claim, f.Advice)
	}
	if f, spoke := said(beyondCase(two, solvedTrial("cg+jacobi", 40, time.Second)))["double-precision"]; spoke {
		t.Errorf("beside an answer in one double: %s", f.Claim)
	}
}

// No advice calls a system solved that two doubles alone have solved, and no
// other finding changes by them.
func TestTwoDoublesSolveNothingForOthers(t *testing.T) {
	one, two := beyondOne()
	slow := solvedTrial("gmres:30+none", 700, time.Second)
	slow.Stop, slow.TrueResidual, slow.BestTrue, slow.Restarted = trace.Stagnated, 0.5, 0.5, true
	today := solvedTrial("bicgstab+none", 900, time.Second)
	today.Stop, today.TrueResidual, today.BestTrue, today.Today = trace.IterationLimit, 0.5, 0.5, true
	without, with := said(beyondCase(one, slow, today)), said(beyondCase(one, slow, today, two))
	for rule, f := range without {
		if g, ok := with[rule]; rule != "double-precision" && (!ok || f.Claim != g.Claim || f.Advice != g.Advice || f.Weight != g.Weight) {
			t.Errorf("%s changes from %q, %q to %q, %q", rule, f.Claim, f.Advice, g.Claim, g.Advice)
		}
	}
	for rule := range with {
		if _, ok := without[rule]; !ok {
			t.Errorf("%s speaks", rule)
		}
	}
}

// Digits are told where the solution they are measured against is surer than
// they are, and never rounded up.
func TestDigitsAreMeasured(t *testing.T) {
	for _, c := range []struct {
		near trace.Nearness
		want string
	}{
		{trace.Nearness{Of: "b", Error: 3e-10, Worst: 1.9e-8, Doubt: 1e-12, WorstDoubt: 1e-12}, "right to 9 digits (7 in its worst entry)"},
		{trace.Nearness{Of: "b", Error: 3e-10, Worst: 1.9e-8, Doubt: 1e-12, WorstDoubt: 1e-8}, "right to 9 digits"},
		{trace.Nearness{Of: "b", Error: 3e-10, Worst: 3e-10, Doubt: 1e-10}, ""},
		{trace.Nearness{Of: "b", Error: 7, Worst: 9}, "right to 0 digits"},
		{trace.Nearness{Of: "a", Error: 4e-17, Worst: 1.1e-16, Doubt: 1e-20}, "right to 16 digits"},
		{trace.Nearness{Of: "a", Error: 4e-17, Worst: 1.1e-16, Doubt: 1e-12, WorstDoubt: 1e-12}, "right to 12 digits"},
	} {
		if got := Right(trace.History{Pairing: "a", Near: &c.near}); got != c.want {
			t.Errorf("%+v: %q, want %q", c.near, got, c.want)
		}
	}
	if got := Right(trace.History{}); got != "" {
		t.Errorf("nothing measured: %q", got)
	}
}

// The refinement goes by the factors that gave the answer, by those of another
// trial, or by those that fit A.
func TestWhichRefinement(t *testing.T) {
	one, _ := beyondOne()
	one.Near = nil
	iterative := one
	iterative.Pairing, iterative.Direct, iterative.TrueResidual = "scale/gmres:30+ilu:0", false, 1.2e-7
	other := solvedTrial("rcm/richardson:1+cholesky", 3, time.Millisecond)
	other.Stop, other.Direct, other.Records, other.TrueResidual = trace.Stagnated, true, make([]trace.Record, 3), 2
	symmetric := inspect.Facts{Symmetric: inspect.Fact{Answer: inspect.Yes}}
	for _, c := range []struct {
		f      inspect.Facts
		trials []trace.History
		want   string
	}{
		{inspect.Facts{}, []trace.History{one}, "richardson:1,2+lu"},
		{inspect.Facts{}, []trace.History{iterative, other}, "richardson:1,2+cholesky"},
		{symmetric, []trace.History{iterative}, "richardson:1,2+ldl"},
		{inspect.Facts{}, []trace.History{iterative}, "richardson:1,2+lu"},
	} {
		if got := Offered(Case{Facts: &c.f, Trials: c.trials, Tol: 1e-8}); got != c.want {
			t.Errorf("offers %q, want %q", got, c.want)
		}
	}
}
