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
		if got.Certainty != inspect.Measured || got.Weight != diagnose.Note {
			t.Errorf("%s: %s %s", c.what, got.Weight, got.Certainty)
		}
		says(t, got, c.says)
	}
}
