package engine

import (
	"math"
	"strings"
	"testing"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// Row 2: cg on a nonsymmetric matrix. I with a_12 = 1 has all eigenvalues 1,
// yet 30 steps of cg from b = 1 give (-0.481, 2.144, 2.144) [V].
func TestNeed2CgOnNonsymmetric(t *testing.T) {
	path := dense(t, []float64{1, 1, 0}, []float64{0, 1, 0}, []float64{0, 0, 1})
	s := Open(t.Context(), path, Options{Pairs: []string{"cg+none"}, RHS: "ones", Iterations: 30, Threads: 1})
	defer s.Close()
	if err := s.Wait(t.Context()); err != nil {
		t.Fatal(err)
	}
	f := mustSay(t, s.Snapshot(), "outside-assumptions", "cg+none", diagnose.Blocker, inspect.Proved, "needs a symmetric A")
	if e := f.Evidence[0]; len(e.Rows) < 2 || e.Rows[0]+e.Rows[1] != 1 {
		t.Errorf("the asymmetry is laid to rows %v, want 0 and 1", e.Rows)
	}
	for i, want := range []float64{-0.48101216, 2.14430745, 2.14430745} {
		within(t, "an unknown of cg's answer", s.Document().Solution[i], want, 1e-6)
	}
	silent(t, s.Snapshot(), "divergence", "accuracy-floor", "stopping-rules")
}

// Row 3: pure Neumann conditions. 8x8 cells, b = e1: an eighth of b is out of
// reach; cg's residual falls to 0.3559 at it 9, then grows by decades (2.7e8 at
// its height in NumPy); without the mean of b it converges [V].
func TestNeed3GrowthInTheNullSpace(t *testing.T) {
	path := saved(t, "neumann.mtx", neumann(8))
	v := ended(t, path, Options{Pairs: []string{"cg+none", "project/cg+none", "minres+none"}, RHS: "unit:1", Iterations: 200})
	f := mustSay(t, v, "unreachable-rhs", diagnose.OnSystem, diagnose.Blocker, inspect.Proved, "0.125")
	within(t, "the unreachable part", f.Evidence[0].Value, 0.125, 1e-12)
	g := mustSay(t, v, "null-space-growth", "cg+none", diagnose.Drag, inspect.Measured, "grows to", "null space")
	within(t, "the smallest residual", evidence(t, g, "smallest").Value, 0.35589639635654, 1e-6)
	if last := evidence(t, g, "last").Value; !(last > 1e4) {
		t.Errorf("it grows to %g only", last)
	}
	if h := trial(t, v, "minres+none"); h.Stop != trace.LeastSquares {
		t.Errorf("minres ends %s", h.Stop)
	}
	silent(t, v, "divergence", "restart-stagnation", "accuracy-floor", "false-convergence")
	consistent := ended(t, path, Options{Pairs: []string{"cg+none"}, RHS: "made"})
	silent(t, consistent, "unreachable-rhs", "null-space-growth")
}

// neumann is the cell-centred Laplacian of n by n cells with no flow through
// the rim.
func neumann(n int) *linear.CSR {
	var e []linear.Entry
	link := func(p, q int) {
		e = append(e, linear.Entry{I: p, J: p, V: 1}, linear.Entry{I: q, J: q, V: 1},
			linear.Entry{I: p, J: q, V: -1}, linear.Entry{I: q, J: p, V: -1})
	}
	for i := range n {
		for j := range n {
			if i+1 < n {
				link(i*n+j, (i+1)*n+j)
			}
			if j+1 < n {
				link(i*n+j, i*n+j+1)
			}
		}
	}
	return fromEntries(n*n, e)
}

// Row 4: the four kinds of breakdown of bicgstab, each on a system whose
// vanishing quantity is zero by hand, in numbers that binary holds exactly.
func TestNeed4FourBreakdowns(t *testing.T) {
	for _, c := range []struct {
		what, path, b string
		quantity      string // empty: the lucky half step
		words         string
	}{
		// s = 0 after the half step of the second iteration, ‖s‖ = 1.4e-17 [V]
		{"lucky", diagonalFile(t, 2, 3, 2, 3, 2, 3), vector(t, 1, 2, 2, 3, 3, 4), "", "no breakdown"},
		// r̂ = e1: v = (1,1,0), s = -e2, t = (0,-1,-1), ω = 1/2, r = (0,-1/2,1/2): r̂'r = 0
		{"rho", dense(t, []float64{1, 0, 0}, []float64{1, 1, 0}, []float64{0, 1, 1}), vector(t, 1, 0, 0), "rho", "orthogonal to the residual"},
		// r̂ = (1,1/2,1,0): α = 3, s = (-2,2,1,3), t = A s has t's = 4-4+3-3 = 0
		{"omega", dense(t, []float64{1, 0, 0, 0}, []float64{0, -1, 0, 0}, []float64{0, 0, 0, 1}, []float64{0, 0, -1, 0}),
			vector(t, 1, 0.5, 1, 0), "omega", "imaginary"},
		// A skew: r̂'A r̂ = 0
		{"alpha", dense(t, []float64{0, 1}, []float64{-1, 0}), vector(t, 1, 0), "rhat'v", "no step length"},
	} {
		v := ended(t, c.path, Options{Pairs: []string{"bicgstab+none"}, RHS: c.b})
		h := only(t, v)
		if c.quantity == "" {
			mustSay(t, v, "breakdown", "bicgstab+none", diagnose.Note, inspect.Measured, "half step", c.words)
			if h.Stop != trace.Converged {
				t.Errorf("%s: ends %s", c.what, h.Stop)
			}
			continue
		}
		f := mustSay(t, v, "breakdown", "bicgstab+none", diagnose.Drag, inspect.Measured, c.quantity+" = ", c.words)
		if h.Stop != trace.BrokeDown || math.Abs(f.Evidence[0].Value) > 1e-15 || f.Evidence[0].Quantity != c.quantity {
			t.Errorf("%s: %s by %v", c.what, h.Stop, f.Evidence)
		}
	}
}

// Row 5: restarted gmres stands still. Embree's matrix (SIAM Rev. 45 (2003)
// 259-266): gmres(1) converges in three steps, gmres(2) stalls at 1.72532 of
// ‖r0‖ = 4.58258 [V].
func TestNeed5RestartsStandStill(t *testing.T) {
	path := dense(t, []float64{1, 1, 1}, []float64{0, 1, 3}, []float64{0, 0, 1})
	v := ended(t, path, Options{Pairs: []string{"gmres:2+none", "gmres:1+none"}, RHS: vector(t, 2, -4, 1), Iterations: 200})
	f := mustSay(t, v, "restart-stagnation", "gmres:2+none", diagnose.Drag, inspect.Measured, "stands still", "gmres:1+none solves it")
	within(t, "the residual it stands at", trial(t, v, "gmres:2+none").TrueResidual*math.Sqrt(21), 1.72532, 1e-5)
	if h := trial(t, v, "gmres:1+none"); h.Stop != trace.Converged || len(f.Try) == 0 || f.Try[0] != "gmres:1+none" {
		t.Errorf("gmres:1 ends %s; tries %v", h.Stop, f.Try)
	}
	if e := evidence(t, f, "factor of the last cycle"); !(e.Value > 0.999) {
		t.Errorf("the last cycle's factor is %g", e.Value)
	}
}

// Row 10: one-way Gauss-Seidel in cg, 16x16 Poisson: never converges; none
// takes 28, the symmetric form 19 [V].
func TestNeed10OneWaySweepsInCg(t *testing.T) {
	v := ended(t, "sample:plate:16", Options{Pairs: []string{"cg+gs", "cg+none", "cg+sgs"}, RHS: "ones"})
	f := mustSay(t, v, "preconditioner-not-spd", "cg+gs", diagnose.Blocker, inspect.Measured, "not symmetric")
	if e := evidence(t, f, "asymmetry"); !(e.Value > 0.01) {
		t.Errorf("the probe shows %g", e.Value)
	}
	for pairing, want := range map[string]int{"cg+none": 28, "cg+sgs": 19} {
		if h := trial(t, v, pairing); h.Stop != trace.Converged || h.Iterations < want-1 || h.Iterations > want+1 {
			t.Errorf("%s: %s in %d, want %d", pairing, h.Stop, h.Iterations, want)
		}
	}
	if h := trial(t, v, "cg+sgs"); !(h.Probe.Asymmetry < 1e-13) || !(h.Probe.Nonlinear < 1e-13) || h.Probe.Unrepeatable != 0 {
		t.Errorf("the probe of sgs shows %+v", *h.Probe)
	}
	if !strings.Contains(f.Advice, "has solved the system") {
		t.Errorf("the advice does not know that another trial solved it: %s", f.Advice)
	}
}

// Row 21: symmetric indefinite, eigenvalues in [-4,-1] and [1,4]: two steps of
// minres gain at least a factor 0.6 (Greenbaum 1997, section 3.1: the square
// roots of 16 and 1 make (4-1)/(4+1)).
func TestNeed21IndefiniteSpectrum(t *testing.T) {
	var d []float64
	for i := range 40 {
		d = append(d, 1+3*float64(i)/39, -1-3*float64(i)/39)
	}
	v := ended(t, diagonalFile(t, d...), Options{Pairs: []string{"cg+none", "minres+none"}, RHS: "ones"})
	mustSay(t, v, "outside-assumptions", "cg+none", diagnose.Blocker, inspect.Proved, "positive definite A")
	f := mustSay(t, v, "indefinite-spectrum", diagnose.OnSystem, diagnose.Note, inspect.Measured,
		"40 eigenvalues are negative: [-4, -1] beside [1, 4]", "at least a factor 0.6 every two steps")
	if got := evidence(t, f, "negative eigenvalues").Value; got != 40 {
		t.Errorf("%g negative eigenvalues, want 40", got)
	}
	within(t, "the factor of two steps", evidence(t, f, "factor of two steps").Value, 0.6, 1e-12)
	h := trial(t, v, "minres+none")
	if bound := 2 * math.Log(2/1e-8) / -math.Log(0.6); h.Stop != trace.Converged || float64(h.Iterations) > bound {
		t.Errorf("minres ends %s at %d, the bound is %.0f", h.Stop, h.Iterations, bound)
	}
}
