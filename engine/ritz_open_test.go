package engine

import (
	"context"
	"math"
	"strings"
	"testing"

	"dwindle/engine/linear"
	"dwindle/engine/load"
)

// bcsstk16, b of ones, to 1e-6: 74 rows are decoupled with diagonal 1. What cg
// would need without them is foretold from its own coefficients, within a
// quarter of what it takes on the system without these rows (NumPy: 463 and
// 283).
func TestSingletonRowsAreForetold(t *testing.T) {
	path := openFile(t, "bcsstk16.mtx.gz")
	v := ended(t, path, Options{Pairs: []string{"cg+none"}, Tol: 1e-6})
	h := trialOf(t, v, "cg+none")
	f := must(t, v, "singleton-rows", "")
	reduced := ended(t, written(t, withoutSingletons(t, path), 0), Options{Pairs: []string{"cg+none"}, Tol: 1e-6, RHS: "ones"})
	took := trialOf(t, reduced, "cg+none").Iterations
	foretold := 0
	for _, e := range f.Evidence {
		if e.Quantity == "iterations without these rows" {
			foretold = int(e.Value)
		}
	}
	t.Logf("%d its; foretold %d without the rows, %d measured: %s", h.Iterations, foretold, took, f.Claim)
	if !near(h.Iterations, 463, .05) || !near(took, 283, .05) || !near(foretold, took, .25) {
		t.Errorf("%d its, foretold %d without the rows, measured %d", h.Iterations, foretold, took)
	}
	quiet(t, v, "small-outliers") // deflation would take one of 74 equal eigenvalues out
	quiet(t, reduced, "singleton-rows", "small-outliers")
}

// withoutSingletons drops the rows and columns that hold the diagonal alone.
func withoutSingletons(t *testing.T, path string) *linear.CSR {
	t.Helper()
	sys, err := load.File(context.Background(), path, func(float64) {})
	if err != nil {
		t.Fatal(err)
	}
	a := sys.Matrix()
	at, kept := make([]int, a.NRows), 0
	for i := range a.NRows {
		at[i] = -1
		if cols, _ := a.Row(i); len(cols) > 1 {
			at[i] = kept
			kept++
		}
	}
	var e []linear.Entry
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, c := range cols {
			if at[i] >= 0 && at[c] >= 0 {
				e = append(e, linear.Entry{I: at[i], J: at[c], V: vals[k]})
			}
		}
	}
	if kept != 4810 {
		t.Fatalf("%d rows left, known 4810", kept)
	}
	return linear.FromEntries(kept, kept, e)
}

// The condition of bcsstk16 would allow half a million iterations, that of the
// rest explains the count; that of D⁻¹A (NumPy: 802.049, which bounds 205 its)
// explains it with jacobi.
func TestConditionExplainsTheCount(t *testing.T) {
	path := openFile(t, "bcsstk16.mtx.gz")
	f := must(t, ended(t, path, Options{Pairs: []string{"cg+none"}, Tol: 1e-6}), "condition", "cg+none")
	if !strings.Contains(f.Claim, "1 eigenvalue makes the condition, the rest has 3.11e+03") {
		t.Error(f.Claim)
	}
	f = must(t, ended(t, path, Options{Pairs: []string{"cg+jacobi"}, Tol: 1e-6}), "condition", "cg+jacobi")
	if !strings.Contains(f.Claim, "explains its count") || math.Abs(f.Evidence[0].Value-802.049) > 1 || math.Abs(f.Evidence[1].Value-206) > 1 {
		t.Errorf("%s %+v", f.Claim, f.Evidence)
	}
}

// Systems on which cg with jacobi has neither plateau nor delay, or outliers.
func TestRitzRulesAreQuiet(t *testing.T) {
	for _, file := range []string{"pts5ldd03.mtx", "can_24.psa", "bcsstk16.mtx.gz"} {
		v := ended(t, openFile(t, file), Options{Pairs: []string{"cg+jacobi"}, Tol: 1e-6})
		quiet(t, v, "plateau", "small-outliers", "lost-orthogonality", "superlinear", "few-correct-digits")
	}
}
