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

// Row 16: the condition is almost all scaling: arc130 has 6.1e10, equilibrated
// 23 [V].
func TestNeed16AlmostAllScaling(t *testing.T) {
	v := ended(t, openFile(t, "arc130.rua"), Options{Pairs: []string{"scale/gmres:30+none"}, RHS: "ones"})
	f := mustSay(t, v, "row-scaling", diagnose.OnSystem, diagnose.Drag, inspect.Measured, "almost all scaling", "equilibrated")
	within(t, "the condition", evidence(t, f, "condition of A").Value, 6.054211e10, 0.05)
	if k := evidence(t, f, "after equilibration").Value; k < 22.96/2 || k > 2*22.96 {
		t.Errorf("after equilibration it is %g, [V] 22.96", k)
	}
	silent(t, v, "near-null", "mechanism")
}

// Row 17: rows of the identity outside the physical spectrum: bcsstk16 has 74;
// κ 4.94e9 with them, 3.11e3 without; cg takes 463 iterations (b = 1, 1e-6),
// without them 283 [V].
func TestNeed17RowsOfTheIdentity(t *testing.T) {
	v := ended(t, openFile(t, "bcsstk16.mtx.gz"), Options{Pairs: []string{"cg+none", "cg+jacobi"}, RHS: "ones", Tol: 1e-6})
	f := mustSay(t, v, "singleton-rows", diagnose.OnSystem, diagnose.Drag, inspect.Measured, "74 decoupled rows", "4.94e+09", "3.11e+03")
	if f.Evidence[0].Value != 74 || len(f.Evidence[0].Rows) == 0 {
		t.Errorf("evidence %v", f.Evidence[0])
	}
	if h := trial(t, v, "cg+none"); h.Iterations < 454 || h.Iterations > 472 {
		t.Errorf("cg takes %d, [V] 463", h.Iterations)
	}
	// Row 19: κ would allow 5e5 iterations, the count is explained by the rest.
	g := mustSay(t, v, "condition", "cg+none", diagnose.Note, inspect.Estimated, "would allow", "the rest has")
	within(t, "the condition of the rest", evidence(t, g, "of the rest").Value, 3109.944, 0.02)
	for _, p := range f.Predicts {
		if p.Quantity == "iterations" && (p.Value < 0.75*283 || p.Value > 1.25*283) {
			t.Errorf("%g iterations predicted without those rows, [V] 283", p.Value)
		}
	}
	silent(t, v, "divergence", "near-null", "mechanism")
}

// Row 18: conditions imposed by replacing rows: symmetric but for rows of the
// identity whose columns still hold entries.
func TestNeed18ReplacedRows(t *testing.T) {
	a := matrixOf(t, "sample:plate:20")
	fixed := map[int]bool{}
	for i := range 20 {
		fixed[i*20+7] = true
	}
	var e []linear.Entry
	for _, q := range entriesOf(a) {
		switch {
		case !fixed[q.I]:
			e = append(e, q)
		case q.I == q.J:
			e = append(e, linear.Entry{I: q.I, J: q.I, V: 1})
		}
	}
	v := ended(t, saved(t, "replaced.mtx", fromEntries(a.NRows, e)), Options{Pairs: []string{"cg+none", "gmres:30+ilu:0"}, RHS: "ones"})
	f := mustSay(t, v, "row-replaced", diagnose.OnSystem, diagnose.Drag, inspect.Measured, "20 rows of the identity form", "columns")
	for _, r := range f.Evidence[0].Rows {
		if !fixed[r] {
			t.Errorf("row %d (from 0) was not replaced", r)
		}
	}
	mustSay(t, v, "outside-assumptions", "cg+none", diagnose.Blocker, inspect.Proved, "symmetric")
	silent(t, ended(t, "sample:duct:12", Options{Pairs: []string{"gmres:30+none"}}), "row-replaced")
}

// Row 19: where κ explains the count, it is said: Jacobi on bcsstk16 has
// κ(M⁻¹A) = 802 [V], which bounds cg by half its root times ln(2/tol).
func TestNeed19ConditionExplainsTheCount(t *testing.T) {
	v := ended(t, openFile(t, "bcsstk16.mtx.gz"), Options{Pairs: []string{"cg+jacobi"}, RHS: "ones", Tol: 1e-8})
	f := mustSay(t, v, "condition", "cg+jacobi", diagnose.Note, inspect.Estimated, "explains its count")
	within(t, "the condition", evidence(t, f, "condition of").Value, 802.049, 0.02)
	within(t, "the bound", evidence(t, f, "it bounds").Value, math.Sqrt(802.049)/2*math.Log(2/1e-8), 0.02)
}

// Row 20: isolated small eigenvalues. [1,2] with 1e-4, 2e-4, 5e-4 beside it
// takes 29 iterations to 1e-8, without them 11 [V].
func TestNeed20IsolatedSmallEigenvalues(t *testing.T) {
	d := []float64{1e-4, 2e-4, 5e-4}
	for i := range 200 {
		d = append(d, 1+float64(i)/199)
	}
	v := ended(t, diagonalFile(t, d...), Options{Pairs: []string{"cg+none"}, RHS: "ones"})
	f := mustSay(t, v, "small-outliers", "cg+none", diagnose.Drag, inspect.Estimated, "3 ", "deflat")
	if h := only(t, v); h.Iterations < 27 || h.Iterations > 31 {
		t.Errorf("cg takes %d, [V] 29", h.Iterations)
	}
	if len(f.Predicts) == 0 || f.Predicts[0].Value < 9 || f.Predicts[0].Value > 13 {
		t.Errorf("predicted %v, [V] 11 without them", f.Predicts)
	}
	if len(f.Try) == 0 || !strings.HasPrefix(f.Try[0], "dcg:3") {
		t.Errorf("tries %v", f.Try)
	}
	even := ended(t, diagonalFile(t, d[3:]...), Options{Pairs: []string{"cg+none"}, RHS: "ones"})
	silent(t, even, "small-outliers", "plateau")
}

// Row 22: far from normal: olm1000 has departure 0.994 of ‖A‖_F [V]; its field
// of values holds zero.
func TestNeed22NonNormal(t *testing.T) {
	v := ended(t, openFile(t, "olm1000.mtx"), Options{Pairs: []string{"gmres:30+none"}, RHS: "ones", Iterations: 300})
	f, ok := finding(v, "non-normal", diagnose.OnSystem)
	if !ok || !strings.Contains(f.Claim, "far from normal") || !strings.Contains(f.Claim, "eigenvalues do not tell") {
		t.Fatalf("not told:%s", rules(v))
	}
	within(t, "the departure from normality", v.Facts.Study.Normality.Henrici, 0.994, 0.005)
	if !v.Facts.Study.Normality.FieldHoldsZero {
		t.Error("the field of values holds zero, and is not said to")
	}
	silent(t, ended(t, "sample:plate:20", Options{Pairs: []string{"cg+none"}}), "non-normal")
}

// Row 23: iterations grow with the mesh: cg with its diagonal on the five-point
// operator grows as n^0.5 (its condition is that of A, cot^2(pi/(2(m+1)))).
func TestNeed23GrowthWithTheMesh(t *testing.T) {
	v := ended(t, "sample:plate:60", Options{Pairs: []string{"cg+jacobi"}})
	f := mustSay(t, v, "mesh-growth", diagnose.OnSystem, diagnose.Note, inspect.Measured, "grow as n^")
	if p := evidence(t, f, "exponent").Value; p < 0.4 || p > 0.6 {
		t.Errorf("exponent %g, want about 0.5", p)
	}
	if len(f.Try) == 0 || !strings.Contains(f.Try[0], "amg") {
		t.Errorf("tries %v", f.Try)
	}
	silent(t, ended(t, "sample:feeder", Options{Pairs: []string{"cg+jacobi"}}), "mesh-growth")
}

// Row 28: a tiny residual, a wrong answer: the Hilbert matrix of order 10 has
// condition 1.6e13 (exact integer inverse), so that a backward error near
// rounding leaves three or four digits.
func TestNeed28SmallResidualWrongAnswer(t *testing.T) {
	const n = 10
	rows := make([][]float64, n)
	for i := range rows {
		rows[i] = make([]float64, n)
		for j := range rows[i] {
			rows[i][j] = 1 / float64(i+j+1)
		}
	}
	v := ended(t, dense(t, rows...), Options{Pairs: []string{"cg+none"}, RHS: "made"})
	h := only(t, v)
	if h.Stop != trace.Converged || !(h.Error > 1e-4) {
		t.Fatalf("%s with error %g", h.Stop, h.Error)
	}
	f := mustSay(t, v, "few-correct-digits", "cg+none", diagnose.Drag, inspect.Measured, "the answer has an error of")
	within(t, "the error", evidence(t, f, "relative error").Value, h.Error, 1e-12)
	silent(t, ended(t, "sample:plate:20", Options{Pairs: []string{"cg+none"}, RHS: "made"}), "few-correct-digits")
}

// Row 34: coupled a thousand times more strongly one way; and coefficients that
// jump.
func TestNeed34AnisotropyAndJumps(t *testing.T) {
	v := ended(t, "sample:plate:40,aniso=1e3", Options{Pairs: []string{"cg+jacobi"}})
	f := mustSay(t, v, "anisotropy", diagnose.OnSystem, diagnose.Note, inspect.Measured, "far more strongly one way")
	within(t, "the median ratio", evidence(t, f, "median ratio").Value, 1e3, 0.01)
	if s := evidence(t, f, "share of rows").Value; s < 0.9 {
		t.Errorf("said of %g of the rows", s)
	}
	v = ended(t, "sample:plate:40,jump=1e4", Options{Pairs: []string{"cg+jacobi"}})
	mustSay(t, v, "coefficient-jump", diagnose.OnSystem, diagnose.Note, inspect.Measured, "jump by up to")
	silent(t, v, "anisotropy")
	silent(t, ended(t, "sample:plate:40", Options{Pairs: []string{"cg+jacobi"}}), "anisotropy", "coefficient-jump")
}
