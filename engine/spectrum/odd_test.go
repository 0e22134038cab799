package spectrum

import (
	"math"
	"math/rand/v2"
	"testing"
	"time"
)

func TestOddInput(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	var none Tridiagonal
	if x := none.Extremes(); x.Order != 0 || !math.IsNaN(x.Smallest) || !math.IsNaN(x.Condition()) || x.Settled {
		t.Errorf("order 0: %+v", x)
	}
	for _, bad := range []float64{nan, inf, 0, 1e-320} {
		var T Tridiagonal
		if T.AddCG(bad, 1) || T.Order() != 0 || !T.Stopped() || T.AddCG(1, 1) {
			t.Errorf("alpha %g was taken", bad)
		}
	}
	for _, bad := range []float64{nan, inf, -1} {
		var T Tridiagonal
		T.AddCG(1, .5)
		if T.AddCG(.5, bad) || T.Order() != 2 {
			t.Errorf("beta %g: the step itself is good", bad)
		}
		x := T.Extremes() // T = [1 √.5; √.5 2.5]: 1.75 ± √1.0625
		near12(t, "smallest", x.Smallest, 1.75-math.Sqrt(1.0625), 1e-11)
		near12(t, "largest", x.Largest, 1.75+math.Sqrt(1.0625), 1e-11)
		if x.Settled {
			t.Errorf("beta %g: settled without a residual", bad)
		}
	}
	var one Tridiagonal
	one.AddCG(.25, 0)
	if x := one.Extremes(); x.Smallest != 4 || x.Largest != 4 || !x.Settled || x.Condition() != 1 {
		t.Errorf("order 1: %+v", x)
	}
	var L Tridiagonal
	if L.AddLanczos(nan, 1) || L.Order() != 0 {
		t.Error("Lanczos NaN was taken")
	}
}

// A semi-definite matrix (1-D Neumann, null vector of ones, closed form) seen
// by Lanczos is not called negative for a rounding error.
func TestSemidefiniteNotNegative(t *testing.T) {
	for _, scale := range []float64{1e-200, 1, 1e200} {
		const n = 300
		var T Tridiagonal
		for j := range n {
			d, off := 2*scale, scale
			if j == 0 || j == n-1 {
				d = scale
			}
			if j == n-1 {
				off = 0
			}
			T.AddLanczos(d, off)
		}
		x := T.Extremes()
		if x.Negative != 0 || math.Abs(x.Smallest) > 1e-13*scale {
			t.Errorf("scale %g: %+v", scale, x)
		}
		near12(t, "largest", x.Largest, scale*(2-2*math.Cos(math.Pi*(n-1)/n)), 1e-11)
		if !(x.Condition() > 1e13) {
			t.Errorf("condition of a singular matrix: %g", x.Condition())
		}
	}
}

// A hundred thousand steps are looked at in milliseconds.
func TestHugeOrder(t *testing.T) {
	var T Tridiagonal
	rng := rand.New(rand.NewPCG(3, 4))
	for range 100000 {
		T.AddCG(.1+rng.Float64(), .5+rng.Float64())
	}
	start := time.Now()
	T.Extremes()
	cold := time.Since(start)
	for range 5000 {
		T.AddCG(.1+rng.Float64(), .5+rng.Float64())
	}
	start = time.Now()
	x := T.Extremes()
	t.Logf("order 1e5: cold %v, warm %v: %+v", cold, time.Since(start), x)
	if cold > 2*time.Second { // some 40 ms on an idle machine
		t.Errorf("cold call took %v", cold)
	}
}

// Kac's matrix in its symmetric form, zero diagonal and √(i(n−i)) beside it,
// has the eigenvalues ±(n−1), ±(n−3), … (Clement 1959): the counts meet pivots
// that cancel exactly.
func TestKacMatrix(t *testing.T) {
	for _, n := range []int{2, 8, 9, 100, 101} {
		for _, scale := range []float64{1e-150, 1, 1e150} {
			var T Tridiagonal
			for i := 1; i <= n; i++ {
				T.AddLanczos(0, scale*math.Sqrt(float64(i*(n-i))))
			}
			x := T.Extremes()
			near12(t, "smallest", x.Smallest, -scale*float64(n-1), 1e-11)
			near12(t, "largest", x.Largest, scale*float64(n-1), 1e-11)
			if x.Negative != n/2 || !math.IsNaN(x.Condition()) {
				t.Errorf("n=%d scale %g: %d negative, want %d", n, scale, x.Negative, n/2)
			}
		}
	}
}

// At σ = T_00 the first pivot of L D Lᵀ − σI is exactly zero; by interlacing
// one of the two eigenvalues lies below it.
func TestCountAtAPivot(t *testing.T) {
	for _, alpha := range []float64{0.25, -0.25} {
		var T Tridiagonal
		T.AddCG(alpha, 2)
		T.AddCG(alpha, 1)
		if got := T.below([probes]float64{1 / alpha, 1 / alpha, 1 / alpha, 1 / alpha}); got != [probes]int{1, 1, 1, 1} {
			t.Errorf("α = %g: %v below 1/α", alpha, got)
		}
	}
}

func TestFormsDoNotMix(t *testing.T) {
	defer func() {
		if recover() == nil {
			t.Error("a step of Lanczos was taken into a matrix of CG")
		}
	}()
	var T Tridiagonal
	T.AddCG(1, 1)
	T.AddLanczos(1, 1)
}
