package spectrum

import (
	"math"
	"math/rand/v2"
	"sort"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// dense returns the eigenvalues, ascending, and vectors of T by gonum's QR.
func dense(t *Tridiagonal) ([]float64, *mat.Dense) {
	k := t.Order()
	m := mat.NewSymDense(k, nil)
	tail := 0.0
	for j := range k {
		d := t.c[j]
		if t.form == fromCG {
			d = 1/t.c[j] + tail
			tail = t.e[j] / t.c[j]
		}
		m.SetSym(j, j, d)
		if j+1 < k {
			m.SetSym(j, j+1, t.coupling(j))
		}
	}
	var e mat.EigenSym
	e.Factorize(m, true)
	var v mat.Dense
	e.VectorsTo(&v)
	return e.Values(nil), &v
}

// cgOn feeds T with conjugate gradients on the diagonal matrix lambda.
func cgOn(t *Tridiagonal, lambda, b []float64, steps int) {
	n := len(b)
	r, p := append([]float64(nil), b...), append([]float64(nil), b...)
	rr := 0.0
	for _, v := range r {
		rr += v * v
	}
	for range steps {
		pap := 0.0
		for i := range n {
			pap += p[i] * lambda[i] * p[i]
		}
		alpha, next := rr/pap, 0.0
		for i := range n {
			r[i] -= alpha * lambda[i] * p[i]
			next += r[i] * r[i]
		}
		beta := next / rr
		if !t.AddCG(alpha, beta) {
			return
		}
		for i := range n {
			p[i] = r[i] + beta*p[i]
		}
		rr = next
	}
}

func near12(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol*math.Max(math.Abs(want), 1e-300)) {
		t.Errorf("%s = %.17g, want %.17g", what, got, want)
	}
}

// The Lanczos matrix of 1-D Poisson started at e_1 is the matrix itself:
// eigenvalues 4 sin²(kπ/(2(n+1))), closed form.
func TestPoissonClosedForm(t *testing.T) {
	for _, n := range []int{2, 3, 10, 100, 2000} {
		var T Tridiagonal
		for j := range n {
			off := 1.0
			if j == n-1 {
				off = 0
			}
			T.AddLanczos(2, off)
		}
		x := T.Extremes()
		near12(t, "smallest", x.Smallest, 4*math.Pow(math.Sin(math.Pi/float64(2*(n+1))), 2), 1e-8)
		near12(t, "largest", x.Largest, 4*math.Pow(math.Sin(float64(n)*math.Pi/float64(2*(n+1))), 2), 1e-11)
		if !x.Settled || x.Negative != 0 || x.Order != n || x.ResidualSmallest != 0 {
			t.Errorf("n=%d: %+v", n, x)
		}
	}
}

// Conjugate gradients on 1-D Poisson with b = e_1 gives r_k = ±e_{k+1}/(k+1),
// hence α_0 = 1/2 and in general α_k = (k+1)/(k+2), β_{k+1} =
// ((k+1)/(k+2))²: a closed form.
func TestPoissonFromCG(t *testing.T) {
	const n = 500
	var T Tridiagonal
	T.AddCG(0.5, 0.25)
	for k := 1; k < n-1; k++ {
		f := float64(k)
		T.AddCG((f+1)/(f+2), math.Pow((f+1)/(f+2), 2))
	}
	f := float64(n - 1)
	T.AddCG((f+1)/(f+2), 0)
	x := T.Extremes()
	near12(t, "smallest", x.Smallest, 4*math.Pow(math.Sin(math.Pi/(2*(n+1))), 2), 3e-12)
	near12(t, "largest", x.Largest, 4*math.Pow(math.Sin(n*math.Pi/(2*(n+1))), 2), 3e-12)
	near12(t, "condition", x.Condition(), math.Pow(1/math.Tan(math.Pi/(2*(n+1))), 2), 6e-12)
	if !T.Stopped() || !x.Settled {
		t.Errorf("complete matrix not settled: %+v", x)
	}
}

// Every call, warm or cold, agrees with gonum's dense eigenvalues and last
// components, on definite and indefinite matrices, in both forms.
func TestAgainstDense(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for trial := range 60 {
		indefinite := trial%3 == 2
		var T Tridiagonal
		for k := 1; k <= 120; k++ {
			if trial%2 == 0 {
				alpha := math.Exp(2 * rng.NormFloat64())
				if indefinite && rng.IntN(10) == 0 {
					alpha = -alpha
				}
				T.AddCG(alpha, math.Exp(rng.NormFloat64()))
			} else {
				diag := rng.NormFloat64()
				if !indefinite {
					diag += 10
				}
				T.AddLanczos(diag, 0.01+rng.Float64())
			}
			if k > 3 && k%7 != trial%7 {
				continue
			}
			checkDense(t, &T)
		}
	}
}

func checkDense(t *testing.T, T *Tridiagonal) {
	t.Helper()
	k := T.Order()
	x := T.Extremes()
	values, vectors := dense(T)
	norm := math.Max(math.Abs(values[0]), math.Abs(values[k-1]))
	if math.Abs(x.Smallest-values[0]) > 1e-11*norm || math.Abs(x.Largest-values[k-1]) > 1e-11*norm {
		t.Fatalf("order %d: %.17g..%.17g, dense %.17g..%.17g", k, x.Smallest, x.Largest, values[0], values[k-1])
	}
	if negative := sort.SearchFloat64s(values, 0); x.Negative != negative {
		t.Fatalf("order %d: %d negative, dense %d", k, x.Negative, negative)
	}
	for _, end := range []struct {
		got float64
		col int
	}{{x.ResidualSmallest, 0}, {x.ResidualLargest, k - 1}} {
		want := T.coupling(k-1) * math.Abs(vectors.At(k-1, end.col))
		if math.Abs(end.got-want) > 1e-3*want+1e-10*norm {
			t.Fatalf("order %d end %d: Ritz residual %g, dense %g", k, end.col, end.got, want)
		}
	}
}

// A Lanczos matrix of condition number 1e14 keeps the smallest eigenvalue to
// many digits and its sign for certain: the eigenvalues are those of the
// diagonal matrix it was made from.
func TestIllConditionedStaysDefinite(t *testing.T) {
	lambda := []float64{1e-14, 1, 1.25, 1.5, 2}
	var T Tridiagonal
	b := []float64{1, 1, 1, 1, 1}
	cgOn(&T, lambda, b, 40)
	x := T.Extremes()
	if x.Negative != 0 || !(x.Smallest > 0) {
		t.Fatalf("definite matrix: %+v", x)
	}
	near12(t, "smallest", x.Smallest, 1e-14, 1e-6)
	near12(t, "largest", x.Largest, 2, 1e-6)
}

// Neither end ever passes the operator's own, at any order, and the ends move
// only outwards; settled ends are within 1 %. Strakoš' matrix (Linear Algebra
// Appl. 154–156, 1991), n = 48, 0.1 to 1000, with its many ghosts.
func TestBoundsHoldThroughGhosts(t *testing.T) {
	const n = 48
	lambda, b := make([]float64, n), make([]float64, n)
	for i := range n {
		lambda[i] = .1 + float64(i)/(n-1)*(1000-.1)*math.Pow(.8, float64(n-1-i))
		b[i] = 1
	}
	settledOnce := false
	for steps := 1; steps <= 200; steps++ {
		var T Tridiagonal
		cgOn(&T, lambda, b, steps)
		x := T.Extremes()
		if x.Smallest < .1*(1-1e-9) || x.Largest > 1000*(1+1e-12) || x.Condition() > 1e4*(1+1e-9) {
			t.Fatalf("step %d: outside the spectrum: %+v", steps, x)
		}
		if x.Settled {
			settledOnce = true
			near12(t, "settled largest", x.Largest, 1000, .01)
			near12(t, "settled smallest", x.Smallest, .1, .01)
		}
	}
	if !settledOnce {
		t.Error("never settled")
	}
}

// The same steps give the same numbers whether asked often or once.
func TestWarmEqualsCold(t *testing.T) {
	lambda, b := make([]float64, 400), make([]float64, 400)
	for i := range lambda {
		lambda[i], b[i] = 1+float64(i*i), 1
	}
	var all, warm Tridiagonal
	cgOn(&all, lambda, b, 300)
	for j := range all.c {
		warm.AddCG(all.c[j], all.e[j])
		w := warm.Extremes()
		if j%37 == 0 || j == len(all.c)-1 {
			var cold Tridiagonal
			for i := range j + 1 {
				cold.AddCG(all.c[i], all.e[i])
			}
			c := cold.Extremes()
			near12(t, "smallest", w.Smallest, c.Smallest, 2e-12)
			near12(t, "largest", w.Largest, c.Largest, 2e-12)
			if w.Settled != c.Settled || w.Negative != c.Negative {
				t.Errorf("order %d: warm %+v, cold %+v", j+1, w, c)
			}
		}
	}
}
