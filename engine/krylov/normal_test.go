package krylov_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// windy returns a nonsymmetric matrix: the plate with a one-sided wind.
func windy(n int, wind float64) *linear.CSR {
	a := plate(n)
	b := &linear.CSR{NRows: a.NRows, NCols: a.NCols, Ptr: a.Ptr, Col: a.Col, Val: append([]float64(nil), a.Val...)}
	for i := range a.NRows {
		for k := a.Ptr[i]; k < a.Ptr[i+1]; k++ {
			switch int(a.Col[k]) - i {
			case 1:
				b.Val[k] += wind
			case -1:
				b.Val[k] -= wind
			}
		}
	}
	return b
}

// skewed applies M⁻¹ = diag(d)·C with a fixed nonsymmetric C, and its transpose:
// C x = x + shifted x / 4.
type skewed struct{ d []float64 }

func (s skewed) Apply(dst, x []float64) {
	for i := range x {
		dst[i] = s.d[i] * (x[i] + x[(i+1)%len(x)]/4)
	}
}

func (s skewed) ApplyT(dst, x []float64) {
	n := len(x)
	for i := range x {
		j := (i + n - 1) % n
		dst[i] = s.d[i]*x[i] + s.d[j]*x[j]/4
	}
}

func newSkewed(n int) skewed {
	d := make([]float64, n)
	for i := range d {
		d[i] = 0.2 + 0.05*float64(i%5)
	}
	return skewed{d}
}

// LSQR has the iterates of CGNR in exact arithmetic, with and without a
// preconditioner whose transpose is another matrix.
func TestLSQRIsCGNR(t *testing.T) {
	a, b := windy(10, 0.6), make([]float64, 100)
	linear.Uniform(b, 7)
	for name, m := range map[string]linear.Applier{"none": linear.Identity{}, "skewed": newSkewed(100)} {
		l := begunWith(t, a, m, b, nil, linear.Part{Name: "lsqr"})
		c := begunWith(t, a, m, b, nil, linear.Part{Name: "cgnr"})
		for k := 1; k <= 25; k++ {
			near(t, name+" ‖r‖", l.step().Residual, c.step().Residual, 1e-9*c.first.Residual)
			x, y := l.x(), c.x()
			linear.Axpy(-1, x, y)
			near(t, name+" ‖x_k − x_k‖", linear.Norm2(y), 0, 1e-8*linear.Norm2(x))
		}
		l.until(1e-10, 3000)
		near(t, name+" true residual of lsqr", l.truth(), 0, 1e-9*l.first.Residual)
	}
}

// CGNR and LSQR minimise ‖r‖₂ over the Krylov space of AᵀA and Aᵀb: against
// dense least squares (gonum QR).
func TestCGNRAgainstLeastSquares(t *testing.T) {
	a, b := windy(9, 0.8), make([]float64, 81)
	linear.Uniform(b, 3)
	for k, want := range normalFits(a, b, 15) {
		for _, solver := range []string{"cgnr", "lsqr"} {
			r := begun(t, a, b, nil, solver)
			for range k + 1 {
				r.step()
			}
			near(t, solver, r.last.Residual, want, 1e-9*r.first.Residual)
		}
	}
}

// normalFits returns min ‖b − A V y‖ over Krylov spaces of AᵀA and Aᵀb.
func normalFits(a *linear.CSR, b []float64, steps int) []float64 {
	n := len(b)
	w := make([]float64, n)
	a.ApplyT(w, b)
	v := [][]float64{unitOf(w)}
	var rows [][]float64
	var out []float64
	for range steps {
		last := v[len(v)-1]
		image := make([]float64, n)
		a.Apply(image, last)
		rows = append(rows, image)
		out = append(out, fit(columns(rows), b))
		next := make([]float64, n)
		a.ApplyT(next, image)
		for range 2 {
			for _, u := range v {
				linear.Axpy(-linear.Dot(u, next), u, next)
			}
		}
		v = append(v, unitOf(next))
	}
	return out
}

// columns puts vectors side by side.
func columns(v [][]float64) *mat.Dense {
	m := mat.NewDense(len(v[0]), len(v), nil)
	for j, c := range v {
		m.SetCol(j, c)
	}
	return m
}

// LSMR is MINRES on AᵀA x = Aᵀb: equal residuals of that system. What it tells
// is ‖M⁻ᵀAᵀr‖, which never grows, nor does ‖r‖.
func TestLSMR(t *testing.T) {
	a, b := windy(10, 0.6), make([]float64, 100)
	linear.Uniform(b, 7)
	at := a.Transpose()
	atb := make([]float64, 100)
	at.Apply(atb, b)
	half := make([]float64, 100)
	square := linear.Func{N: 100, Do: func(dst, x []float64) { a.Apply(half, x); at.Apply(dst, half) }}
	l, m := begun(t, a, b, nil, "lsmr"), begun(t, square, atb, nil, "minres")
	for range 25 {
		near(t, "‖Aᵀr‖", l.step().Residual, m.step().Residual, 1e-9*m.first.Residual)
	}
	skew := newSkewed(100)
	l = begunWith(t, a, skew, b, nil, linear.Part{Name: "lsmr"})
	told, true2 := l.first.Residual, math.Inf(1)
	r, u, w := make([]float64, 100), make([]float64, 100), make([]float64, 100)
	for !l.last.Done && l.last.Residual > 1e-9*l.first.Residual {
		rd := l.step()
		now := linear.Residual(r, a, l.x(), b)
		if rd.Residual > told*(1+1e-12) || now > true2*(1+1e-10) {
			t.Fatalf("step %d: ‖Aᵀr‖ %g after %g, ‖r‖ %g after %g", l.steps, rd.Residual, told, now, true2)
		}
		told, true2 = rd.Residual, now
		a.ApplyT(u, r)
		skew.ApplyT(w, u)
		near(t, "‖M⁻ᵀAᵀr‖", rd.Residual, linear.Norm2(w), 1e-11*l.first.Residual)
	}
}

// In Craig's method the error ‖x − x_k‖₂ falls at every step, below that of
// CGNR, whose residual is the smaller one.
func TestCGNEError(t *testing.T) {
	a, want, b := windy(10, 0.6), make([]float64, 100), make([]float64, 100)
	linear.Uniform(want, 7)
	a.Apply(b, want)
	e, r := begun(t, a, b, nil, "cgne"), begun(t, a, b, nil, "cgnr")
	far := func(u *trial) float64 {
		x := u.x()
		linear.Axpy(-1, want, x)
		return linear.Norm2(x)
	}
	before := math.Inf(1)
	for range 30 {
		x, y := e.step(), r.step()
		now := far(e)
		if now > before || now > far(r)*(1+1e-12) || x.Residual < y.Residual*(1-1e-12) {
			t.Fatalf("step %d: error %g after %g, cgnr's %g; residual %g and %g", e.steps, now, before, far(r), x.Residual, y.Residual)
		}
		before = now
		near(t, "told − true residual", x.Residual, e.truth(), 1e-12*e.first.Residual)
	}
}

// Where b is out of reach the residual stops at its unreachable part, with
// Aᵀr = 0: A = diag(0, 1, 2, 3) and b = 1 leave 1.
func TestNormalSingular(t *testing.T) {
	for _, solver := range []string{"cgnr", "lsqr", "lsmr"} {
		r := begun(t, diagonal(0, 1, 2, 3), ones(4), nil, solver)
		r.until(1e-12, 6)
		near(t, solver+" true residual", r.truth(), 1, 1e-12)
		x := r.x()
		for i, want := range []float64{0, 1, 0.5, 1.0 / 3} {
			near(t, solver+" x_i", x[i], want, 1e-10)
		}
	}
	for _, solver := range []string{"cgnr", "cgne", "lsqr", "lsmr"} {
		r := begun(t, diagonal(0, 1), e1(2), nil, solver)
		for !r.last.Done {
			r.step()
		}
		near(t, solver+": Aᵀb = 0, x", linear.Norm2(r.x()), 0, 0)
	}
}
