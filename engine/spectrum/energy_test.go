package spectrum_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
	"dwindle/engine/spectrum"
)

// At every iteration the Gauss and Gauss–Radau estimates enclose the true
// energy norm of the error, down to the floor of rounding: the solution and
// μ = 0.9 λ_min come from gonum's dense Cholesky factors and eigenvalues, and
// the error itself is known to about twice its smallest value.
func TestEnergyErrorsEncloseTheTrueOnes(t *testing.T) {
	systems := map[string]*linear.CSR{
		"strakos": diagonalOf(strakos(48, .1, 1000, .8)), "plate": plate(20),
	}
	for name, a := range systems {
		t.Run(name, func(t *testing.T) { enclose(t, a) })
	}
	for _, file := range []string{"bcsstk01.rb", "LFAT5.mtx", "494_bus.mtx", "lund_a.mtx", "pts5ldd03.mtx"} {
		t.Run(file, func(t *testing.T) { enclose(t, openMatrix(t, file)) })
	}
}

func enclose(t *testing.T, a *linear.CSR) {
	b := ones(a.NRows)
	exact, low := solveDense(t, a, b)
	norm := func(x []float64) float64 {
		e, ae := make([]float64, len(x)), make([]float64, len(x))
		for i := range e {
			e[i] = exact[i] - x[i]
		}
		a.Apply(ae, e)
		return math.Sqrt(math.Max(0, linear.Dot(e, ae))) / linear.Norm2(b)
	}
	true := []float64{norm(make([]float64, len(b)))}
	c := conjugate(t, a, plain{}, b, 1e-14, 5000, func(x []float64) { true = append(true, norm(x)) })
	for part := 1; part <= 4; part++ { // as a run in progress knows them, too
		k := c.steps * part / 4
		encloses(t, true, spectrum.EnergyErrors(c.alphas[:k], c.betas[:k], .9*low), k)
	}
}

// encloses holds the bounds that k steps give against the true errors.
func encloses(t *testing.T, true []float64, found spectrum.Energy, steps int) {
	t.Helper()
	if len(found.Lower) != steps {
		t.Fatalf("%d entries for %d steps", len(found.Lower), steps)
	}
	floor := true[0]
	for _, e := range true {
		floor = math.Min(floor, e)
	}
	checked, widest, least := 0, 1.0, 1.0
	for k, e := range true[:steps] {
		if !(found.Lower[k] <= e*(1+1e-9)+2*floor) || !(found.Upper[k] >= e*(1-1e-9)-2*floor) {
			t.Fatalf("it %d: %g not in [%g, %g]", k, e, found.Lower[k], found.Upper[k])
		}
		if e > 100*floor {
			checked++
			widest = math.Max(widest, found.Upper[k]/found.Lower[k])
			if k < found.Trusted {
				least = math.Min(least, found.Lower[k]/e)
			}
		}
	}
	t.Logf("%d its, %d above the floor %.2g, upper/lower at most %.4g, lower/true at least %.4g of %d trusted",
		steps, checked, floor, widest, least, found.Trusted)
	if checked < min(5, steps/2) || least < math.Sqrt(.65) { // lund_a deceives it by a little
		t.Errorf("%d checked, %d of %d trusted, which hold %g of the error", checked, found.Trusted, steps, least)
	}
}

// solveDense returns the solution, refined, and the smallest eigenvalue.
func solveDense(t *testing.T, a *linear.CSR, b []float64) (x []float64, low float64) {
	t.Helper()
	n := a.NRows
	d := mat.NewSymDense(n, nil)
	for i := range n {
		cols, vals := a.Row(i)
		for k, j := range cols {
			if int(j) >= i {
				d.SetSym(i, int(j), vals[k])
			}
		}
	}
	var c mat.Cholesky
	var eigen mat.EigenSym
	if !c.Factorize(d) || !eigen.Factorize(d, false) {
		t.Fatal("not definite")
	}
	sum, r := mat.NewVecDense(n, nil), append([]float64(nil), b...)
	for range 4 {
		var step mat.VecDense
		if err := c.SolveVecTo(&step, mat.NewVecDense(n, r)); err != nil {
			t.Fatal(err)
		}
		sum.AddVec(sum, &step)
		r = make([]float64, n)
		linear.Residual(r, a, sum.RawVector().Data, b)
	}
	return sum.RawVector().Data, eigen.Values(nil)[0]
}

// Without μ there is no upper bound, with one above the spectrum none that is
// called one; and coefficients of an indefinite matrix end the list.
func TestEnergyErrorsOutside(t *testing.T) {
	c := conjugate(t, diagonalOf(strakos(24, .1, 100, .9)), plain{}, ones(24), 1e-12, 100, nil)
	for _, mu := range []float64{0, math.NaN(), 50} {
		e := spectrum.EnergyErrors(c.alphas, c.betas, mu)
		if last := e.Upper[len(e.Upper)-1]; !math.IsNaN(last) && mu != 50 {
			t.Errorf("mu %g: upper bound %g", mu, last)
		} else if mu == 50 && !math.IsNaN(last) {
			t.Errorf("mu %g is above the spectrum: upper bound %g", mu, last)
		}
	}
	if e := spectrum.EnergyErrors([]float64{1, 1, -1, 1}, []float64{.5, .5, .5, .5}, 0); len(e.Lower) != 2 {
		t.Errorf("%d entries before a negative curvature", len(e.Lower))
	}
}
