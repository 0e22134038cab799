package krylov_test

import (
	"math"
	"runtime"
	"slices"
	"testing"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
	"dwindle/engine/precond"
	"dwindle/engine/trace"
)

// each runs f for every solver of the catalogue.
func each(t *testing.T, f func(t *testing.T, e krylov.Entry)) {
	t.Helper()
	for _, e := range krylov.Catalogue {
		t.Run(e.Name, func(t *testing.T) { f(t, e) })
	}
}

// admissible lists the preconditioners a solver may use.
func admissible(e krylov.Entry) []string {
	var names []string
	for _, p := range precond.Catalogue {
		if p.InUserUnits || p.Name == "schur" {
			continue // needs files, or a saddle system: see its own tests
		}
		transposes := e.Needs&linear.NeedsTransposeM == 0 || p.Transposes || p.Name == "none"
		if transposes && (e.Assumes&linear.AssumesFixedM == 0 || p.Fixed) && (e.Assumes&linear.AssumesSymmetricM == 0 || p.Symmetric) {
			names = append(names, p.Name)
			if slices.ContainsFunc(p.Params, func(q linear.Param) bool { return q.Name == "store" }) {
				names = append(names, p.Name+":store=single")
			}
		}
	}
	return names
}

// Every pairing converges on symmetric positive definite systems: the theory
// of each method says so. (BiCGStab's asks for a shadow vector without special
// structure: with b = e₁ on a line and SSOR, r̂ᵀr is exactly zero, and with
// b = 1 and an M that keeps row sums r̂ is an eigenvector of (A M⁻¹)ᵀ. Richardson's
// iteration converges where the spectral radius is below one.)
func TestEveryPairingConverges(t *testing.T) {
	systems := map[string]struct {
		a *linear.CSR
		b []float64
	}{
		"line":  {line(24), random(24, 8)},
		"plate": {plate(8), random(64, 9)},
		"diag":  {diagonal(1, 2, 3, 4, 5, 6, 7, 8, 9, 10), ones(10)},
	}
	each(t, func(t *testing.T, e krylov.Entry) {
		for _, p := range admissible(e) {
			for name, s := range systems {
				if e.Name == "richardson" && contraction(t, s.a, p) > 0.996 {
					continue
				}
				r := begun(t, s.a, s.b, nil, e.Name+"+"+p)
				n := r.until(1e-13, 8000)
				if got := r.truth() / linear.Norm2(s.b); !(got <= 1e-10) {
					t.Errorf("%s+%s on %s: true residual %g after %d steps, events %+v", e.Name, p, name, got, n, r.seen)
				}
			}
		}
	})
}

// A step allocates nothing, restarts included, but for the few bytes of a
// dense eigenproblem.
func TestStepAllocatesNothing(t *testing.T) {
	a := plate(40)
	each(t, func(t *testing.T, e krylov.Entry) {
		for _, p := range admissible(e) {
			name := e.Name
			if e.Restarted {
				name += ":3"
			}
			r := begun(t, a, ones(1600), nil, name+"+"+p)
			step := func() {
				if !r.last.Done { // a direct solve ends sooner
					r.step()
				}
			}
			if got := testing.AllocsPerRun(10, step); got != 0 && !(e.Dense && got <= 3) {
				t.Errorf("%s+%s allocates %g times a step", name, p, got)
			}
		}
	})
}

// Asking for the solution at every step changes no bit of what follows, and
// neither b nor the guess is written to.
func TestSolutionChangesNothing(t *testing.T) {
	a := plate(12)
	b, guess := make([]float64, 144), make([]float64, 144)
	each(t, func(t *testing.T, e krylov.Entry) {
		linear.Uniform(b, 5)
		linear.Uniform(guess, 6)
		for _, p := range []string{"none", "ssor:1"} {
			if p != "none" && !slices.Contains(admissible(e), "ssor") {
				continue
			}
			asked, left := begun(t, a, b, guess, e.Name+"+"+p), begun(t, a, b, guess, e.Name+"+"+p)
			for k := 0; k < 45 && !left.last.Done; k++ {
				asked.x()
				if x, y := asked.step(), left.step(); !same(x.Residual, y.Residual) || !same(x.Alpha, y.Alpha) || !same(x.Beta, y.Beta) {
					t.Fatalf("step %d: %+v and %+v", k+1, x, y)
				}
			}
			sameVector(t, asked.x(), left.x())
		}
		want := make([]float64, 144)
		linear.Uniform(want, 5)
		sameVector(t, b, want)
		linear.Uniform(want, 6)
		sameVector(t, guess, want)
	})
}

// A guess g gives the iterates of A d = b − A g, moved by g.
func TestGuess(t *testing.T) {
	a := plate(9)
	b, g, r := ones(81), make([]float64, 81), make([]float64, 81)
	linear.Uniform(g, 4)
	norm := linear.Residual(r, a, g, b)
	each(t, func(t *testing.T, e krylov.Entry) {
		moved, plain := begun(t, a, b, g, e.Name), begun(t, a, r, nil, e.Name)
		near(t, "‖r₀‖", moved.first.Residual, inNorm(e, a, r), 1e-12*norm)
		sameVector(t, moved.x(), g)
		for range 8 {
			moved.step()
			plain.step()
		}
		x, d := moved.x(), plain.x()
		for i := range x {
			near(t, "x_i", x[i], g[i]+d[i], 1e-10*(1+math.Abs(d[i])))
		}
	})
}

// A zero right-hand side, or a guess that is the solution, is done at once.
func TestNothingToDo(t *testing.T) {
	each(t, func(t *testing.T, e krylov.Entry) {
		for _, p := range admissible(e) {
			r := begun(t, plate(3), make([]float64, 9), nil, e.Name+"+"+p)
			if !r.first.Done || r.first.Residual != 0 || len(r.seen) != 0 {
				t.Errorf("zero b: %+v", r.first)
			}
			sameVector(t, r.x(), make([]float64, 9))
			r = begun(t, diagonal(1, 2, 4), []float64{1, 4, 12}, []float64{1, 2, 3}, e.Name+"+"+p)
			if !r.first.Done || r.first.Residual != 0 || len(r.seen) != 0 {
				t.Errorf("exact guess: %+v", r.first)
			}
		}
	})
}

// Shapes that do not fit are an error, not a panic.
func TestShapes(t *testing.T) {
	each(t, func(t *testing.T, e krylov.Entry) {
		v, err := linear.Resolve(e.Name, e.Params, nil)
		if err != nil {
			t.Fatal(err)
		}
		for _, p := range []krylov.Problem{
			{A: plate(2), M: linear.Identity{}, B: ones(3)},
			{A: plate(2), M: linear.Identity{}, B: ones(4), X: ones(5)},
			{A: fromRows([]float64{1, 2}), M: linear.Identity{}, B: ones(1)},
		} {
			if _, err := e.New(v).Begin(p); err == nil {
				t.Errorf("accepts b of %d, x of %d", len(p.B), len(p.X))
			}
		}
	})
}

// Memory is what Begin takes with a preconditioner, to within the 3 % by
// which the allocator rounds sizes up.
func TestMemory(t *testing.T) {
	a := plate(200)
	each(t, func(t *testing.T, e krylov.Entry) {
		v, err := linear.Resolve(e.Name, e.Params, nil)
		if err != nil {
			t.Fatal(err)
		}
		s, b := e.New(v), ones(40000)
		var before, after runtime.MemStats
		runtime.ReadMemStats(&before)
		if _, err := s.Begin(krylov.Problem{A: a, M: halving{}, B: b}); err != nil {
			t.Fatal(err)
		}
		runtime.ReadMemStats(&after)
		got, want := float64(after.TotalAlloc-before.TotalAlloc), float64(e.Memory(40000, v))
		if got > 1.03*want || got < 0.99*want {
			t.Errorf("takes %.0f bytes, says %.0f", got, want)
		}
	})
}

// halving is the preconditioner M = 2 I.
type halving struct{}

func (halving) Apply(dst, x []float64) { linear.Scale(dst, 0.5, x) }

func (h halving) ApplyT(dst, x []float64) { h.Apply(dst, x) }

// M = 2 I changes nothing but the scale: same iterates as without. (Richardson's
// step has no length of its own; TestRichardsonScales.)
func TestScaledIdentity(t *testing.T) {
	a, b := plate(9), ones(81)
	each(t, func(t *testing.T, e krylov.Entry) {
		if e.Name == "richardson" {
			return
		}
		v, err := linear.Resolve(e.Name, e.Params, nil)
		if err != nil {
			t.Fatal(err)
		}
		s, plain := e.New(v), begun(t, a, b, nil, e.Name)
		if _, err := s.Begin(krylov.Problem{A: a, M: halving{}, B: b}); err != nil {
			t.Fatal(err)
		}
		for range 7 {
			if _, err := s.Step(); err != nil {
				t.Fatal(err)
			}
			plain.step()
		}
		x, y := make([]float64, 81), plain.x()
		s.Solution(x)
		for i := range x {
			near(t, "x_i", x[i], y[i], 1e-11)
		}
	})
}

// A product that is not a number ends the trial with a typed event, and the
// iterate and its residual stay those of the last good step.
func TestNotANumber(t *testing.T) {
	a := plate(6)
	for _, bad := range []float64{math.NaN(), math.Inf(1)} {
		each(t, func(t *testing.T, e krylov.Entry) {
			products := 0
			f := symmetric{linear.Func{N: 36, Do: func(dst, x []float64) {
				a.Apply(dst, x)
				if products++; products > 3 {
					dst[7] = bad
				}
			}}}
			r := begun(t, f, ones(36), nil, e.Name)
			r.until(0, 30)
			if _, ok := r.event(trace.NonFinite); !ok || !r.last.Done {
				t.Fatalf("last %+v, events %+v", r.last, r.seen)
			}
			x, res := r.x(), make([]float64, 36)
			linear.Residual(res, a, x, r.b)
			near(t, "residual of the kept iterate", r.last.Residual, inNorm(e, a, res), 1e-12)
		})
	}
}

// symmetric is an operator that is its own transpose.
type symmetric struct{ linear.Func }

func (s symmetric) ApplyT(dst, x []float64) { s.Apply(dst, x) }

// inNorm returns the size of a residual in the norm the solver watches without
// a preconditioner.
func inNorm(e krylov.Entry, a *linear.CSR, r []float64) float64 {
	if e.Norm != trace.NormalEquationNorm {
		return linear.Norm2(r)
	}
	w := make([]float64, len(r))
	a.ApplyT(w, r)
	return linear.Norm2(w)
}

func same(x, y float64) bool { return math.Float64bits(x) == math.Float64bits(y) }

func sameVector(t *testing.T, x, y []float64) {
	t.Helper()
	for i := range x {
		if !same(x[i], y[i]) {
			t.Fatalf("entry %d is %g and %g", i, x[i], y[i])
		}
	}
}
