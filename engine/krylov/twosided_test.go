package krylov_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// drift returns a nonsymmetric matrix of diagonally dominant rows, the 1-D
// convection–diffusion stencil with a growing diagonal.
func drift(n int) *linear.CSR {
	var e []linear.Entry
	for i := range n {
		e = append(e, linear.Entry{I: i, J: i, V: 4 + float64(i)/10})
		if i > 0 {
			e = append(e, linear.Entry{I: i, J: i - 1, V: -1.6}, linear.Entry{I: i - 1, J: i, V: -0.4})
		}
	}
	return linear.FromEntries(n, n, e)
}

// random returns n numbers in [−1, 1).
func random(n int, start uint64) []float64 {
	b := make([]float64, n)
	linear.Uniform(b, start)
	return b
}

// On a symmetric definite system BiCG is the conjugate gradient method, with
// any symmetric preconditioner.
func TestBiCGIsCG(t *testing.T) {
	for _, m := range []string{"none", "jacobi"} {
		a, b := uneven(12), random(144, 3)
		one, two := begun(t, a, b, nil, "cg+"+m), begun(t, a, b, nil, "bicg+"+m)
		for k := range 15 {
			x, y := one.step(), two.step()
			near(t, m+" ‖r‖", y.Residual/x.Residual, 1, 1e-9)
			near(t, m+" α", y.Alpha/x.Alpha, 1, 1e-9)
			near(t, m+" β", y.Beta/x.Beta, 1, 1e-9)
			if k == 14 && x.Residual > one.first.Residual {
				t.Errorf("%s: nothing was solved", m)
			}
		}
	}
}

// uneven returns the plate with rows and columns scaled by 1 to 5.
func uneven(n int) *linear.CSR {
	a := plate(n)
	for i := range a.NRows {
		for k := a.Ptr[i]; k < a.Ptr[i+1]; k++ {
			a.Val[k] *= float64(1+i%5) * float64(1+a.Col[k]%5)
		}
	}
	return a
}

// The α and β of CGS and of BiCGStab are those of BiCG with the same shadow
// vector (Sonneveld 1989; van der Vorst 1992).
func TestProductMethodsHaveBiCGsCoefficients(t *testing.T) {
	a, b := drift(40), ones(40)
	for _, name := range []string{"cgs", "bicgstab", "tfqmr"} {
		base, r := begun(t, a, b, nil, "bicg"), begun(t, a, b, nil, name)
		for range 9 {
			x, y := base.step(), r.step()
			near(t, name+" α", y.Alpha/x.Alpha, 1, 1e-8)
			near(t, name+" β", y.Beta/x.Beta, 1, 1e-8)
		}
	}
}

// smoothed is quasi-minimal residual smoothing (Zhou and Walker 1994): the
// residuals r_j of a method, weighted by 1/‖r_j‖².
type smoothed struct {
	weight float64 // Σ 1/‖r_j‖² = 1/τ²
	sum    []float64
	terms  int
}

// add takes a residual in and returns τ and the norm of the smoothed one.
func (s *smoothed) add(r []float64) (tau, norm float64) {
	if s.sum == nil {
		s.sum = make([]float64, len(r))
	}
	w := 1 / linear.Dot(r, r)
	s.weight += w
	s.terms++
	linear.Axpy(w, r, s.sum)
	return 1 / math.Sqrt(s.weight), linear.Norm2(s.sum) / s.weight
}

// The residuals of QMR are those of BiCG, smoothed; ‖r_k‖ ≤ √(k+1) τ_k.
func TestQMRSmoothsBiCG(t *testing.T) {
	for _, m := range []string{"none", "jacobi"} {
		a, b := drift(60), random(60, 4)
		one, two := begun(t, a, b, nil, "bicg+"+m), begun(t, a, b, nil, "qmr+"+m)
		var s smoothed
		s.add(b)
		res := make([]float64, 60)
		for range 20 {
			one.step()
			linear.Residual(res, a, one.x(), b)
			tau, want := s.add(res)
			got := two.step().Residual
			near(t, m+" ‖r‖", got/want, 1, 1e-6)
			if bound := math.Sqrt(float64(s.terms)) * tau; got > bound*(1+1e-9) {
				t.Errorf("‖r‖ = %g above its bound %g", got, bound)
			}
			near(t, "told − true", got, two.truth(), 1e-13)
		}
	}
}

// The residuals of TFQMR are those of CGS and of its half steps, smoothed.
func TestTFQMRSmoothsCGS(t *testing.T) {
	const n = 60
	a, b := drift(n), random(n, 5)
	r, u, q, p := random(n, 5), make([]float64, n), make([]float64, n), make([]float64, n)
	v, half := make([]float64, n), make([]float64, n)
	solver := begun(t, a, b, nil, "tfqmr")
	var s smoothed
	s.add(b)
	rho, beta := linear.Dot(b, r), 0.0
	for range 14 {
		linear.Lin(u, 1, r, beta, q)
		for i := range p {
			p[i] = u[i] + beta*(q[i]+beta*p[i])
		}
		a.Apply(v, p)
		alpha := rho / linear.Dot(b, v)
		linear.Lin(q, 1, u, -alpha, v)
		a.Apply(half, u)
		linear.Axpy(-alpha, half, r)
		s.add(r)
		a.Apply(half, q)
		linear.Axpy(-alpha, half, r)
		_, want := s.add(r)
		next := linear.Dot(b, r)
		beta, rho = next/rho, next
		near(t, "‖r‖", solver.step().Residual/want, 1, 1e-6)
		near(t, "told − true", solver.last.Residual, solver.truth(), 1e-13)
	}
}

// A step of BiCGStab(l) is l steps of BiCG, then the least residual over
// B r … B^l r, here by dense least squares; with l = 1 it is BiCGStab.
func TestBiCGStabLMinimises(t *testing.T) {
	const n = 50
	a, b := drift(n), random(n, 6)
	for l, pairing := range map[int]string{1: "bicgstabl:1", 2: "bicgstabl:2", 4: "bicgstabl:4"} {
		base, r := begun(t, a, b, nil, "bicg"), begun(t, a, b, nil, pairing)
		for range l {
			base.step()
		}
		res := make([]float64, n)
		linear.Residual(res, a, base.x(), b)
		powers, v, w := mat.NewDense(n, l, nil), append([]float64(nil), res...), make([]float64, n)
		for j := range l {
			a.Apply(w, v)
			powers.SetCol(j, w)
			v, w = w, v
		}
		want := fit(powers, res)
		near(t, pairing+" ‖r₁‖", r.step().Residual/want, 1, 1e-9)
		near(t, pairing+" true", r.truth()/want, 1, 1e-9)
	}
	one, two := begun(t, a, b, nil, "bicgstab+jacobi"), begun(t, a, b, nil, "bicgstabl:1+jacobi")
	for range 8 {
		near(t, "l = 1", two.step().Residual/one.step().Residual, 1, 1e-7)
	}
}

// Close to skew symmetric, BiCGStab's one dimension gains little and l = 2
// restores convergence (Sleijpen and Fokkema 1993).
func TestBiCGStabLNearSkew(t *testing.T) {
	a, b := nearSkew(200), random(200, 7)
	one, two := begun(t, a, b, nil, "bicgstab"), begun(t, a, b, nil, "bicgstabl:2")
	one.until(1e-8, 1000)
	two.until(1e-8, 500)
	if two.truth() > 1e-7*linear.Norm2(b) || 4*two.steps >= 2*one.steps {
		t.Errorf("l = 2: %d products to %g, BiCGStab %d to %g", 4*two.steps, two.truth(), 2*one.steps, one.truth())
	}
	t.Logf("l = 2: %d products to %.1e, BiCGStab %d to %.1e", 4*two.steps, two.truth(), 2*one.steps, one.truth())
}

// nearSkew returns 0.3 on the diagonal and ∓1 beside it.
func nearSkew(n int) *linear.CSR {
	var e []linear.Entry
	for i := range n {
		e = append(e, linear.Entry{I: i, J: i, V: 0.3})
		if i > 0 {
			e = append(e, linear.Entry{I: i, J: i - 1, V: -1}, linear.Entry{I: i - 1, J: i, V: 1})
		}
	}
	return linear.FromEntries(n, n, e)
}

// The cyclic shift with b = e₁: r₀ᵀA r₀ = 0 ends every method of the BiCG
// family in its first step, with the quantity named and the iterate kept.
func TestCyclicShiftBreaksBiCG(t *testing.T) {
	a := shift(8)
	for name, quantity := range map[string]string{"bicg": "phat'Ap", "cgs": "rhat'v", "tfqmr": "rhat'v",
		"qmr": "epsilon", "bicgstabl": "rhat'u"} {
		r := begun(t, a, e1(8), nil, name)
		rd := r.step()
		if e, ok := r.event(trace.Breakdown); !rd.Done || !ok || e.Quantity != quantity || e.Value != 0 || len(r.seen) != 1 {
			t.Errorf("%s: %+v", name, r.seen)
		}
		near(t, name+" residual", rd.Residual, 1, 0)
		near(t, name+" truth", r.truth(), 1, 0)
	}
}

// shift returns the cyclic shift A e_i = e_{i+1}.
func shift(n int) *linear.CSR {
	var e []linear.Entry
	for i := range n {
		e = append(e, linear.Entry{I: (i + 1) % n, J: i, V: 1})
	}
	return linear.FromEntries(n, n, e)
}

// The first row of A is e₁, so r₁ has no first component and r̂ᵀr₁ = 0 while
// r₁ is not: a breakdown of the second kind, told in step 2.
func TestRhoBreaksDown(t *testing.T) {
	a := fromRows([]float64{1, 0, 0}, []float64{1, 2, 0}, []float64{1, 0, 3})
	for name, quantity := range map[string]string{"bicg": "rho", "cgs": "rho", "tfqmr": "rho", "qmr": "xi"} {
		r := begun(t, a, e1(3), nil, name)
		r.until(0, 5)
		if e, ok := r.event(trace.Breakdown); !r.last.Done || r.steps != 2 || !ok || e.Quantity != quantity || len(r.seen) != 1 {
			t.Errorf("%s: %d steps, %+v, %+v", name, r.steps, r.last, r.seen)
		}
		near(t, name+" told", r.last.Residual, r.truth(), 1e-14)
	}
}

// Without a transpose the two-sided methods refuse to begin.
func TestTransposesAreAskedFor(t *testing.T) {
	a := plate(3)
	for _, name := range []string{"bicg", "qmr"} {
		e, _ := krylov.Lookup(name)
		for _, p := range []krylov.Problem{
			{A: linear.Func{N: 9, Do: a.Apply}, M: linear.Identity{}, B: ones(9)},
			{A: a, M: linear.Func{N: 9, Do: a.Apply}, B: ones(9)},
		} {
			if _, err := e.New(linear.Values{}).Begin(p); err == nil {
				t.Errorf("%s begins without a transpose", name)
			}
		}
	}
}
