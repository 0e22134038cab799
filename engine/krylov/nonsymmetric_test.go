package krylov_test

import (
	"math"
	"testing"

	"dwindle/engine/linear"
)

// degrees says by how much a step raises the degree of the residual
// polynomial.
var degrees = map[string]int{"bicg": 1, "qmr": 1, "cgs": 2, "tfqmr": 2, "bicgstab": 2, "bicgstabl:2": 4, "bicgstabl:4": 8,
	"idr:1": 2, "idr:4": 5, "gcr:60": 1, "fgmres:60": 1, "gmresdr:20,5": 1}

// The nonsymmetric methods on open matrices with b = 1: each ends at 1e-8, at
// no smaller degree than full GMRES, which is optimal, and what it tells is
// true; CGS and its smoothed form lose digits where its residuals grow (on
// olm1000 by 9e4).
func TestNonsymmetricOnOpenMatrices(t *testing.T) {
	for _, c := range []struct{ file, precond string }{
		{"fs_183_1.mtx", "jacobi"}, {"olm1000.mtx", "ilu:0"}, {"bfwa62.mtx", "jacobi"}, {"arc130.rua", "ilu:0"},
	} {
		t.Run(c.file, func(t *testing.T) {
			a := opened(t, c.file)
			b := ones(a.NRows)
			full := begun(t, a, b, nil, "gmres:200+"+c.precond)
			least := full.until(1e-8, 200)
			for name, degree := range degrees {
				r := begun(t, a, b, nil, name+"+"+c.precond)
				r.until(1e-8, 400)
				slack := 1e-8
				if name == "cgs" || name == "tfqmr" {
					slack = 1e-6
				}
				told, truth := r.last.Residual/r.first.Residual, r.truth()/r.first.Residual
				if !(told <= 1e-8) || len(r.seen) > 0 && name != "gmresdr:20,5" && r.last.Done {
					t.Errorf("%s: %g after %d steps, events %+v", name, told, r.steps, r.seen)
				}
				if gap := math.Abs(told - truth); gap > slack {
					t.Errorf("%s: %g told, %g true", name, told, truth)
				}
				if degree*r.steps < least {
					t.Errorf("%s reaches in degree %d what takes full GMRES %d", name, degree*r.steps, least)
				}
			}
		})
	}
}

// watt_2's rows differ in size by many powers of ten. With ILU(0) every
// product method meets its target by its own number while the true residual
// stays far above: the false stop that an audit is for.
func TestFalseStopOnWatt2(t *testing.T) {
	a := opened(t, "watt_2.mtx")
	b := ones(a.NRows)
	for _, name := range []string{"bicgstab", "cgs", "bicgstabl:2", "idr:4"} {
		r := begun(t, a, b, nil, name+"+ilu:0")
		r.until(1e-8, 1000)
		if told, truth := r.last.Residual/r.first.Residual, r.truth()/linear.Norm2(b); !(told <= 1e-8) || !(truth > 1e-6) {
			t.Errorf("%s: %g told, %g true after %d steps", name, told, truth, r.steps)
		}
	}
}
