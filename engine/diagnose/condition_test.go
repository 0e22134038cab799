package diagnose_test

import (
	"testing"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// large is a definite system whose second look has no small end.
func large() *inspect.Facts {
	yes := inspect.Fact{Answer: inspect.Yes, Certainty: inspect.Proved}
	return &inspect.Facts{N: 1000000, Symmetric: yes, PositiveDefinite: yes,
		Singular: inspect.Fact{Answer: inspect.No, Certainty: inspect.Proved},
		Diag:     inspect.Range{Min: 4, Max: 4}, Study: &inspect.Study{}}
}

// met is a trial that was ended early, with its outermost Ritz values.
func met(pairing, of string, low, high float64) trace.History {
	return trace.History{Pairing: pairing, Stop: trace.Outpaced, Iterations: 300,
		Condition: trace.Condition{Of: of, Smallest: low, Largest: high, Estimate: high / low}}
}

// Where the second look has no small end, the Ritz values of a trial bound the
// condition from below, of A itself where its diagonal is even; what units or a
// preconditioner make, or a matrix that is not known to be definite, does not.
func TestConditionOfALargeSystemByItsTrials(t *testing.T) {
	uneven, open, known := large(), large(), large()
	uneven.Diag.Max = 400
	open.PositiveDefinite.Answer = inspect.Unknown
	known.Study.Equilibrated = &inspect.Spectrum{Condition: 1e3, Norm: "2", Certainty: inspect.Measured}
	negative := met("cg+none", "A", 1e-6, 8)
	negative.Condition.Negative = true
	arrived := met("cg+none", "A", 1e-5, 8)
	arrived.Stop = trace.Converged
	none, jacobi := met("cg+none", "A", 1e-5, 8), met("cg+jacobi", "M⁻¹A", 5e-6, 2)
	for _, c := range []struct {
		what  string
		facts *inspect.Facts
		h     trace.History
		says  string
	}{
		{"even diagonal", large(), none, "the condition of A is at least 8e+05, for cg+none has met Ritz values from 1e-05 to 8"},
		{"jacobi", uneven, jacobi, "the condition of A scaled by its diagonal is at least 4e+05, for cg+jacobi"},
		{"units", uneven, none, ""},
		{"preconditioned", large(), met("cg+ic:0", "M⁻¹A", 1e-6, 2), ""},
		{"prepared", large(), met("scale/cg+none", "A", 1e-6, 2), ""},
		{"not known to be definite", open, none, ""},
		{"cg has converged", open, arrived, "from 1e-05 to 8, if A is definite, which is not proved and which nothing so far speaks against"},
		{"negative", large(), negative, ""},
		{"well conditioned so far", large(), met("cg+none", "A", 1e-3, 8), ""},
		{"known by the study", known, none, ""},
	} {
		var got diagnose.Finding
		for _, f := range diagnose.Judge(diagnose.Case{Facts: c.facts, Trials: []trace.History{c.h}, Tol: 1e-8}) {
			if f.Rule == "ill-conditioned" {
				got = f
			}
		}
		if c.says == "" {
			if got.Rule != "" {
				t.Errorf("%s: says %q", c.what, got.Claim)
			}
			continue
		}
		sure := inspect.Measured
		if c.facts == open {
			sure = inspect.Estimated
		}
		if got.Certainty != sure || got.Weight != diagnose.Note {
			t.Errorf("%s: %s %s", c.what, got.Weight, got.Certainty)
		}
		says(t, got, c.says)
	}
}

// The growth of the parts of a system that is too large to be proved definite is
// told of it where the whole was one of them, or conjugate gradients have
// converged, and no Ritz value was negative.
func TestGrowthOfASystemThatMayBeDefinite(t *testing.T) {
	f := large()
	f.PositiveDefinite.Answer = inspect.Unknown
	f.Study.Couplings = &inspect.Couplings{Mesh: true, Dimension: 2}
	arrived, negative := met("cg+none", "A", 1e-3, 8), met("minres+none", "A", 1e-3, 8)
	arrived.Stop, negative.Condition.Negative = trace.Converged, true
	for _, c := range []struct {
		what   string
		sizes  []int
		trials []trace.History
		says   bool
	}{
		{"parts", []int{2500, 10000, 40000}, nil, false},
		{"cg has converged", []int{2500, 10000, 40000}, []trace.History{arrived}, true},
		{"but minres has met a negative value", []int{2500, 10000, 40000}, []trace.History{arrived, negative}, false},
		{"the whole", []int{62500, 250000, 1000000}, nil, true},
	} {
		f.Study.Growth = &inspect.Growth{Pairing: "cg+jacobi", Unknowns: c.sizes, Iterations: []int{50, 100, 200}, Exponent: 0.5}
		got := false
		for _, g := range diagnose.Judge(diagnose.Case{Facts: f, Trials: c.trials, Tol: 1e-8}) {
			got = got || g.Rule == "mesh-growth"
		}
		if got != c.says {
			t.Errorf("%s: told %v", c.what, got)
		}
	}
}
