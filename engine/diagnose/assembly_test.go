package diagnose

import (
	"strings"
	"testing"

	"dwindle/engine/inspect"
)

// Few diagonal entries of the other sign are named; many are no slip.
func TestOddSignsAreNamed(t *testing.T) {
	for _, c := range []struct {
		negative, zero int
		words          string
	}{
		{1, 0, "1 of 100 diagonal entries is negative (row 101), all others are positive"},
		{2, 0, "2 of 100 diagonal entries are negative"},
		{99, 0, "1 of 100 diagonal entries is positive (row 101), all others are negative"},
		{3, 0, ""},
		{1, 1, ""},
	} {
		f := definite()
		f.PositiveDefinite = inspect.Fact{Answer: inspect.No, Certainty: inspect.Proved}
		f.DiagNegative, f.DiagPositive, f.DiagZero, f.DiagRows = c.negative, 100-c.negative-c.zero, c.zero, []int{100}
		g, ok := said(caseOf(f))["not-definite"]
		if ok != (c.words != "") || !strings.Contains(g.Claim, c.words) || ok && (g.Weight != Drag || g.Certainty != inspect.Proved) {
			t.Errorf("%d negative, %d zero: %v %q", c.negative, c.zero, ok, g.Claim)
		}
	}
}

// One to three unequal pairs are named by their entries.
func TestUnequalPairsAreTold(t *testing.T) {
	f := definite()
	f.Symmetric = inspect.Fact{Answer: inspect.No, Certainty: inspect.Proved}
	f.Study = &inspect.Study{Lopsided: &inspect.Lopsided{Count: 4, Pairs: [][2]int{{50, 51}, {120, 121}}}}
	g := said(caseOf(f))["few-rows-asymmetric"]
	if want := "but for 2 pairs of entries: a_51,52 and a_52,51 differ, a_121,122 and a_122,121 differ"; !strings.Contains(g.Claim, want) {
		t.Errorf("%q, want %q", g.Claim, want)
	}
}

// Replaced rows are to be moved to the right-hand side: no pairing does that.
func TestReplacedRowsOfferNoTry(t *testing.T) {
	f := definite()
	f.Symmetric = inspect.Fact{Answer: inspect.No, Certainty: inspect.Proved}
	f.Study = &inspect.Study{Lopsided: &inspect.Lopsided{Count: 2, Identity: 1, IdentityRows: []int{3}, OnlyThem: true}}
	if g, ok := said(caseOf(f))["row-replaced"]; !ok || len(g.Try) > 0 {
		t.Errorf("%v, tries %v", ok, g.Try)
	}
}

// A bad guess under a rule relative to its residual: how much of b that leaves
// is told, and a multiple of the guess, which changes the rule too, is not
// advised.
func TestBadGuessUnderItsOwnRule(t *testing.T) {
	f := definite()
	f.Guess = &inspect.Guess{Residual: 3800, Scale: 0.001, Scaled: 0.01}
	for rule, words := range map[string]string{"initial": "1e-08 of it is 3.8e-05 of b", "rhs": "scaled by 0.001 it has 0.01"} {
		c := caseOf(f, solvedTrial("cg+none", 50, 1))
		c.StopBy = rule
		g := said(c)["starting-guess"]
		if !strings.Contains(g.Claim, words) || strings.Contains(g.Advice, "--stop rhs") != (rule == "initial") || (len(g.Try) > 0) != (rule == "rhs") {
			t.Errorf("--stop %s: %q, advice %q, tries %v", rule, g.Claim, g.Advice, g.Try)
		}
	}
}
