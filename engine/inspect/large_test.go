package inspect_test

import (
	"math"
	"testing"

	"dwindle/engine/inspect"
	"dwindle/samples"
)

// The small end of the plate of 90 000 unknowns fits the short look: its
// eigenvalues are 8 sin²(π/(2(n+1))) and 8 cos²(π/(2(n+1))) (Varga 1962).
func TestSmallEndOfALargePlate(t *testing.T) {
	const n = 300
	x := studiedSample(t, "plate:300").Raw
	s, c := math.Sin(math.Pi/(2*(n+1))), math.Cos(math.Pi/(2*(n+1)))
	if x == nil || x.How != "factor" || x.Certainty != inspect.Measured {
		t.Fatalf("spectrum %+v", x)
	}
	within(t, "smallest", x.Smallest, 8*s*s, 1e-3)
	within(t, "largest", x.Largest, 8*c*c, 0.02)
	if exact := c * c / (s * s); x.Condition > exact*(1+1e-3) {
		t.Errorf("condition %g above the exact %g", x.Condition, exact)
	}
}

// Of a plate too large to factorise no small end is told: a few steps by
// products alone leave a Ritz value far above it.
func TestNoSmallEndWithoutAFactor(t *testing.T) {
	const n = 450
	x := studiedSample(t, "plate:450").Raw
	if x == nil || x.How != "lanczos" {
		t.Fatalf("spectrum %+v", x)
	}
	if !math.IsNaN(x.Smallest) || x.Condition > 0 || len(x.Low) > 0 {
		t.Errorf("smallest %g, condition %g, low %v", x.Smallest, x.Condition, x.Low)
	}
	within(t, "largest", x.Largest, 8*math.Pow(math.Cos(math.Pi/(2*(n+1))), 2), 0.02)
}

// Beside the proved zero of a ring of n cells, equilibrated to 1 on the
// diagonal, comes 1 - cos(2π/n) (closed form of a circulant).
func TestWhatComesBesideAProvedZero(t *testing.T) {
	const n = 1500
	x := studied(t, ones(ring(n, unit), 17), inspect.Quick).Study.Equilibrated
	if x.Zeros != 1 || len(x.Low) < 2 || x.Low[0] != 0 {
		t.Fatalf("%d zeros, low end %g", x.Zeros, x.Low)
	}
	within(t, "next", x.Low[1], 1-math.Cos(2*math.Pi/n), 1e-3)
}

// A size whose iterations are foreseen not to fit the budget is left out; those
// before it are the same.
func TestGrowthIsLeftOutWhereItDoesNotFit(t *testing.T) {
	s, err := samples.Build("plate:200")
	if err != nil {
		t.Fatal(err)
	}
	s.B = ones(s.Matrix(), 17).B
	whole := studied(t, s, inspect.Quick).Study.Growth
	less := studied(t, s, inspect.Budget{Work: inspect.Quick.Work / 4, Dense: 500}).Study.Growth
	if less == nil || len(less.Unknowns) >= len(whole.Unknowns) {
		t.Fatalf("growth %+v within a quarter of the budget that gives %+v", less, whole)
	}
	for k, its := range less.Iterations {
		if its != whole.Iterations[k] {
			t.Errorf("%d iterations at %d unknowns, %d within more", its, less.Unknowns[k], whole.Iterations[k])
		}
	}
}
