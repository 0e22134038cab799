package krylov_test

import (
	"math"
	"testing"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// outliers returns 200 eigenvalues in [1, 2] and the given ones.
func outliers(more ...float64) *linear.CSR {
	d := make([]float64, 200)
	for i := range d {
		d[i] = 1 + float64(i)/199
	}
	return diagonal(append(d, more...)...)
}

// counting counts products.
type counting struct {
	*linear.CSR
	uses int
}

func (c *counting) Apply(dst, x []float64) { c.uses++; c.CSR.Apply(dst, x) }

func (c *counting) ApplyDot(dst, x []float64) float64 { c.uses++; return c.CSR.ApplyDot(dst, x) }

// b = 1 on eigenvalues in [1, 2] takes cg 11 steps to 1e-8, and 29 with
// {1e-4, 2e-4, 5e-4} added (NumPy). Those three taken out, it is 11 again. The
// products of the set-up count: no more than 40 of them.
func TestDeflation(t *testing.T) {
	steps := func(a *linear.CSR, solver string) (int, int) {
		c := &counting{CSR: a}
		r := begun(t, c, ones(a.NRows), nil, solver)
		setUp := c.uses
		n := r.until(1e-8, 200)
		if c.uses-setUp != n {
			t.Errorf("%s: %d products in %d steps", solver, c.uses-setUp, n)
		}
		near(t, solver+" true residual", r.truth(), 0, 1.1e-8*r.first.Residual)
		return n, setUp
	}
	hard := outliers(1e-4, 2e-4, 5e-4)
	for _, c := range []struct {
		a      *linear.CSR
		solver string
		want   int
	}{{outliers(), "cg", 11}, {hard, "cg", 29}, {hard, "dcg:3", 11}, {hard, "dcg:4", 11}} {
		got, setUp := steps(c.a, c.solver)
		if got < c.want-1 || got > c.want+1 || setUp > 40 {
			t.Errorf("%s: %d steps after %d products, want %d", c.solver, got, setUp, c.want)
		}
	}
	if one, _ := steps(hard, "dcg:1"); one <= 13 || one >= 28 {
		t.Errorf("dcg:1: %d steps, between those of 0 and 3 vectors expected", one)
	}
}

// The energy norm of the error falls at every step, and what was taken out
// stays out: down to 1e-14 the residual told is the true one.
func TestDeflationStaysTrue(t *testing.T) {
	a := outliers(1e-4, 2e-4, 5e-4)
	want, b := make([]float64, 203), make([]float64, 203)
	linear.Uniform(want, 8)
	a.Apply(b, want)
	r := begun(t, a, b, nil, "dcg:3")
	energy := math.Inf(1)
	for r.last.Residual > 1e-13*r.first.Residual {
		r.step()
		e := energyOf(a, r.x(), want)
		if e > energy*(1+1e-12) && e > 1e-12 {
			t.Fatalf("step %d: energy norm %g after %g", r.steps, e, energy)
		}
		energy = e
		near(t, "told − true residual", r.last.Residual, r.truth(), 1e-14*r.first.Residual)
	}
}

// With incomplete factorisations on open matrices the deflated method takes
// fewer steps than cg, and the more vectors the fewer.
func TestDeflationOnOpenMatrices(t *testing.T) {
	for _, file := range []string{"494_bus.mtx", "bcsstk16.mtx.gz", "bcsstk01.rsa"} {
		a := opened(t, file)
		var steps []int
		for _, solver := range []string{"cg", "dcg:1", "dcg:4", "dcg:10"} {
			r := begun(t, a, ones(a.NRows), nil, solver+"+ic:0")
			steps = append(steps, r.until(1e-8, 2000))
			near(t, solver+" on "+file+" true residual", r.truth(), 0, 2e-8*r.first.Residual)
		}
		t.Logf("%s: %v steps", file, steps)
		for i := 1; i < len(steps); i++ {
			if steps[i] >= steps[i-1] {
				t.Errorf("%s: %v steps with 0, 1, 4 and 10 vectors", file, steps)
			}
		}
	}
}

// A negative Ritz value is not taken out, so that the iteration shows it; an
// indefinite M ends the search and is told.
func TestDeflationIndefinite(t *testing.T) {
	r := begun(t, outliers(-1e-2), ones(201), nil, "dcg:3")
	r.until(1e-10, 100)
	e, ok := r.event(trace.NegativeCurvature)
	if !ok || e.Value >= 0 {
		t.Errorf("events %+v", r.seen)
	}
	if _, curves := r.s.(krylov.Curver); !curves {
		t.Error("no curvature is shown")
	}
	d := make(scaled, 200)
	for i := range d {
		d[i] = 1
	}
	d[0] = -1
	r = begunWith(t, outliers(), d, ones(200), nil, linear.Part{Name: "dcg"})
	if _, ok := r.event(trace.PrecondIndefinite); !ok {
		t.Errorf("events %+v", r.seen)
	}
}

// The null vector of a singular matrix is left in: nothing is divided by its
// Ritz value, and b in reach is solved.
func TestDeflationSingular(t *testing.T) {
	a := outliers(0, 1e-3)
	b := ones(202)
	b[200] = 0
	r := begun(t, a, b, nil, "dcg:3")
	r.until(1e-10, 100)
	near(t, "true residual", r.truth(), 0, 1e-8)
	near(t, "x along the null vector", r.x()[200], 0, 1e-6)
}

// Three vectors given, the eigenvectors of the outliers in other combinations,
// do what the three Ritz vectors do: 11 steps instead of 29 (see
// TestDeflation). A null vector among them is left out.
func TestDeflationOfGivenVectors(t *testing.T) {
	a := outliers(1e-4, 2e-4, 5e-4)
	n := a.NRows
	given := make([][]float64, 3)
	for k := range given {
		given[k] = make([]float64, n)
		for i := range 3 {
			given[k][n-3+i] = math.Pow(float64(i+1), float64(k))
		}
	}
	entry, _ := krylov.Lookup("dcg")
	values, err := linear.Resolve("dcg", entry.Params, []linear.Arg{{Text: "3"}, {Name: "space", Text: "given"}})
	if err != nil {
		t.Fatal(err)
	}
	begin := func(near [][]float64) (krylov.Solver, trace.Reading, error) {
		s := entry.New(values)
		r, err := s.Begin(krylov.Problem{A: a, M: linear.Identity{}, B: ones(n), Near: near})
		return s, r, err
	}
	s, first, err := begin(given)
	if err != nil {
		t.Fatal(err)
	}
	steps := 0
	for last := first; last.Residual > 1e-8*first.Residual && steps < 100; steps++ {
		if last, err = s.Step(); err != nil {
			t.Fatal(err)
		}
	}
	if steps < 10 || steps > 12 {
		t.Errorf("%d steps, want 11", steps)
	}
	if _, _, err := begin(nil); err == nil {
		t.Error("begins without any vector")
	}
	if _, _, err := begin([][]float64{make([]float64, n)}); err == nil {
		t.Error("begins with a zero vector")
	}
}
