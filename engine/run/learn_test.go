package run

import (
	"context"
	"math"
	"slices"
	"testing"
	"time"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// moved runs one pairing on diag(values) x = 1 to its end.
func moved(t *testing.T, values []float64, pairing string, l Limits) trace.History {
	t.Helper()
	var e []linear.Entry
	b := make([]float64, len(values))
	for i, v := range values {
		b[i] = 1
		e = append(e, linear.Entry{I: i, J: i, V: v})
	}
	l.Target, l.Iterations = Target{Rule: StopRHS, Tol: 1e-8}, 1000
	bench := NewBench(linear.System{A: linear.FromEntries(len(values), len(values), e), B: b}, l, 0, nil)
	m, err := Parse(pairing)
	if err != nil {
		t.Fatal(err)
	}
	trial := bench.Add(m)
	ctx, cancel := context.WithTimeout(context.Background(), time.Minute)
	defer cancel()
	go bench.Run(ctx)
	bench.WaitEnded(ctx)
	return trial.History()
}

// spread are n values from 1 to 2, after others.
func spread(n int, others ...float64) []float64 {
	for i := range n {
		others = append(others, 1+float64(i)/float64(n-1))
	}
	return others
}

// α and β of every step are kept, of the methods whose they are; what is made
// of them is there at the end.
func TestCoefficientsAreKept(t *testing.T) {
	h := moved(t, spread(100, 1e-3), "cg+none", Limits{})
	if len(h.Alphas) != h.Iterations || len(h.Betas) != h.Iterations {
		t.Fatalf("%d and %d coefficients of %d steps", len(h.Alphas), len(h.Betas), h.Iterations)
	}
	for i, r := range h.Records[1:] {
		if h.Alphas[i] != r.Alpha || h.Betas[i] != r.Beta {
			t.Errorf("step %d: %g, %g kept, %g, %g recorded", i, h.Alphas[i], h.Betas[i], r.Alpha, r.Beta)
		}
	}
	if !slices.ContainsFunc(h.Locks, func(l trace.Lock) bool { return math.Abs(l.Value-1e-3) < 1e-9 && l.Copies == 1 }) {
		t.Errorf("locks: %+v", h.Locks)
	}
	w := h.Without
	if len(w) != 1 || w[0].What != trace.Deflated || w[0].Removed != 1 || w[0].Iterations >= h.Iterations {
		t.Errorf("without: %+v", w)
	}
	for _, other := range []string{"minres+none", "dcg:2+none", "gmres:30+none"} {
		if g := moved(t, spread(100), other, Limits{}); g.Alphas != nil || g.EnergyErrors != nil || g.Locks != nil {
			t.Errorf("%s: %d coefficients, %d errors, %d locks", other, len(g.Alphas), len(g.EnergyErrors), len(g.Locks))
		}
	}
}

// The energy errors enclose the true ones, √Σ (b_i − λ_i x_i)²/λ_i in closed
// form at the start; with the smallest eigenvalue given, they are proved.
func TestEnergyErrorsOfATrial(t *testing.T) {
	values := spread(100, .1, .2)
	for _, l := range []Limits{{}, {Smallest: .1}} {
		h := moved(t, values, "cg+none", l)
		if h.EnergyProved != (l.Smallest > 0) {
			t.Errorf("limits %+v: proved %v", l, h.EnergyProved)
		}
		last := math.Inf(1)
		for i, e := range h.EnergyErrors {
			if !(e.Lower <= e.Upper) || e.Lower > last || i == 0 && (e.Lower > 1 || e.Upper < 1) {
				t.Errorf("it %d: [%g, %g] after %g", e.Iter, e.Lower, e.Upper, last)
			}
			last = e.Lower
		}
		if n := len(h.EnergyErrors); n < h.Iterations/2 {
			t.Errorf("%d errors of %d iterations", n, h.Iterations)
		}
	}
	if h := moved(t, spread(20), "cg+none", Limits{NoNorm: true}); h.EnergyErrors != nil || h.Locks != nil || len(h.Alphas) == 0 {
		t.Errorf("A is said to have no energy norm: %d errors, %d locks", len(h.EnergyErrors), len(h.Locks))
	}
	if h := moved(t, spread(20, -1), "cg+none", Limits{}); h.EnergyErrors != nil || h.Locks != nil {
		t.Errorf("an indefinite matrix has no energy norm: %d errors, %d locks", len(h.EnergyErrors), len(h.Locks))
	}
}

// Whole cycles of gmres leave their harmonic Ritz values, which lie within the
// spectrum of a definite matrix.
func TestHarmonicValuesOfATrial(t *testing.T) {
	h := moved(t, spread(100, 1e-3), "gmres:5+none", Limits{})
	if len(h.Harmonic) != 5 {
		t.Fatalf("%d harmonic Ritz values of cycles of 5", len(h.Harmonic))
	}
	for _, v := range h.Harmonic {
		if math.Abs(imag(v)) > 1e-9 || real(v) < 1e-3*(1-1e-6) || real(v) > 2+1e-6 {
			t.Errorf("harmonic Ritz value %v outside [0.001, 2]", v)
		}
	}
}
