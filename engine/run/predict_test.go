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
	for _, fallen := range []float64{0.3, 0.5, 1, 2, 4, 6, 7, 7.9, 8} {
		f := forecast{low: -fallen}
		p, ok := f.tell(100, -fallen/2, -8)
		if !ok || p.Iter != 100 || !(p.Total >= 101) || p.Total > last || !(p.Low <= p.Total && p.Total <= p.High) || !(p.Low >= 100) {
			t.Errorf("%g decades gone: %+v after %g", fallen, p, last)
		}
		last = p.Total
	}
	if last != 101 {
		t.Errorf("at the target itself: %g, want one more", last)
	}
	// The own number is a decade below the truth: a decade more to go. A start
	// from a guess has the less to go.
	far, _ := (&forecast{low: -4, gap: 1}).tell(100, -2, -8)
	near, _ := (&forecast{low: -4}).tell(100, -2, -9)
	guessed, _ := (&forecast{first: -3, low: -7}).tell(100, -5, -12)
	if far != near || guessed != near {
		t.Errorf("with a gap of a decade %v, without to a decade less %v, from a guess %v", far, near, guessed)
	}
}

// A curve that has not begun to fall promises nothing, wherever it starts.
func TestNothingIsToldOfACurveThatHasNotFallen(t *testing.T) {
	for _, f := range []forecast{{}, {low: -0.2}, {first: -5, low: -5.2}, {first: 2, low: 1.8}} {
		if p, ok := f.tell(1000, f.first, -8); ok {
			t.Errorf("%+v tells %+v", f, p)
		}
	}
	// nor one whose own number, in another norm, has fallen alone
	f := forecast{}
	f.seeAudit(0, 1, 1)
	f.seeAudit(500, 1e-3, 0.65)
	if f.truly >= leastFall {
		t.Errorf("from 1 to 0.65 is %g decades", f.truly)
	}
	if f.seeAudit(600, 1e-4, 0.05); !(f.truly >= 1.3) {
		t.Errorf("from 1 to 0.05 is %g decades", f.truly)
	}
	// on a cyclic shift the residual of GMRES stays 1 for n-1 steps (Brown 1991)
	h := finish(t, sample(t, "shift:40"), limits(1e-8, 30), ticking(time.Millisecond), "gmres:50+none")[0]
	if h.Stop != trace.IterationLimit || len(h.Predictions) > 0 {
		t.Errorf("%s, %s at %g: %+v", h.Pairing, h.Stop, h.TrueResidual, h.Predictions)
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
	if h.Stop == trace.Converged || !math.IsInf(last.Total, 1) {
		t.Errorf("%s at %g, floor %g; last told %+v", h.Stop, h.TrueResidual, h.Floor, last)
	}
}
