package run

import (
	"math"
	"testing"
	"time"

	"dwindle/engine/trace"
)

// A prediction lies ahead, comes down to the present as the target is reached,
// and its range holds it.
func TestForecastComesDownToThePresent(t *testing.T) {
	last := math.Inf(1)
	for _, fallen := range []float64{0.1, 0.5, 1, 2, 4, 6, 7, 7.9, 8} {
		f := forecast{low: -fallen}
		p := f.tell(100, -8)
		if p.Iter != 100 || !(p.Total >= 101) || p.Total > last || !(p.Low <= p.Total && p.Total <= p.High) || !(p.Low >= 100) {
			t.Errorf("%g decades gone: %+v after %g", fallen, p, last)
		}
		last = p.Total
	}
	if last != 101 {
		t.Errorf("at the target itself: %g, want one more", last)
	}
	// The own number is a decade below the truth: a decade more to go.
	far := forecast{low: -4, gap: 1}
	near := forecast{low: -4}
	if a, b := far.tell(100, -8).Total, near.tell(100, -9).Total; a != b {
		t.Errorf("with a gap of a decade %g, without to a decade less %g", a, b)
	}
}

// A restarted method falls along a straight line on a regular matrix: from
// half of it the end is seen within a tenth.
func TestRestartedMethodsAreForeseenByALine(t *testing.T) {
	h := finish(t, sample(t, "plate:40"), limits(1e-8, 10_000), ticking(time.Millisecond), "gmres:10+none")[0]
	var half trace.Prediction
	for _, p := range h.Predictions {
		if 2*p.Iter <= h.Iterations {
			half = p
		}
	}
	if h.Stop != trace.Converged || math.Abs(half.Total-float64(h.Iterations)) > 0.1*float64(h.Iterations) {
		t.Errorf("%s after %d; told at %d: %g", h.Stop, h.Iterations, half.Iter, half.Total)
	}
}

// At its accuracy floor a trial is told never to arrive.
func TestNothingIsPromisedBelowTheFloor(t *testing.T) {
	h := finish(t, sample(t, "plate:20"), limits(1e-17, 10_000), ticking(time.Millisecond), "cg+none")[0]
	last := h.Predictions[len(h.Predictions)-1]
	if h.Stop == trace.Converged || !math.IsInf(last.High, 1) {
		t.Errorf("%s at %g, floor %g; last told %+v", h.Stop, h.TrueResidual, h.Floor, last)
	}
}
