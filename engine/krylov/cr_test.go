package krylov_test

import (
	"math"
	"testing"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// On a definite A conjugate residuals and MINRES minimise the same norm over
// the same space: equal residuals, each by its own recurrence.
func TestCRIsMinres(t *testing.T) {
	a, b := plate(15), make([]float64, 225)
	linear.Uniform(b, 2)
	for _, m := range []string{"none", "jacobi", "ssor:1.4", "ic:0"} {
		c, r := begun(t, a, b, nil, "cr+"+m), begun(t, a, b, nil, "minres+"+m)
		for k := 1; k <= 20; k++ {
			near(t, m, c.step().Residual, r.step().Residual, 1e-11*r.first.Residual)
			x, y := c.x(), r.x()
			linear.Axpy(-1, x, y)
			near(t, m+": ‖x_k − x_k‖", linear.Norm2(y), 0, 1e-10*linear.Norm2(x))
		}
	}
}

// The closed form of MINRES on a line with b = e₁ (see TestLineClosedForms).
func TestCRLine(t *testing.T) {
	const n = 40
	r := begun(t, line(n), e1(n), nil, "cr")
	for k := 1.0; k < n; k++ {
		near(t, "‖r_k‖", r.step().Residual, math.Sqrt(6/((k+1)*(k+2)*(2*k+3))), 1e-12)
	}
	near(t, "‖r_n‖", r.step().Residual, 0, 1e-12)
}

// The direction of an event of curvature, and its product, are kept.
func TestCRCurvature(t *testing.T) {
	r := begun(t, diagonal(-1, 1, 2, 3, 4, 5), []float64{5, 1, 1, 1, 1, 1}, nil, "cr")
	r.step()
	e, ok := r.event(trace.NegativeCurvature)
	if !ok || !(e.Value < 0 && e.Value >= -1) {
		t.Fatalf("events %+v", r.seen)
	}
	p, q := r.s.(krylov.Curver).Curvature()
	near(t, "pᵀq/pᵀp", linear.Dot(p, q)/linear.Dot(p, p), e.Value, 1e-15)
}

// zᵀA z = 0 at the start: broken, where MINRES goes on.
func TestCRBreaks(t *testing.T) {
	r := begun(t, fromRows([]float64{0, 1}, []float64{1, 0}), e1(2), nil, "cr")
	rd := r.step()
	if e, ok := r.event(trace.Breakdown); !rd.Done || !ok || e.Quantity != "z'Az" {
		t.Errorf("%+v, events %+v", rd, r.seen)
	}
	if x := r.x(); x[0] != 0 || x[1] != 0 {
		t.Errorf("the iterate moved to %v", x)
	}
}

// An indefinite M ends it, told once.
func TestCRIndefinitePreconditioner(t *testing.T) {
	r := begunWith(t, diagonal(1, 2, 3, 4), scaled{-3, 1, 1, 1}, []float64{5, 1, 1, 1}, nil, linear.Part{Name: "cr"})
	e, ok := r.event(trace.PrecondIndefinite)
	if want := -72 / math.Sqrt(28*228); !ok || math.Abs(e.Value-want) > 1e-15 || !r.last.Done {
		t.Errorf("%+v, events %+v, want value %g", r.last, r.seen, want)
	}
}
