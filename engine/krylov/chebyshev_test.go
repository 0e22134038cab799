package krylov_test

import (
	"math"
	"strings"
	"testing"

	"dwindle/engine/linear"
	"dwindle/engine/spectrum"
	"dwindle/engine/trace"
)

// chebyshevFactor is 1/T_k((κ+1)/(κ−1)) = 2q^k/(1+q^{2k}), q = (√κ−1)/(√κ+1).
func chebyshevFactor(kappa, k float64) float64 {
	q := (math.Sqrt(kappa) - 1) / (math.Sqrt(kappa) + 1)
	return 2 * math.Pow(q, k) / (1 + math.Pow(q, 2*k))
}

// With the ends of the spectrum given the residual falls by 1/T_k at least, and
// by just that where all of it lies at the ends (κ = 100, k = 10:
// 0.26408876037, recomputed with NumPy).
func TestChebyshevFactor(t *testing.T) {
	near(t, "1/T₁₀", chebyshevFactor(100, 10), 0.26408876037, 1e-11)
	ends, spread := begun(t, diagonal(1, 100), ones(2), nil, "chebyshev:1,100"), []float64{}
	for i := range 60 {
		spread = append(spread, 1+99*float64(i)/59)
	}
	inside := begun(t, diagonal(spread...), ones(60), nil, "chebyshev:1,100")
	for k := 1.0; k <= 60; k++ {
		want := chebyshevFactor(100, k)
		near(t, "at the ends", ends.step().Residual/math.Sqrt2, want, 1e-13)
		if got := inside.step().Residual / math.Sqrt(60); got > want*(1+1e-12) {
			t.Errorf("step %.0f: %g above its bound %g", k, got, want)
		}
	}
	one := begun(t, diagonal(3, 3, 3), ones(3), nil, "chebyshev:3,3")
	near(t, "lo = hi", one.step().Residual, 0, 1e-15)
}

// With estimated ends it converges at the rate of the true ones, within the
// room the safety factors 1.1 and 0.9 and the estimate of the lower end take.
func TestChebyshevEstimates(t *testing.T) {
	const n = 40
	kappa := 1 / math.Pow(math.Tan(math.Pi/2/(n+1)), 2)
	b := make([]float64, n*n)
	linear.Uniform(b, 3)
	for _, pairing := range []string{"chebyshev", "chebyshev+jacobi", "chebyshev+ssor:1", "chebyshev+ic:0"} {
		r := begun(t, plate(n), b, nil, pairing)
		got := r.until(1e-8, 2000)
		q := (math.Sqrt(kappa) - 1) / (math.Sqrt(kappa) + 1)
		want := math.Log(2e8) / -math.Log(q) // of the plain iteration with the true ends
		t.Logf("%s: %d steps, %.0f with the true ends and no preconditioner", pairing, got, want)
		if float64(got) > 1.6*want || len(r.seen) != 0 {
			t.Errorf("%s: %d steps, %.0f expected; events %+v", pairing, got, want, r.seen)
		}
		near(t, pairing+" true residual", r.truth(), 0, 1.1e-8*r.first.Residual)
	}
}

// A singular matrix (the line with free ends) with b in reach: the estimate does
// not see the null vector, and the steps are those of the smallest eigenvalue
// above zero, 2 − 2 cos(π/n).
func TestChebyshevSingular(t *testing.T) {
	const n = 50
	a := line(n)
	a.Val[0], a.Val[len(a.Val)-1] = 1, 1
	b := e1(n)
	b[n-1] = -1
	r := begun(t, a, b, nil, "chebyshev")
	got, want := r.until(1e-10, 4000), math.Log(2e10)/2/math.Tan(math.Pi/2/n)
	if float64(got) > 1.6*want {
		t.Errorf("%d steps, %.0f expected", got, want)
	}
	near(t, "true residual", r.truth(), 0, 1e-9)
}

// An upper end that lies too low makes it diverge, and is not made up for.
func TestChebyshevDiverges(t *testing.T) {
	r := begun(t, diagonal(1, 2, 4), ones(3), nil, "chebyshev:1,2")
	r.until(0, 60)
	if r.last.Residual < 1e8 || !r.entry.NoGuarantee {
		t.Errorf("residual %g", r.last.Residual)
	}
	r = begun(t, diagonal(1, 2, 4), ones(3), nil, "chebyshev:9,4")
	if e, ok := r.event(trace.Breakdown); !ok || e.Quantity != "lo/hi" || !r.first.Done {
		t.Errorf("lo above hi: %+v, events %+v", r.first, r.seen)
	}
}

// On an indefinite matrix the estimate meets a negative curvature and tells it
// before the first step.
func TestChebyshevIndefinite(t *testing.T) {
	d := []float64{-1}
	for i := range 30 {
		d = append(d, 1+float64(i)/30)
	}
	r := begun(t, diagonal(d...), ones(31), nil, "chebyshev")
	if e, ok := r.event(trace.NegativeCurvature); !ok || !(e.Value < 0 && e.Value >= -1) {
		t.Errorf("events %+v", r.seen)
	}
}

// On ill-conditioned matrices the estimate of 60 steps misses the lower end; it
// is lowered on the way, and the steps are those the true condition number asks
// for (from the Lanczos matrix of a converged cg, which is close to it).
func TestChebyshevWidens(t *testing.T) {
	for _, pairing := range []string{"bcsstk01.rsa +jacobi", "494_bus.mtx +ic:0", "bcsstk16.mtx.gz +jacobi"} {
		file, m, _ := strings.Cut(pairing, " ")
		a := opened(t, file)
		c := begun(t, a, ones(a.NRows), nil, "cg"+m)
		var lanczos spectrum.Tridiagonal
		for c.last.Residual > 1e-10*c.first.Residual {
			rd := c.step()
			lanczos.AddCG(rd.Alpha, rd.Beta)
		}
		kappa := lanczos.Extremes().Condition()
		r := begun(t, a, ones(a.NRows), nil, "chebyshev"+m)
		got := r.until(1e-8, 50000)
		want := math.Log(2e8) / 2 * math.Sqrt(kappa)
		t.Logf("%s: κ %.4g, %d steps, %.0f for the true ends", pairing, kappa, got, want)
		if float64(got) > 2*want {
			t.Errorf("%s: %d steps, %.0f expected", pairing, got, want)
		}
		near(t, pairing+" true residual", r.truth(), 0, 2e-8*r.first.Residual)
	}
}
