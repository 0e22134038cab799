package inspect_test

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
)

// wild is D L D of order n for L = 3I − E(1) − E(−1) + 0.3 (E(5) + E(−5)) and D
// of up to 10^±spread, and the smallest eigenvalue of it: 1 over the largest of
// D⁻¹ L⁻¹ D⁻¹, by gonum.
func wild(seed uint64, n int, spread float64) (a *linear.CSR, smallest float64) {
	rng := rand.New(rand.NewPCG(seed, 3))
	l, d := mat.NewDense(n, n, nil), make([]float64, n)
	for i := range n {
		d[i] = math.Pow(10, spread*(2*rng.Float64()-1))
		for j := range n {
			l.Set(i, j, map[int]float64{0: 3, 1: -1, 5: 0.3}[max(i-j, j-i)])
		}
	}
	var inv mat.Dense
	if err := inv.Inverse(l); err != nil {
		panic(err)
	}
	var out []linear.Entry
	m := mat.NewSymDense(n, nil)
	for i := range n {
		for j := range n {
			if v := l.At(i, j); v != 0 {
				out = append(out, e(i, j, v*(d[i]*d[j])))
			}
			m.SetSym(i, j, (inv.At(i, j)+inv.At(j, i))/2/d[i]/d[j])
		}
	}
	var s mat.EigenSym
	s.Factorize(m, false)
	return linear.FromEntries(n, n, out), 1 / slices.Max(s.Values(nil))
}

// A definite matrix in wild units: the smallest eigenvalue is what its inverse
// shows, where dense values hold nothing but rounding, and none is negative.
func TestSmallestEigenvalueInWildUnits(t *testing.T) {
	for seed := range uint64(6) {
		a, want := wild(seed, 20, 12)
		f := studied(t, ones(a, 17), inspect.Quick)
		expect(t, "definite", f.PositiveDefinite, inspect.Yes, inspect.Proved)
		x := f.Study.Raw
		within(t, "smallest", x.Smallest, want, 1e-3)
		within(t, "condition", x.Condition, x.Largest/want, 1e-3)
		if low, _ := x.Settled(); !low || !x.Exact || x.Negative != 0 {
			t.Errorf("seed %d: settled %v, exact %v, %d negative", seed, low, x.Exact, x.Negative)
		}
		for k, v := range x.Values {
			if !(real(v) > 0) || k > 0 && real(v) < real(x.Values[k-1]) {
				t.Errorf("seed %d: value %d is %g", seed, k, v)
			}
		}
		if x.Low[0] != x.Smallest || !slices.IsSorted(x.Low) {
			t.Errorf("seed %d: low end %v", seed, x.Low)
		}
	}
}

// The squares of 1e200 are no numbers: what the dense singular values are is
// told, by gonum, and the condition.
func TestSingularValuesBeyondTheSquares(t *testing.T) {
	one := studied(t, ones(dense([]float64{5, 1, -0.5}, []float64{0.25, 4, 1}, []float64{-1, 0.5, 3}), 17), inspect.Quick).Study.Normality
	for _, c := range []float64{1e200, 1e-200} {
		a := dense([]float64{5, 1, -0.5}, []float64{0.25, 4, 1}, []float64{-1, 0.5, 3})
		for k := range a.Val {
			a.Val[k] *= c
		}
		m := mat.NewDense(3, 3, []float64{5, 1, -0.5, 0.25, 4, 1, -1, 0.5, 3})
		var svd mat.SVD
		svd.Factorize(m, mat.SVDNone)
		want := svd.Values(nil)
		d := studied(t, ones(a, 17), inspect.Quick).Study
		x := d.Raw
		within(t, "departure from normality, the same of any multiple", d.Normality.Henrici, one.Henrici, 1e-6)
		within(t, "smallest", x.Smallest, c*want[2], 1e-12)
		within(t, "largest", x.Largest, c*want[0], 1e-12)
		within(t, "condition", x.Condition, want[0]/want[2], 1e-12)
		if x.Certainty != inspect.Measured {
			t.Errorf("times %g: %s", c, x.Certainty)
		}
	}
}

// So are dense eigenvalues: [2 1; 1 2] has 1 and 3.
func TestEigenvaluesBeyondTheSquares(t *testing.T) {
	for _, c := range []float64{1e200, 1e-200} {
		x := studied(t, ones(dense([]float64{2 * c, c}, []float64{c, 2 * c}), 17), inspect.Quick).Study.Raw
		within(t, "smallest", x.Smallest, c, 1e-12)
		within(t, "largest", x.Largest, 3*c, 1e-12)
	}
}

// The same without a factorisation: the dense value is rounding alone, and what
// is told is that the smallest eigenvalue is at most that.
func TestSmallestEigenvalueLostToRounding(t *testing.T) {
	seen := 0
	for seed := range uint64(12) {
		a, want := wild(seed, 20, 12)
		x := studied(t, ones(a, 17), inspect.Budget{Work: 40000, Dense: 500}).Study.Raw
		if x == nil || !x.Exact || !math.IsNaN(x.Condition1) {
			t.Fatalf("seed %d: with factors, or not dense: %+v", seed, x)
		}
		if low, _ := x.Settled(); low || x.Smallest < 0 || x.Smallest+x.SmallestBound < want || x.Negative != 0 {
			t.Errorf("seed %d: %g within %g, settled %v, for %g", seed, x.Smallest, x.SmallestBound, low, want)
		}
		if real(x.Values[0]) == 0 {
			seen++
		}
	}
	if seen == 0 {
		t.Error("rounding made no value negative")
	}
}
