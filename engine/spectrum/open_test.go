package spectrum_test

import (
	"context"
	"math"
	"os"
	"path/filepath"
	"testing"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
	"dwindle/engine/load"
	"dwindle/engine/spectrum"
)

// byDiagonal applies the inverse of a diagonal.
type byDiagonal []float64

func (d byDiagonal) Apply(dst, x []float64) {
	for i, v := range x {
		dst[i] = v / d[i]
	}
}

// follow runs cg or minres with Jacobi on A x = 1 until the own residual fell
// by tol, and returns the Lanczos matrix. look is called after every step.
func follow(t *testing.T, name string, a *linear.CSR, tol float64, look func(step int, T *spectrum.Tridiagonal)) *spectrum.Tridiagonal {
	t.Helper()
	n := a.NRows
	d, b := make(byDiagonal, n), make([]float64, n)
	a.Diagonal(d)
	for i := range b {
		b[i] = 1
	}
	var s krylov.Solver
	for _, e := range krylov.Catalogue {
		if e.Name == name {
			s = e.New(linear.Values{})
		}
	}
	first, err := s.Begin(krylov.Problem{A: a, M: d, B: b})
	if err != nil {
		t.Fatal(err)
	}
	T := new(spectrum.Tridiagonal)
	for step := 1; step <= 10*n; step++ {
		r, err := s.Step()
		if err != nil {
			t.Fatal(err)
		}
		if name == "minres" {
			T.AddLanczos(r.Alpha, r.Beta)
		} else {
			T.AddCG(r.Alpha, r.Beta)
		}
		if look != nil {
			look(step, T)
		}
		if r.Done || r.Residual <= tol*first.Residual {
			return T
		}
	}
	t.Fatal("did not converge")
	return nil
}

func openMatrix(t *testing.T, file string) *linear.CSR {
	t.Helper()
	dir := os.Getenv("DWINDLE_OPEN")
	if dir == "" {
		t.Skip("open matrices are found through DWINDLE_OPEN, which is not set")
	}
	sys, err := load.File(context.Background(), filepath.Join(dir, file), func(float64) {})
	if err != nil {
		t.Fatal(err)
	}
	return sys.Matrix()
}

// The condition numbers of D⁻¹A are those of NumPy's dense eigenvalues; the
// estimates come within 2 % and never pass them, on the way or at the end.
func TestConditionOfOpenMatrices(t *testing.T) {
	for _, c := range []struct {
		file  string
		kappa float64 // six or more digits
		tol   float64
	}{
		{"bcsstk01.rb", 1360.707, 1e-10},
		{"494_bus.mtx", 78952.6, 1e-8},
		{"bcsstk13.mtx.gz", 5.63637e5, 1e-8},
		{"bcsstk16.mtx.gz", 802.049, 1e-8},
		{"LFAT5.mtx", 151.3146, 1e-10},
	} {
		for _, solver := range []string{"cg", "minres"} {
			t.Run(c.file+" "+solver, func(t *testing.T) {
				a := openMatrix(t, c.file)
				next := 1
				last := 0.0
				T := follow(t, solver, a, c.tol, func(step int, T *spectrum.Tridiagonal) {
					if step < next {
						return
					}
					next = max(step+1, step*21/20)
					last = checkBelow(t, T, c.kappa, last)
				})
				x := T.Extremes()
				t.Logf("order %d: %.7g (known %.7g), %g..%g ± %.1g, %.1g, settled %v", x.Order, x.Condition(), c.kappa,
					x.Smallest, x.Largest, x.ResidualSmallest, x.ResidualLargest, x.Settled)
				if checkBelow(t, T, c.kappa, last) < .98*c.kappa {
					t.Errorf("estimate %.7g, known %.7g", x.Condition(), c.kappa)
				}
			})
		}
	}
}

// checkBelow holds the estimate of T below kappa, beyond the digits it is
// known to, and not below the last one, and returns it.
func checkBelow(t *testing.T, T *spectrum.Tridiagonal, kappa, last float64) float64 {
	t.Helper()
	x := T.Extremes()
	got := x.Condition()
	if x.Negative > 0 || !(got <= kappa*(1+1e-6)) || got < last*(1-1e-11) {
		t.Fatalf("order %d: estimate %.9g after %.9g, known %.9g, %d negative", x.Order, got, last, kappa, x.Negative)
	}
	return got
}

// The estimates of bcsstk01 on the way, from NumPy's Lanczos matrix of the
// same iteration.
func TestConditionOnTheWay(t *testing.T) {
	want := map[int]float64{10: 620.5, 20: 914.3, 30: 1215.5, 40: 1359.9, 49: 1360.71}
	seen := 0
	follow(t, "cg", openMatrix(t, "bcsstk01.rb"), 1e-12, func(step int, T *spectrum.Tridiagonal) {
		w, ok := want[step]
		if !ok {
			return
		}
		seen++
		if got := T.Extremes().Condition(); math.Abs(got-w) > 1e-3*w {
			t.Errorf("step %d: %.6g, want %.6g", step, got, w)
		}
	})
	if seen != len(want) {
		t.Errorf("%d of %d steps seen", seen, len(want))
	}
}
