package krylov_test

import (
	"math"
	"testing"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// 1-D Poisson with b = e₁: ‖r_k‖ = 1/(k+1) for CG and, by
// 1/‖r^CG_k‖² = 1/‖r^MR_k‖² − 1/‖r^MR_{k−1}‖², √(6/((k+1)(k+2)(2k+3))) for
// MINRES and GMRES; 0 at k = n. Closed forms.
func TestLineClosedForms(t *testing.T) {
	const n = 40
	cg := func(k float64) float64 { return 1 / (k + 1) }
	mr := func(k float64) float64 { return math.Sqrt(6 / ((k + 1) * (k + 2) * (2*k + 3))) }
	for pairing, want := range map[string]func(float64) float64{"cg": cg, "minres": mr, "gmres:40": mr} {
		t.Run(pairing, func(t *testing.T) {
			r := begun(t, line(n), e1(n), nil, pairing)
			for k := 1; k < n; k++ {
				near(t, "‖r_k‖", r.step().Residual, want(float64(k)), 1e-12)
				near(t, "‖b − A x_k‖", r.truth(), want(float64(k)), 1e-12)
			}
			near(t, "‖r_n‖", r.step().Residual, 0, 1e-12)
			near(t, "‖b − A x_n‖", r.truth(), 0, 1e-12)
			if len(r.seen) != 0 {
				t.Errorf("events %+v", r.seen)
			}
		})
	}
}

// 1-D Poisson with b = 1 ends at step ⌈n/2⌉; α and ‖r‖ as recomputed with
// NumPy (α = 5, 0.8, 0.75, 2/3, 0.5 for n = 10).
func TestLineOnes(t *testing.T) {
	r := begun(t, line(10), ones(10), nil, "cg")
	alphas := []float64{5, 0.8, 0.75, 2.0 / 3, 0.5}
	squares := []float64{40, 24, 12, 4, 0}
	for k, want := range alphas {
		rd := r.step()
		near(t, "α", rd.Alpha, want, 1e-12)
		near(t, "‖r‖", rd.Residual, math.Sqrt(squares[k]), 1e-12)
	}
	r = begun(t, line(11), ones(11), nil, "cg")
	for _, want := range []float64{5.5, 9.0 / 11, 7.0 / 9, 5.0 / 7, 0.6, 1.0 / 3} {
		near(t, "α", r.step().Alpha, want, 1e-12)
	}
	near(t, "‖r₆‖", r.last.Residual, 0, 1e-12)
}

// 2-D Poisson with b = 1: ‖r‖ = 3, 1.5, 3/11, 0 for n = 3 and 4, 2√2, 0.8, 0
// for n = 4 (NumPy).
func TestPlateOnes(t *testing.T) {
	for n, want := range map[int][]float64{3: {1.5, 3.0 / 11, 0}, 4: {2 * math.Sqrt2, 0.8, 0}} {
		r := begun(t, plate(n), ones(n*n), nil, "cg")
		near(t, "‖r₀‖", r.first.Residual, float64(n), 1e-12)
		for _, w := range want {
			near(t, "‖r‖", r.step().Residual, w, 1e-12)
		}
	}
}

// k distinct eigenvalues end in k steps (Hestenes and Stiefel 1952).
func TestDistinctEigenvalues(t *testing.T) {
	for _, k := range []int{1, 2, 3, 5} {
		d := make([]float64, 60)
		for i := range d {
			d[i] = 1 + 2.5*float64(i%k)
		}
		for _, pairing := range []string{"cg", "minres", "gmres:30"} {
			r := begun(t, diagonal(d...), ones(60), nil, pairing)
			for range k {
				r.step()
			}
			near(t, pairing+" ‖r_k‖", r.last.Residual, 0, 1e-12)
			near(t, pairing+" true residual", r.truth(), 0, 1e-12)
			if k > 1 {
				before := begun(t, diagonal(d...), ones(60), nil, pairing)
				for range k - 1 {
					before.step()
				}
				if before.last.Residual < 1e-3 {
					t.Errorf("%s: %d eigenvalues are solved in %d steps", pairing, k, k-1)
				}
			}
		}
	}
}

// Kantorovich's bound ‖e_{k+1}‖_A ≤ (κ−1)/(κ+1) ‖e_k‖_A is attained at every
// step for A = diag(1,κ), b = −A(κ,1)ᵀ from zero.
func TestKantorovich(t *testing.T) {
	const kappa = 10.0
	a, b := diagonal(1, kappa), []float64{-kappa, -kappa}
	r := begun(t, a, b, nil, "sd")
	energy := func() float64 {
		x := r.x()
		u, v := x[0]+kappa, x[1]+1
		return math.Sqrt(u*u + kappa*v*v)
	}
	e := energy()
	for range 30 {
		r.step()
		next := energy()
		near(t, "‖e_{k+1}‖/‖e_k‖", next/e, (kappa-1)/(kappa+1), 1e-12)
		e = next
	}
}

// The cyclic shift A e_i = e_{i+1}, b = e₁: nothing for n−1 steps, then the
// solution (Nachtigal, Reddy and Trefethen 1992); restarted earlier, never.
func TestCyclicShift(t *testing.T) {
	const n = 8
	var e []linear.Entry
	for i := range n {
		e = append(e, linear.Entry{I: (i + 1) % n, J: i, V: 1})
	}
	a := linear.FromEntries(n, n, e)
	r := begun(t, a, e1(n), nil, "gmres:8")
	for k := 1; k < n; k++ {
		near(t, "‖r_k‖", r.step().Residual, 1, 1e-12)
	}
	near(t, "‖r_n‖", r.step().Residual, 0, 1e-12)
	near(t, "true residual", r.truth(), 0, 1e-12)
	r = begun(t, a, e1(n), nil, "gmres:7")
	for range 100 {
		near(t, "‖r‖ of gmres:7", r.step().Residual, 1, 1e-12)
	}
	if f, ok := r.event(trace.Restart); !ok || math.Abs(f.Value-1) > 1e-12 {
		t.Errorf("restart factor %+v", f)
	}
}

// Embree, SIAM Review 45 (2003) 259–266: gmres:1 solves in three steps with
// ‖r‖ = 3√2, 3, 0; gmres:2 stalls at 1.72532 (NumPy).
func TestEmbree(t *testing.T) {
	a, b := fromRows([]float64{1, 1, 1}, []float64{0, 1, 3}, []float64{0, 0, 1}), []float64{2, -4, 1}
	r := begun(t, a, b, nil, "gmres:1")
	for _, want := range []float64{3 * math.Sqrt2, 3, 0} {
		near(t, "gmres:1 ‖r‖", r.step().Residual, want, 1e-12)
	}
	near(t, "gmres:1 true residual", r.truth(), 0, 1e-12)
	r = begun(t, a, b, nil, "gmres:2")
	for range 500 {
		r.step()
	}
	near(t, "gmres:2 ‖r‖", r.last.Residual, 1.72532, 5e-6)
	near(t, "gmres:2 true residual", r.truth(), r.last.Residual, 1e-12)
}

// diag(2,3,2,3,2,3) with b = (1,2,2,3,3,4): BiCGStab finds the solution in
// the half step of step 2 (‖s‖ = 1.4e-17 with NumPy).
func TestLuckyHalfStep(t *testing.T) {
	r := begun(t, diagonal(2, 3, 2, 3, 2, 3), []float64{1, 2, 2, 3, 3, 4}, nil, "bicgstab")
	r.step()
	if rd := r.step(); !rd.Done {
		t.Fatalf("step 2: %+v", rd)
	}
	if _, ok := r.event(trace.HalfStep); !ok || len(r.seen) != 1 {
		t.Errorf("events %+v", r.seen)
	}
	near(t, "true residual", r.truth(), 0, 1e-14)
}

// MINRES on a spectrum symmetric about zero with b symmetric too: every second
// step does nothing, and ‖r_{2k}‖ ≤ 2·0.6^k ‖r₀‖ for [−4,−1]∪[1,4]
// (Greenbaum 1997, section 3.1).
func TestMinresIndefinite(t *testing.T) {
	var d []float64
	for i := range 50 {
		v := 1 + 3*float64(i)/49
		d = append(d, v, -v)
	}
	r := begun(t, diagonal(d...), ones(100), nil, "minres")
	even := r.first.Residual
	for k := 1; k <= 10; k++ {
		near(t, "odd step", r.step().Residual, even, 1e-12)
		even = r.step().Residual
		if bound := 2 * math.Pow(0.6, float64(k)) * 10; even > bound {
			t.Errorf("‖r_%d‖ = %g above its bound %g", 2*k, even, bound)
		}
	}
}

// CG ends on a matrix whose directions have no curvature; the typed event
// carries zero.
func TestCGZeroCurvature(t *testing.T) {
	r := begun(t, fromRows([]float64{0, 1}, []float64{1, 0}), e1(2), nil, "cg")
	rd := r.step()
	if b, ok := r.event(trace.Breakdown); !rd.Done || !ok || b.Value != 0 {
		t.Errorf("reading %+v events %+v", rd, r.seen)
	}
	if _, ok := r.event(trace.ZeroCurvature); !ok {
		t.Errorf("events %+v", r.seen)
	}
	if x := r.x(); x[0] != 0 || x[1] != 0 {
		t.Errorf("the iterate moved to %v", x)
	}
}
