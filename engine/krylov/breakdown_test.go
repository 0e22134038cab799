package krylov_test

import (
	"math"
	"testing"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// BiCGStab's three denominators, each made to vanish by hand; the event says
// which, and nothing else happens.
func TestBiCGStabBreakdowns(t *testing.T) {
	for _, c := range []struct {
		quantity string
		a        *linear.CSR
		b        []float64
		step     int
	}{
		// A skew: r₀ᵀA r₀ = 0.
		{"rhat'v", fromRows([]float64{0, 1}, []float64{-1, 0}), e1(2), 1},
		// s = (0,−1), A s = (−1,0): tᵀs = 0.
		{"omega", fromRows([]float64{1, 1}, []float64{1, 0}), e1(2), 1},
		// The first row of A is e₁, so r₁ has no first component: r̂ᵀr₁ = 0.
		{"rho", fromRows([]float64{1, 0, 0}, []float64{1, 2, 0}, []float64{1, 0, 3}), e1(3), 2},
	} {
		r := begun(t, c.a, c.b, nil, "bicgstab")
		r.until(0, 10)
		e, ok := r.event(trace.Breakdown)
		if !ok || e.Quantity != c.quantity || int(e.Iter) != c.step || len(r.seen) != 1 || math.Abs(e.Value) > 0x1p-53 {
			t.Errorf("%s: events %+v", c.quantity, r.seen)
		}
		near(t, c.quantity+": residual told", r.last.Residual, r.truth(), 1e-14)
	}
}

// A e₁ = 0: the space of GMRES is exhausted and holds no solution. Behind one
// more unknown the same shows after a step that does help.
func TestGMRESSingular(t *testing.T) {
	for _, c := range []struct {
		a     *linear.CSR
		steps int
	}{
		{fromRows([]float64{0, 1}, []float64{0, 0}), 1},
		{diagonal(0, 2), 5},
	} {
		r := begun(t, c.a, ones(2), nil, "gmres:5")
		if c.steps == 1 {
			r = begun(t, c.a, e1(2), nil, "gmres:5")
		}
		r.until(0, 10)
		if e, ok := r.event(trace.Breakdown); !r.last.Done || !ok || e.Quantity != "R(k,k)" || e.Value > 1e-14 {
			t.Errorf("%d steps, %+v, events %+v", r.steps, r.last, r.seen)
		}
		near(t, "residual told", r.last.Residual, 1, 1e-14)
		near(t, "true residual", r.truth(), 1, 1e-14)
	}
}

// A singular but consistent system is solved by the happy breakdown in as many
// steps as there are eigenvalues; going on ends at the floor, not in a loop.
func TestGMRESHappy(t *testing.T) {
	for _, pairing := range []string{"gmres:10", "gmres:10+ssor"} {
		a := diagonal(0, 1, 2, 3)
		if pairing != "gmres:10" {
			a = fromRows([]float64{1, -1, 0}, []float64{-1, 2, -1}, []float64{0, -1, 1})
		}
		b := make([]float64, a.NRows)
		b[1], b[2] = 1, -1
		r := begun(t, a, b, nil, pairing)
		r.until(1e-14, 10)
		if r.steps > 3 || len(r.seen) != 0 {
			t.Errorf("%s: %d steps, %+v, events %+v", pairing, r.steps, r.last, r.seen)
		}
		near(t, pairing+" true residual", r.truth(), 0, 1e-14)
		for !r.last.Done && r.steps < 20 {
			r.step()
		}
		near(t, pairing+" true residual at the end", r.truth(), 0, 1e-14)
		if !r.last.Done {
			t.Errorf("%s goes on for ever: %+v", pairing, r.seen)
		}
	}
}

// On an ill-conditioned matrix (Hilbert, order 11, κ = 5e14) R is singular to
// rounding while the residual is far above its floor: the restart goes on.
func TestGMRESRefines(t *testing.T) {
	const n = 11
	var rows [][]float64
	for i := range n {
		row := make([]float64, n)
		for j := range row {
			row[j] = 1 / float64(i+j+1)
		}
		rows = append(rows, row)
	}
	r := begun(t, fromRows(rows...), ones(n), nil, "gmres:30")
	for len(r.seen) == 0 {
		r.step()
	}
	first := r.last.Residual
	r.until(0, 80)
	if got := r.truth(); !r.last.Done || got > 0.1*first {
		t.Errorf("true residual %g after the first cycle, %g at the end, events %+v", first, got, r.seen)
	}
}

// A near-singular direction makes Gram–Schmidt cancel; the second pass keeps
// the vectors orthogonal and the residual true. The residual of the powers of
// this Jordan-like matrix is told to rounding.
func TestGMRESStaysTrue(t *testing.T) {
	var e []linear.Entry
	const n = 60
	for i := range n {
		e = append(e, linear.Entry{I: i, J: i, V: math.Pow(10, -float64(i)/5)})
		if i > 0 {
			e = append(e, linear.Entry{I: i - 1, J: i, V: 1})
		}
	}
	r := begun(t, linear.FromEntries(n, n, e), ones(n), nil, "gmres:60")
	for !r.last.Done && r.steps < n-1 {
		r.step()
		x := r.x()
		near(t, "told − true", r.last.Residual, r.truth(), 1e-14*(1+2*linear.Norm2(x)))
	}
}

// scaled is the preconditioner M⁻¹ = diag(d), definite or not.
type scaled []float64

func (d scaled) Apply(dst, x []float64) { linear.MulDot(dst, d, x) }

// An indefinite M is told once by each method that assumes otherwise; the
// minimal residual method cannot go on.
func TestIndefinitePreconditioner(t *testing.T) {
	a, m := diagonal(1, 2, 3, 4), scaled{-3, 1, 1, 1}
	for _, name := range []string{"cg", "sd", "minres"} {
		r := begunWith(t, a, m, []float64{5, 1, 1, 1}, nil, linear.Part{Name: name})
		r.until(1e-12, 3)
		e, ok := r.event(trace.PrecondIndefinite)
		// rᵀz/(‖r‖‖z‖) = −72/(√28·√228) at the start.
		if want := -72 / math.Sqrt(28*228); !ok || math.Abs(e.Value-want) > 1e-15 {
			t.Errorf("%s: events %+v, want value %g", name, r.seen, want)
		}
		_, broke := r.event(trace.Breakdown)
		if broke != (name == "minres") || r.last.Done != (name == "minres") {
			t.Errorf("%s: %+v, events %+v", name, r.last, r.seen)
		}
	}
}

// Conjugate gradients on an indefinite matrix: one event a turn of the sign,
// its value a Rayleigh quotient of the direction that Curvature shows.
func TestNegativeCurvature(t *testing.T) {
	for name, b1 := range map[string]float64{"cg": 3, "sd": 5} { // 3 hides the sign in the first step
		r := begun(t, diagonal(-1, 1, 2, 3, 4, 5), []float64{b1, 1, 1, 1, 1, 1}, nil, name)
		for len(r.seen) == 0 && r.steps < 20 {
			r.step()
		}
		e, ok := r.event(trace.NegativeCurvature)
		if !ok || !(e.Value < 0 && e.Value >= -1) || int(e.Iter) != r.steps {
			t.Fatalf("%s: events %+v", name, r.seen)
		}
		p, q := r.s.(krylov.Curver).Curvature()
		near(t, name+" pᵀq/pᵀp", linear.Dot(p, q)/linear.Dot(p, p), e.Value, 1e-15)
		ap := make([]float64, 6)
		r.a.Apply(ap, p)
		sameVector(t, q, ap)
	}
}

// A definite matrix gives no event of curvature, however long CG works at its
// floor.
func TestNoFalseCurvature(t *testing.T) {
	r := begun(t, plate(16), ones(256), nil, "cg")
	r.until(1e-60, 600)
	if len(r.seen) != 0 {
		t.Errorf("events %+v", r.seen)
	}
}

// MINRES on a singular matrix: solved when b is in reach, else the residual
// stops at the unreachable part of b while x stays bounded.
func TestMinresSingular(t *testing.T) {
	const n = 50
	a := line(n)
	a.Val[0], a.Val[len(a.Val)-1] = 1, 1 // null vector 1
	b := e1(n)
	b[n-1] = -1
	r := begun(t, a, b, nil, "minres")
	r.until(1e-12, 100)
	near(t, "consistent: true residual", r.truth(), 0, 1e-12)
	r = begun(t, a, e1(n), nil, "minres")
	r.until(0, 120)
	near(t, "told", r.last.Residual, 1/math.Sqrt(n), 1e-9)
	near(t, "true", r.truth(), 1/math.Sqrt(n), 1e-9)
	r = begun(t, diagonal(0, 1, 2, 3), ones(4), nil, "minres")
	r.until(0, 20)
	near(t, "diagonal: told", r.last.Residual, 1, 1e-12)
	near(t, "diagonal: true", r.truth(), 1, 1e-12)
	if r.steps > 4 || !r.last.Done {
		t.Errorf("the exhausted space is not noticed: %d steps, %+v", r.steps, r.last)
	}
}
