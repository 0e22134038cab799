package diagnose

import (
	"slices"
	"strings"
	"testing"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// beyondReach are facts of a singular A with b partly out of its range.
func beyondReach() *inspect.Facts {
	f := definite()
	f.PositiveDefinite = inspect.Fact{Answer: inspect.No, Certainty: inspect.Proved}
	f.Semidefinite = inspect.Fact{Answer: inspect.Yes, Certainty: inspect.Proved}
	f.Singular = inspect.Fact{Answer: inspect.Yes, Certainty: inspect.Proved}
	f.RowSumsZero = inspect.Fact{Answer: inspect.Yes, Certainty: inspect.Proved}
	f.Unreachable = inspect.Fact{Answer: inspect.Yes, Certainty: inspect.Proved, Value: 0.17}
	f.NullComponents = 1
	return f
}

// Where A is singular no count is foreseen, and where b is out of reach
// nothing is offered that leaves it there.
func TestScalingOfASingularSystem(t *testing.T) {
	var values []complex128
	for k := range 100 {
		values = append(values, complex(float64(k+1)/100, 0))
	}
	for _, c := range []struct {
		reach inspect.Answer
		try   []string
	}{{inspect.Yes, []string{"project/cg+jacobi"}}, {inspect.No, []string{"cg+jacobi", "scale/cg+none"}}} {
		f := beyondReach()
		f.RowNorm = inspect.Range{Min: 1, Max: 1e9}
		f.Unreachable.Answer = c.reach
		f.Study = &inspect.Study{Jacobi: &inspect.Spectrum{Exact: true, Values: values}}
		g, ok := said(caseOf(f))["row-scaling"]
		if !ok || strings.Contains(g.Claim, "foreseen") || len(g.Predicts) > 0 || !slices.Equal(g.Try, c.try) {
			t.Errorf("out of reach: %s: %q, tries %v, predicts %v", c.reach, g.Claim, g.Try, g.Predicts)
		}
		f.Singular.Answer = inspect.No
		if g := said(caseOf(f))["row-scaling"]; c.reach == inspect.No && len(g.Predicts) != 1 {
			t.Errorf("of a regular A nothing is foreseen: %q", g.Claim)
		}
	}
}

// A shadow vector lost in the first step is r0, and says nothing of whether A is
// singular; lost later it may.
func TestBreakdownInTheFirstStep(t *testing.T) {
	for _, c := range []struct {
		pairing, quantity string
		iter              uint32
		words             string
		singular          bool
	}{
		{"bicgstab+none", "rhat'v", 1, "b'A b = 0", false},
		{"cgs+ilu:0", "rhat'v", 1, "b'A inv(M) b = 0", false},
		{"bicg+jacobi", "phat'Ap", 1, "b'inv(M) A inv(M) b = 0", false},
		{"scale/bicgstab+none", "rhat'v", 1, "r0'A r0 = 0", false},
		{"bicgstab+none", "rhat'v", 7, "orthogonal to A p", true},
	} {
		h := solvedTrial(c.pairing, int(c.iter), time.Second)
		h.Stop, h.DefiniteA, h.SymmetricA = trace.BrokeDown, false, false
		h.Events = []trace.Event{{Iter: c.iter, Kind: trace.Breakdown, Quantity: c.quantity}}
		f := beyondReach()
		f.Unreachable.Answer = inspect.No
		g := said(caseOf(f, h))["breakdown"]
		if !strings.Contains(g.Claim, c.words) || strings.Contains(g.Claim, "A is singular") != c.singular {
			t.Errorf("%s at it %d: %q", c.pairing, c.iter, g.Claim)
		}
	}
}

// A method whose residual cannot grow is not told to be replaced by one.
func TestGrowthOfMinimalResiduals(t *testing.T) {
	for _, monotone := range []bool{false, true} {
		h := solvedTrial("minres+none", 47, time.Second)
		h.Stop, h.Monotone = trace.Stagnated, monotone
		h.Records = []trace.Record{{Audit: 1}, {Iter: 19, Audit: 0.29}, {Iter: 47, Audit: 222}}
		g, ok := said(caseOf(beyondReach(), h))["null-space-growth"]
		if !ok || strings.Contains(g.Advice, "a method of minimal residuals") == monotone || strings.Contains(g.Claim, "rounding") != monotone {
			t.Errorf("monotone %v: %q, advice %q", monotone, g.Claim, g.Advice)
		}
		if monotone && !slices.Equal(g.Try, []string{"project/cg+jacobi"}) {
			t.Errorf("tries %v", g.Try)
		}
	}
}
