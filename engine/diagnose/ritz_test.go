package diagnose

import (
	"math"
	"strings"
	"testing"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// curve is a solved trial of cg whose energy error takes the given decades at
// the given iterations, and linearly between.
func curve(pairing string, its []int, decades []float64) trace.History {
	h := solvedTrial(pairing, its[len(its)-1]+1, time.Second)
	h.Energy, h.Condition = true, trace.Condition{Of: "A", Smallest: 1e-4, Largest: 1, Estimate: 1e4, Settled: true}
	for i := 1; i < len(its); i++ {
		for k := its[i-1]; k < its[i]; k++ {
			part := float64(k-its[i-1]) / float64(its[i]-its[i-1])
			e := math.Pow(10, -(decades[i-1] + part*(decades[i]-decades[i-1])))
			h.EnergyErrors = append(h.EnergyErrors, trace.EnergyError{Iter: k, Lower: e, Upper: math.NaN()})
		}
	}
	return h
}

// A flat part is told where a small Ritz value settles at its end; not where
// none does, where a large one does, and not of an even curve.
func TestPlateauNeedsALock(t *testing.T) {
	flat := func(l ...trace.Lock) trace.History {
		h := curve("cg+none", []int{0, 60, 100}, []float64{0, .1, 8})
		h.Locks = l
		return h
	}
	small, large := trace.Lock{Value: 1e-4, Iter: 61, Copies: 1}, trace.Lock{Value: 1, Iter: 61, Copies: 1}
	early := trace.Lock{Value: 1e-4, Iter: 5, Copies: 1}
	even := curve("cg+none", []int{0, 100}, []float64{0, 8})
	even.Locks = []trace.Lock{small}
	for _, c := range []struct {
		h    trace.History
		want bool
	}{{flat(small), true}, {flat(large, early), false}, {flat(), false}, {even, false}} {
		f, ok := said(caseOf(definite(), c.h))["plateau"]
		if ok != c.want {
			t.Errorf("locks %v: told %v: %s", c.h.Locks, ok, f.Claim)
		}
		if ok && !strings.Contains(f.Claim, "when the Ritz value 0.0001 settled (it 61)") {
			t.Error(f.Claim)
		}
	}
}

// One trial is explained: today's alone, else the plainest.
func TestOneTrialIsExplained(t *testing.T) {
	late := func(pairing string) trace.History {
		h := solvedTrial(pairing, 100, time.Second)
		h.Delay = 40
		return h
	}
	jacobi, ic, none := late("cg+jacobi"), late("cg+ic:0"), late("cg+none")
	if f := said(caseOf(definite(), ic, jacobi, none))["lost-orthogonality"]; f.Subject != "cg+none" {
		t.Errorf("told of %q", f.Subject)
	}
	if f, ok := said(caseOf(definite(), ic, solvedTrial("cg+none", 9, time.Second)))["lost-orthogonality"]; ok {
		t.Errorf("told of %q, which is neither plain nor today's", f.Subject)
	}
	if f := said(caseOf(definite(), ic))["lost-orthogonality"]; f.Subject != "cg+ic:0" {
		t.Errorf("the only trial is not told of: %q", f.Subject)
	}
	ic.Today = true
	if f := said(caseOf(definite(), none, ic))["lost-orthogonality"]; f.Subject != "cg+ic:0" {
		t.Errorf("told of %q, not of today's", f.Subject)
	}
	indefinite := definite()
	indefinite.PositiveDefinite = inspect.Fact{Answer: inspect.No, Certainty: inspect.Proved}
	if f, ok := said(caseOf(indefinite, none))["lost-orthogonality"]; ok {
		t.Errorf("told of a method outside its assumptions: %s", f.Claim)
	}
}

// Outliers are offered for deflation where it pays, and not where they are
// those of singleton rows.
func TestOutliersThatPay(t *testing.T) {
	of := func(w ...trace.Counterfactual) trace.History {
		h := solvedTrial("cg+jacobi", 60, time.Second)
		h.Without, h.Condition.Of = w, "M⁻¹A"
		return h
	}
	pays := trace.Counterfactual{What: trace.Deflated, Removed: 2, Largest: 1e-3, Next: .5, Iterations: 20}
	little, rows := pays, pays
	little.Iterations, rows.What = 55, trace.WithoutSingletons
	f, ok := said(caseOf(definite(), of(pays)))["small-outliers"]
	if !ok || len(f.Try) != 1 || f.Try[0] != "dcg:2+jacobi" || f.Predicts[0] != (Predicted{"dcg:2+jacobi", "iterations", 20}) {
		t.Errorf("%+v", f)
	}
	late := of(pays)
	late.Locks = []trace.Lock{{Value: 1e-3, Iter: 55, Copies: 1}}
	if f := said(caseOf(definite(), late))["small-outliers"]; f.Weight != Note || f.Try != nil || f.Predicts != nil {
		t.Errorf("deflation would not find it: %+v", f)
	}
	for _, h := range []trace.History{of(little), of(pays, rows), of()} {
		if f, ok := said(caseOf(definite(), h))["small-outliers"]; ok {
			t.Errorf("%v: %s", h.Without, f.Claim)
		}
	}
}

// Where restarts stand still and the harmonic Ritz values near zero are
// positive, carrying them over is offered first.
func TestStagnationKeepsTheSlowPart(t *testing.T) {
	h := solvedTrial("gmres:10+none", 210, time.Second)
	h.Stop, h.Restarted = trace.Stagnated, true
	for k := range 212 {
		h.Records = append(h.Records, trace.Record{Iter: uint32(k), Residual: 1})
	}
	for range 20 {
		h.Events = append(h.Events, trace.Event{Kind: trace.Restart, Value: 0.9999})
	}
	for _, c := range []struct {
		values []complex128
		first  string
	}{
		{[]complex128{1e-3, 2e-3, .5, 1}, "gmresdr:10,2+none"},
		{[]complex128{-1e-3, 2e-3, .5, 1}, "gmres:40+none"},
		{[]complex128{complex(1e-3, 1e-3), complex(1e-3, -1e-3), .5, 1}, "gmres:40+none"},
		{[]complex128{.3, .4, .5, 1}, "gmres:40+none"},
		{nil, "gmres:40+none"},
	} {
		h.Harmonic = c.values
		f := said(caseOf(definite(), h))["restart-stagnation"]
		if len(f.Try) == 0 || f.Try[0] != c.first {
			t.Errorf("%v: tries %v, want %s first", c.values, f.Try, c.first)
		}
	}
}

// The count with longer cycles from the factor of the present ones, against
// Chebyshev polynomials of the same interval: 2q^m/(1+q^2m), q = (√κ−1)/(√κ+1).
func TestLongerCycles(t *testing.T) {
	const kappa = 400.
	q := (math.Sqrt(kappa) - 1) / (math.Sqrt(kappa) + 1)
	factor := func(m float64) float64 { return 2 * math.Pow(q, m) / (1 + math.Pow(q, 2*m)) }
	want := math.Ceil(math.Log(1e-8) / math.Log(factor(80)) * 80)
	if got := cycles(80, 20, factor(20), 1e-8); math.Abs(got-want) > 1 {
		t.Errorf("%g its, want %g", got, want)
	}
	if got := cycles(500, 20, factor(20), 1e-8); math.Abs(factor(got)/1e-8-1) > .1 {
		t.Errorf("one cycle: %g its, where the factor is %g", got, factor(got))
	}
}

// Backward error times condition, the smaller of the two ways; silent where
// the answer has its digits, A is singular, or nothing is known.
func TestFewDigits(t *testing.T) {
	h := solvedTrial("cg+jacobi", 50, time.Second)
	h.Backward, h.Componentwise = 1e-12, 1e-14
	study := func(raw, scaled float64) *inspect.Facts {
		f := definite()
		f.Study = &inspect.Study{Raw: &inspect.Spectrum{Condition: raw}, Equilibrated: &inspect.Spectrum{Condition: scaled}}
		return f
	}
	f, ok := said(caseOf(study(1e11, 1e13), h))["few-correct-digits"]
	if !ok || f.Certainty != inspect.Estimated || !strings.Contains(f.Claim, "(of A) may leave no more than 1 correct digit") {
		t.Errorf("%v: %s", ok, f.Claim)
	}
	singular := study(1e11, 1e13)
	singular.Singular = inspect.Fact{Answer: inspect.Yes, Certainty: inspect.Measured}
	for name, facts := range map[string]*inspect.Facts{"scaling repairs it": study(1e11, 1e5), "well conditioned": study(1e5, 1e5),
		"unknown": definite(), "singular": singular} {
		if f, ok := said(caseOf(facts, h))["few-correct-digits"]; ok {
			t.Errorf("%s: %s", name, f.Claim)
		}
	}
	h.Error = 1e-9
	if f, ok := said(caseOf(study(1e11, 1e13), h))["few-correct-digits"]; ok {
		t.Errorf("the error is known to be small: %s", f.Claim)
	}
}
