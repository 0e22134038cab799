package spectrum

import (
	"context"
	"math"
	"testing"

	"dwindle/engine/linear"
)

// grid is the five-point Laplacian of m x m unknowns, stencil 4, −1.
func grid(m int) *linear.CSR {
	var out []linear.Entry
	for i := range m * m {
		out = append(out, linear.Entry{I: i, J: i, V: 4})
		if i%m > 0 {
			out = append(out, linear.Entry{I: i, J: i - 1, V: -1}, linear.Entry{I: i - 1, J: i, V: -1})
		}
		if i >= m {
			out = append(out, linear.Entry{I: i, J: i - m, V: -1}, linear.Entry{I: i - m, J: i, V: -1})
		}
	}
	return linear.FromEntries(m*m, m*m, out)
}

// closely fails unless got is within the relative tolerance of want.
func closely(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol*math.Abs(want)) {
		t.Errorf("%s: %.10g, want %.10g", what, got, want)
	}
}

// Both ends of the five-point Laplacian (closed form, Varga 1962: sums of
// 4 sin²(kπ/(2(n+1)))), with a basis far smaller than what they need at once,
// and the true value within each bound.
func TestEndsOfTheFivePointLaplacian(t *testing.T) {
	for m, want := range map[int][2]float64{8: {.241229516856366, 7.75877048314363},
		32: {8 * math.Pow(math.Sin(math.Pi/66), 2), 8 * math.Pow(math.Cos(math.Pi/66), 2)}} {
		a := grid(m)
		got, err := Ends(context.Background(), m*m, a.Apply, Wanted{Low: 2, High: 1, Tol: 1e-8, Basis: 24, Products: 2000})
		if err != nil || !got.Settled {
			t.Fatalf("%d: settled %v after %d products, %v", m, got.Settled, got.Products, err)
		}
		closely(t, "smallest", got.Low[0].Value, want[0], 1e-12)
		closely(t, "largest", got.High[0].Value, want[1], 1e-12)
		x := make([]float64, m*m)
		for _, p := range append(got.Low, got.High...) {
			a.Apply(x, p.Vector)
			linear.Axpy(-p.Value, p.Vector, x)
			if r := linear.Norm2(x); r > p.Bound*1.01 || math.Abs(linear.Norm2(p.Vector)-1) > 1e-12 {
				t.Errorf("%d: residual %g above its bound %g", m, r, p.Bound)
			}
		}
	}
}

// A double eigenvalue is found again beside its first vector; an operator with
// few distinct values ends early; nothing is left of a space that is all
// excluded.
func TestEndsOfFewDistinctValues(t *testing.T) {
	d := []float64{5, 1, 5, 2, 2, 1, 3}
	apply := func(dst, x []float64) {
		for i, v := range d {
			dst[i] = v * x[i]
		}
	}
	first, _ := Ends(context.Background(), 7, apply, Wanted{Low: 1, High: 1, Tol: 1e-10, Products: 50})
	again, _ := Ends(context.Background(), 7, apply, Wanted{Low: 1, High: 1, Tol: 1e-10, Products: 50,
		Beside: [][]float64{first.Low[0].Vector, first.High[0].Vector}})
	third, _ := Ends(context.Background(), 7, apply, Wanted{Low: 1, High: 1, Tol: 1e-10, Products: 50,
		Beside: [][]float64{first.Low[0].Vector, first.High[0].Vector, again.Low[0].Vector, again.High[0].Vector}})
	for k, want := range [][2]float64{{1, 5}, {1, 5}, {2, 3}} {
		got := []Outermost{first, again, third}[k]
		closely(t, "low", got.Low[0].Value, want[0], 1e-12)
		closely(t, "high", got.High[0].Value, want[1], 1e-12)
	}
	ones, _ := Ends(context.Background(), 1, func(dst, x []float64) { copy(dst, x) }, Wanted{Low: 1, Beside: [][]float64{{1}}})
	if len(ones.Low) != 0 || !ones.Settled {
		t.Errorf("values of an empty space: %+v", ones)
	}
}

// A cancelled search is an error, not a value.
func TestEndsIsCancelled(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := Ends(ctx, 64, grid(8).Apply, Wanted{Low: 1, Products: 100}); err == nil {
		t.Error("no error")
	}
}

// Stochastic Lanczos quadrature on tridiag(−1,2,−1) of order 400: 133 of its
// eigenvalues 4 sin²(kπ/802) lie below 1; all 400 are counted in the end.
func TestDensityOfALine(t *testing.T) {
	n := 400
	apply := func(dst, x []float64) {
		for i := range x {
			dst[i] = 2 * x[i]
			if i > 0 {
				dst[i] -= x[i-1]
			}
			if i < n-1 {
				dst[i] -= x[i+1]
			}
		}
	}
	bars, err := Density(context.Background(), n, apply, []float64{0, 1, 4}, 40, 20)
	if err != nil {
		t.Fatal(err)
	}
	closely(t, "below 1", bars[0].Count, 133, .1)
	closely(t, "all", bars[0].Count+bars[1].Count, 400, 1e-10)
	if !(bars[0].Sd > 0.1 && bars[0].Sd < 10) {
		t.Errorf("standard error %g", bars[0].Sd)
	}
}

// Arnoldi finds both ends of the spectrum of a nonsymmetric tridiagonal
// Toeplitz matrix, 5 + 2√3 cos(kπ/(n+1)) of (−3, 5, −1), n = 10 (closed form).
func TestArnoldiOfToeplitz(t *testing.T) {
	var out []linear.Entry
	for i := range 10 {
		out = append(out, linear.Entry{I: i, J: i, V: 5})
		if i > 0 {
			out = append(out, linear.Entry{I: i, J: i - 1, V: -3}, linear.Entry{I: i - 1, J: i, V: -1})
		}
	}
	a := linear.FromEntries(10, 10, out)
	values, err := Arnoldi(context.Background(), 10, a.Apply, 10)
	if err != nil || len(values) != 10 {
		t.Fatal(values, err)
	}
	low, high := math.Inf(1), math.Inf(-1)
	for _, v := range values {
		low, high = min(low, real(v)), max(high, real(v))
	}
	closely(t, "low", low, 1.67621884038869, 1e-9)
	closely(t, "high", high, 8.32378115961131, 1e-9)
	dense := DenseEigenvalues(a)
	closely(t, "dense", real(dense[0]), 1.67621884038869, 1e-9)
	exact := Henrici(dense, linear.Norm2(a.Val))
	for _, bound := range []float64{HenriciBound(a, a.Transpose(), 50), CommutatorBound(a, a.Transpose())} {
		if bound > exact*(1+1e-9) || bound <= 0 {
			t.Errorf("bound %g of %g", bound, exact)
		}
	}
	closely(t, "balanced", HenriciBound(a, a.Transpose(), 200), exact, 1e-2) // balancing makes this one symmetric
}

// A symmetric matrix is normal: both bounds are 0 to rounding; a Jordan block
// is as far from it as can be.
func TestDepartureFromNormality(t *testing.T) {
	a := grid(5)
	if h, c := HenriciBound(a, a, 20), CommutatorBound(a, a); h > 1e-7 || c > 1e-7 {
		t.Errorf("symmetric: %g, %g", h, c)
	}
	var out []linear.Entry
	for i := range 19 {
		out = append(out, linear.Entry{I: i, J: i + 1, V: 1})
	}
	j := linear.FromEntries(20, 20, out)
	if h := HenriciBound(j, j.Transpose(), 50); h < 0.99 {
		t.Errorf("Jordan block: %g, all its eigenvalues are 0", h)
	}
}
