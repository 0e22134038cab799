package spectrum_test

import (
	"math"
	"testing"

	"dwindle/engine/spectrum"
)

// Eigenvalues in [1,2] and a few below, b of ones, tol 1e-8. The counts are
// those of NumPy: 11 its without outliers, 17 with 1e-4, 29 with 1e-4, 2e-4
// and 5e-4. From the coefficients of the last run alone: its outliers, when
// they locked, and what the others would take without them.
func TestOutliersFromCoefficients(t *testing.T) {
	without := conjugate(t, diagonalOf(outlying(200)), plain{}, ones(200), 1e-8, 100, nil)
	one := conjugate(t, diagonalOf(outlying(200, 1e-4)), plain{}, ones(201), 1e-8, 100, nil)
	three := conjugate(t, diagonalOf(outlying(200, 1e-4, 2e-4, 5e-4)), plain{}, ones(203), 1e-8, 100, nil)
	if without.steps != 11 || math.Abs(float64(one.steps-17)) > 1 || math.Abs(float64(three.steps-29)) > 1 {
		t.Fatalf("%d, %d and %d its, known 11, 17 and 29", without.steps, one.steps, three.steps)
	}
	q, _ := spectrum.Gauss(three.alphas, three.betas)
	c := q.Clusters()
	for i, want := range []float64{1e-4, 2e-4, 5e-4} {
		if math.Abs(c[i].Value-want) > 1e-9*want || !c[i].Settled() || math.Abs(c[i].Weight-1./203) > 1e-6 {
			t.Errorf("cluster %d: %+v, want %g of weight 1/203", i, c[i], want)
		}
	}
	if c[3].Settled() || c[3].Value < 1 {
		t.Errorf("cluster 3: %+v", c[3])
	}
	for _, l := range spectrum.Locks(c, three.alphas, three.betas, 8, 4) {
		if l.Value > 1e-3 || l.Iter < 17 || l.Iter > 22 { // where its residual starts to fall for good
			t.Errorf("%g locked at it %d", l.Value, l.Iter)
		}
	}
	rest, weight := spectrum.Without(c, func(i int, _ spectrum.Cluster) bool { return i < 3 })
	got := spectrum.Steps(rest, 1e-8, 100)
	if math.Abs(float64(got-without.steps)) > 2 || math.Abs(weight-3./203) > 1e-6 {
		t.Errorf("without the three: %d its (weight %g), known %d", got, weight, without.steps)
	}
	if got := spectrum.Steps(rest, 1e-30, 5); got != 6 {
		t.Errorf("%d steps of at most 5", got)
	}
}

// Eigenvalues of the plate are double: cg sees each once, and nothing is
// called a ghost.
func TestNoGhostsWithoutDelay(t *testing.T) {
	c := conjugate(t, plate(20), plain{}, ones(400), 1e-8, 400, nil)
	q, _ := spectrum.Gauss(c.alphas, c.betas)
	clusters := q.Clusters()
	if g := q.Ghosts(clusters); g != 0 {
		t.Errorf("%d ghosts in %d steps", g, c.steps)
	}
	for _, k := range clusters {
		if k.Copies != 1 {
			t.Errorf("%+v", k)
		}
	}
}
