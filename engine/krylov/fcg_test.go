package krylov_test

import (
	"math"
	"testing"

	"dwindle/engine/linear"
)

// With a fixed preconditioner flexible conjugate gradients are conjugate
// gradients, whatever number of directions they keep.
func TestFCGIsCG(t *testing.T) {
	a, b := plate(15), make([]float64, 225)
	linear.Uniform(b, 2)
	for _, m := range []string{"none", "jacobi", "ic:0"} {
		for _, solver := range []string{"fcg:1", "fcg:2", "fcg:5"} {
			f, c := begun(t, a, b, nil, solver+"+"+m), begun(t, a, b, nil, "cg+"+m)
			for range 20 {
				x, y := f.step(), c.step()
				near(t, solver+"+"+m+" ‖r‖", x.Residual, y.Residual, 1e-10*c.first.Residual)
				near(t, solver+"+"+m+" α", x.Alpha, y.Alpha, 1e-8*y.Alpha)
			}
		}
	}
}

// moody is a preconditioner that changes from use to use.
type moody struct {
	d    []float64 // of the diagonal
	uses *int
}

func (m moody) Apply(dst, x []float64) {
	*m.uses++
	for i, v := range x {
		dst[i] = v / m.d[i] * (1 + 0.5*math.Sin(float64(i**m.uses)))
	}
}

// With an M that changes from step to step the energy norm of the error still
// falls at every step, each direction is conjugate to the one before, and the
// system is solved in fewer steps than by cg with the same M.
func TestFCGChangingM(t *testing.T) {
	a, want, b := plate(20), make([]float64, 400), make([]float64, 400)
	linear.Uniform(want, 4)
	a.Apply(b, want)
	d := make([]float64, 400)
	a.Diagonal(d)
	steps := map[string]int{}
	for _, solver := range []string{"cg", "fcg:1", "fcg:10"} {
		r := begunWith(t, a, moody{d, new(int)}, b, nil, solverPart(t, solver))
		energy := math.Inf(1)
		for r.last.Residual > 1e-8*r.first.Residual && r.steps < 2000 {
			r.step()
			if e := energyOf(a, r.x(), want); solver != "cg" && e > energy*(1+1e-12) {
				t.Fatalf("%s: energy norm rises from %g to %g in step %d", solver, energy, e, r.steps)
			} else {
				energy = e
			}
		}
		steps[solver] = r.steps
		if solver != "cg" {
			near(t, solver+" true residual", r.truth(), 0, 1.1e-8*r.first.Residual)
		}
	}
	t.Logf("steps: %v", steps)
	if steps["fcg:10"] > steps["fcg:1"] || 2*steps["fcg:1"] > steps["cg"] {
		t.Errorf("steps %v: flexible is to help", steps)
	}
}

// energyOf returns ‖x − want‖_A.
func energyOf(a *linear.CSR, x, want []float64) float64 {
	e, q := append([]float64(nil), x...), make([]float64, len(x))
	linear.Axpy(-1, want, e)
	a.Apply(q, e)
	return math.Sqrt(linear.Dot(e, q))
}
