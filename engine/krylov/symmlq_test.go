package krylov_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// images returns A V for an orthonormal basis V of the Krylov space of A and b
// of the given dimension, by Gram–Schmidt done twice.
func images(a *linear.CSR, b []float64, steps int) *mat.Dense {
	n := len(b)
	v := [][]float64{unitOf(b)}
	av := mat.NewDense(n, steps, nil)
	for k := range steps {
		w := make([]float64, n)
		a.Apply(w, v[k])
		av.SetCol(k, w)
		for range 2 {
			for _, u := range v {
				linear.Axpy(-linear.Dot(u, w), u, w)
			}
		}
		v = append(v, unitOf(w))
	}
	return av
}

// twoSided returns a diagonal with eigenvalues on both sides of zero.
func twoSided(n int) *linear.CSR {
	d := make([]float64, n)
	for i := range d {
		d[i] = 1 + 4*float64(i)/float64(n)
		if i%3 == 0 {
			d[i] = -d[i]
		}
	}
	return diagonal(d...)
}

// The iterates of SYMMLQ minimise ‖x − x_k‖₂ over A times the Krylov space, for
// definite and indefinite A: against dense least squares (gonum QR).
func TestSymmlqError(t *testing.T) {
	for name, a := range map[string]*linear.CSR{"plate": plate(9), "two-sided": twoSided(90), "line": line(60)} {
		n, steps := a.NRows, 20
		want, b := make([]float64, n), make([]float64, n)
		linear.Uniform(want, 21)
		a.Apply(b, want)
		av := images(a, b, steps)
		r := begun(t, a, b, nil, "symmlq")
		for k := 1; k <= steps; k++ {
			r.step()
			x := r.x()
			linear.Axpy(-1, want, x)
			least := fit(av.Slice(0, n, 0, k), want)
			near(t, name+": ‖x − x_k‖", linear.Norm2(x), least, 1e-9)
			near(t, name+": told − true residual", r.last.Residual, r.truth(), 1e-12*r.first.Residual)
		}
	}
}

// The Lanczos coefficients are those of MINRES, bit for bit; with a
// preconditioner the residual told is √(rᵀM⁻¹r).
func TestSymmlqIsLanczos(t *testing.T) {
	a, b := plate(12), make([]float64, 144)
	linear.Uniform(b, 12)
	for _, m := range []string{"none", "jacobi", "ic:0"} {
		s, q := begun(t, a, b, nil, "symmlq+"+m), begun(t, a, b, nil, "minres+"+m)
		inv, r, z := built(t, a, m), make([]float64, 144), make([]float64, 144)
		for range 15 {
			x, y := s.step(), q.step()
			if !same(x.Alpha, y.Alpha) || !same(x.Beta, y.Beta) {
				t.Fatalf("%s: α %g and %g, β %g and %g", m, x.Alpha, y.Alpha, x.Beta, y.Beta)
			}
			linear.Residual(r, a, s.x(), b)
			inv.Apply(z, r)
			near(t, m+": ‖r‖", x.Residual, math.Sqrt(linear.Dot(r, z)), 1e-12*s.first.Residual)
		}
	}
}

// k distinct eigenvalues end in k steps, the last one to the conjugate gradient
// point of the exhausted space. A singular T ends without an event.
func TestSymmlqEnds(t *testing.T) {
	d := []float64{-2, 1, 3}
	for k := 1; k <= 3; k++ {
		e := make([]float64, 30)
		for i := range e {
			e[i] = d[i%k]
		}
		r := begun(t, diagonal(e...), ones(30), nil, "symmlq")
		r.until(0, 10)
		near(t, "true residual", r.truth(), 0, 1e-13)
		if r.steps != k || !r.last.Done || len(r.seen) != 0 {
			t.Errorf("%d eigenvalues: %d steps, %+v", k, r.steps, r.last)
		}
	}
	r := begun(t, diagonal(0, 0), ones(2), nil, "symmlq")
	if rd := r.step(); !rd.Done || linear.Norm2(r.x()) != 0 {
		t.Errorf("A = 0: %+v, x = %v", rd, r.x())
	}
}
