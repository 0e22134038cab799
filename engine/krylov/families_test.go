package krylov_test

import (
	"math"
	"testing"

	"dwindle/engine/linear"
)

// Each solver on two open matrices, to 1e-8 by its own number and by a fresh
// residual. bfwa62 (κ 553) and west0067 (κ 130, 65 zeros on the diagonal) are
// not symmetric; hangGlider_2 is indefinite.
func TestFamiliesOnOpenMatrices(t *testing.T) {
	for pairing, files := range map[string][]string{
		"richardson+ssor":  {"pts5ldd03.mtx", "bcsstk01.rsa"},
		"chebyshev+jacobi": {"pts5ldd03.mtx", "494_bus.mtx"},
		"cr+jacobi":        {"494_bus.mtx", "bcsstk16.mtx.gz"},
		"fcg:5+jacobi":     {"494_bus.mtx", "bcsstk16.mtx.gz"},
		"dcg:4+jacobi":     {"494_bus.mtx", "bcsstk16.mtx.gz"},
		"symmlq+jacobi":    {"494_bus.mtx", "bcsstk16.mtx.gz"},
		"cgnr":             {"bfwa62.mtx", "west0067.rua"},
		"cgne":             {"bfwa62.mtx", "west0067.rua"},
		"lsqr":             {"bfwa62.mtx", "west0067.rua"},
		"lsmr":             {"bfwa62.mtx", "west0067.rua"},
	} {
		for _, file := range files {
			t.Run(pairing+" "+file, func(t *testing.T) {
				a := opened(t, file)
				r := begun(t, a, ones(a.NRows), nil, pairing)
				for r.truth() > 1e-8*linear.Norm2(r.b) && !r.last.Done && r.steps < 10000 {
					r.step()
				}
				got := r.truth() / linear.Norm2(r.b)
				t.Logf("%d steps, true residual %.2e", r.steps, got)
				if !(got <= 1e-8) || len(r.seen) != 0 {
					t.Errorf("%d steps, true residual %.2e, events %+v", r.steps, got, r.seen)
				}
			})
		}
	}
}

// Strakoš's matrix (Linear Algebra Appl. 154–156 (1991) 535–549) with n = 48,
// λ = 0.1 … 1000, ρ = 0.8: in exact arithmetic every method ends in 48 steps.
// Rounding delays the short recurrences to 1e-10 of the error far beyond
// (143 steps of cg with NumPy, 45 with full reorthogonalisation, which gmres
// has); with ρ = 1 there is next to no delay.
func TestStrakos(t *testing.T) {
	const n = 48
	matrix := func(rho float64) *linear.CSR {
		d := make([]float64, n)
		for i := range d {
			k := float64(i)
			d[i] = 0.1 + k/(n-1)*(1000-0.1)*math.Pow(rho, n-1-k)
		}
		return diagonal(d...)
	}
	a, b := matrix(0.8), make([]float64, n)
	near(t, "λ₂", a.At(1, 1), 0.1007413070, 1e-10)
	want := make([]float64, n)
	for i := range b {
		b[i] = 1 / math.Sqrt(n)
		want[i] = b[i] / a.At(i, i)
	}
	steps := func(solver string) int {
		r := begun(t, a, b, nil, solver)
		start := energyOf(a, make([]float64, n), want)
		for energyOf(a, r.x(), want) > 1e-10*start && r.steps < 400 {
			r.step()
		}
		return r.steps
	}
	got := map[string]int{}
	for _, solver := range []string{"cg", "fcg", "cr", "minres", "symmlq", "gmres:48", "dcg:10"} {
		got[solver] = steps(solver)
	}
	t.Logf("steps: %v", got)
	for _, solver := range []string{"cg", "fcg", "cr", "minres", "symmlq"} {
		if got[solver] <= 2*n || got[solver] > 200 {
			t.Errorf("%s: %d steps, a delay beyond %d expected", solver, got[solver], 2*n)
		}
	}
	if got["gmres:48"] > n {
		t.Errorf("gmres: %d steps", got["gmres:48"])
	}
	if got["dcg:10"] >= got["cg"] {
		t.Errorf("dcg:10 takes %d steps, cg %d", got["dcg:10"], got["cg"])
	}
}
