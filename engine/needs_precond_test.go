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

// Row 12: incomplete Cholesky breaks down on a positive definite matrix
// (Kershaw 1978): pivots 3, 5/3, 0.6, -5; a shift of 0.3 of the diagonal works,
// 0.1 does not [V].
func TestNeed12ShiftThatWorks(t *testing.T) {
	v := ended(t, "sample:kershaw", Options{Pairs: []string{"cg+ic:0"}, RHS: "ones"})
	f := mustSay(t, v, "pivot", "cg+ic:0", diagnose.Note, inspect.Measured, "row 4", "pivot -5", "positive definite, proved", "attempts", "takes")
	if e := f.Evidence[0]; math.Abs(e.Value+5) > 1e-12 || len(e.Rows) != 1 || e.Rows[0] != 3 {
		t.Errorf("pivot %g in row %v (from 0), want -5 in row 3", e.Value, e.Rows)
	}
	if s := evidence(t, f, "shift").Value; !(s > 0.1 && s < 0.3) {
		t.Errorf("the shift is %g, [V] 0.1 fails and 0.3 works", s)
	}
}

// Row 13: west0479 has 471 zeros among 479 diagonal entries [V]; matched, it
// has none.
func TestNeed13ZeroDiagonal(t *testing.T) {
	v := ended(t, openFile(t, "west0479.mtx"), Options{Pairs: []string{"gmres:30+ilu:0", "match/gmres:30+ilu:0"}, Iterations: 500})
	f := mustSay(t, v, "zero-diagonal", diagnose.OnSystem, diagnose.Drag, inspect.Proved, "471 of 479", "ilu:0")
	if f.Evidence[0].Value != 471 || len(f.Evidence[0].Rows) == 0 {
		t.Errorf("evidence %v", f.Evidence[0])
	}
	if h := trial(t, v, "gmres:30+ilu:0"); h.Stop != trace.Refused && h.Stop != trace.BrokeDown {
		t.Errorf("ilu:0 ends %s", h.Stop)
	}
	if h := trial(t, v, "match/gmres:30+ilu:0"); h.Stop == trace.Refused || h.Stop == trace.BrokeDown {
		t.Errorf("matched, it ends %s: %s", h.Stop, h.Reason)
	}
	silent(t, v, "pivot")
	regular := ended(t, "sample:plate:10", Options{Pairs: []string{"cg+none"}})
	silent(t, regular, "zero-diagonal")
}

// Row 15: M where M⁻¹ was meant. A diagonal over six decades with weak
// couplings: with its inverse cg takes a few iterations, with itself far more
// than with nothing.
func TestNeed15TheWrongWayRound(t *testing.T) {
	const n = 200
	var e []linear.Entry
	d, inverse := make([]float64, n), make([]float64, n)
	for i := range d {
		d[i] = math.Pow(10, 3*float64(i)/n)
		inverse[i] = 1 / d[i]
		e = append(e, linear.Entry{I: i, J: i, V: d[i]})
		if i > 0 {
			c := -0.2 * d[i-1]
			e = append(e, linear.Entry{I: i, J: i - 1, V: c}, linear.Entry{I: i - 1, J: i, V: c})
		}
	}
	a := saved(t, "a.mtx", fromEntries(n, e))
	right, wrong := "cg+given:"+diagonalFile(t, inverse...), "cg+given:"+diagonalFile(t, d...)
	v := ended(t, a, Options{Pairs: []string{right, wrong, "cg+none"}, RHS: "ones", Iterations: 2000})
	pairing := trialLike(t, v, 1).Pairing
	mustSay(t, v, "preconditioner-wrong-way", pairing, weightOf(trialLike(t, v, 1)), inspect.Measured, "the wrong way round")
	if other, ok := finding(v, "preconditioner-wrong-way", trialLike(t, v, 0).Pairing); ok {
		t.Errorf("the right way is called wrong: %s", other.Claim)
	}
	good, bad, none := trialLike(t, v, 0), trialLike(t, v, 1), trialLike(t, v, 2)
	if !(good.Iterations < none.Iterations && none.Iterations < bad.Iterations) {
		t.Errorf("right %d, none %d, wrong %d iterations", good.Iterations, none.Iterations, bad.Iterations)
	}
	if p := bad.Probe; !(p.WrongWay < 0.5) || !(p.Distance > 0.7) || !(p.Plain < 0.5) {
		t.Errorf("the probe shows %+v", *p)
	}
	// the other confusion: M⁻¹ in a file that is taken for M
	solve := ended(t, a, Options{Pairs: []string{"cg+solve:" + diagonalFile(t, inverse...)}, RHS: "ones", Iterations: 2000})
	mustSay(t, solve, "preconditioner-wrong-way", "", weightOf(only(t, solve)), inspect.Measured, "solve:d.mtx")
}

func trialLike(t *testing.T, v Snapshot, k int) trace.History {
	t.Helper()
	if k >= len(v.Trials) {
		t.Fatalf("%d trials", len(v.Trials))
	}
	return v.Trials[k].History
}

// weightOf is that of a spoilt trial: a drag if it converged all the same.
func weightOf(h trace.History) diagnose.Weight {
	if h.Stop == trace.Converged {
		return diagnose.Drag
	}
	return diagnose.Blocker
}

// Row 15: a preconditioner that changes nothing: Jacobi on a constant diagonal.
func TestNeed15ChangesNothing(t *testing.T) {
	v := ended(t, "sample:plate:16", Options{Pairs: []string{"cg+none", "cg+jacobi", "cg+sgs"}})
	f := mustSay(t, v, "preconditioner-changes-nothing", "cg+jacobi", diagnose.Note, inspect.Measured, "the diagonal of A is constant")
	if evidence(t, f, "iterations with").Value != evidence(t, f, "iterations without").Value {
		t.Errorf("evidence %v", f.Evidence)
	}
	if f, ok := finding(v, "preconditioner-changes-nothing", "cg+sgs"); ok {
		t.Errorf("false alarm: %s", f.Claim)
	}
	varied := ended(t, "sample:feeder:60", Options{Pairs: []string{"cg+none", "cg+jacobi"}})
	silent(t, varied, "preconditioner-changes-nothing")
}

// Row 35: no fill to drop: the complete factors of a tridiagonal matrix have
// the pattern of A (n − 1 entries below the diagonal and above).
func TestNeed35NothingToDrop(t *testing.T) {
	v := ended(t, "sample:line:2000", Options{Pairs: []string{"gmres:30+ilut:1e-3,10", "richardson+lu"}})
	f := mustSay(t, v, "nothing-dropped", "gmres:30+ilut:1e-3,10", diagnose.Note, inspect.Measured, "next to no fill to drop")
	kept, all := evidence(t, f, "kept").Value, evidence(t, f, "complete").Value
	if kept < 0.8*all || evidence(t, f, "fill").Value > 1.5 {
		t.Errorf("%g of %g entries kept", kept, all)
	}
	v = ended(t, "sample:plate:40", Options{Pairs: []string{"gmres:30+ilut:1e-2,5", "richardson+lu"}})
	silent(t, v, "nothing-dropped")
}

// Row 36: incomplete factors whose solves explode. The ilu:0 of a matrix with
// tiny pivots: [e 1; 1 0] blocks coupled along a line, e = 1e-12.
func TestNeed36UnstableFactors(t *testing.T) {
	const n, small = 40, 1e-12
	var e []linear.Entry
	for i := range n {
		e = append(e, linear.Entry{I: i, J: i, V: small})
		if i+1 < n {
			e = append(e, linear.Entry{I: i, J: i + 1, V: 1}, linear.Entry{I: i + 1, J: i, V: 2})
		}
		if i+3 < n {
			e = append(e, linear.Entry{I: i, J: i + 3, V: 0.5}, linear.Entry{I: i + 3, J: i, V: -0.25})
		}
	}
	v := ended(t, saved(t, "a.mtx", fromEntries(n, e)), Options{Pairs: []string{"gmres:10+ilu:0"}, RHS: "ones", Iterations: 400})
	h := only(t, v)
	t.Logf("%s growth %g: %s", h.Stop, h.Notes.Growth, h.Reason)
	f := mustSay(t, v, "unstable-factors", "gmres:10+ilu:0", diagnose.Drag, inspect.Measured, "ill-conditioned")
	if g := evidence(t, f, "inv(LU)").Value; !(g > 1e8) {
		t.Errorf("growth %g", g)
	}
	silent(t, v, "restart-stagnation", "divergence")
}

// What the file stores is mostly zero, as where the blocks of an element
// are written whole. Left out, each product is of the entries that count.
func TestNeedStoredZeros(t *testing.T) {
	a := matrixOf(t, "sample:plate:20")
	padded := entriesOf(a)
	for i := range a.NRows {
		for j := i - 4; j <= i+4; j++ {
			if j >= 0 && j < a.NRows && a.At(i, j) == 0 {
				padded = append(padded, linear.Entry{I: i, J: j})
			}
		}
	}
	p := fromEntries(a.NRows, padded)
	v := ended(t, saved(t, "padded.mtx", p), Options{Pairs: []string{"cg+none", "prune/cg+none"}})
	mustSay(t, v, "stored-zeros", diagnose.OnSystem, diagnose.Drag, inspect.Proved, "stored entries are zero", "carry them along")
	all, pruned := trialOf(t, v, "cg+none"), trialOf(t, v, "prune/cg+none")
	if pruned.Stop != trace.Converged || pruned.Iterations != all.Iterations {
		t.Errorf("pruned %s after %d its, as it stands %s after %d", pruned.Stop, pruned.Iterations, all.Stop, all.Iterations)
	}
	silent(t, ended(t, saved(t, "a.mtx", a), Options{Pairs: []string{"cg+none"}}), "stored-zeros")
}

// Row 38: one triangle of a symmetric matrix, declared general.
func TestNeed38OneTriangle(t *testing.T) {
	a := matrixOf(t, "sample:plate:5")
	var e []linear.Entry
	for _, q := range entriesOf(a) {
		if q.J <= q.I {
			e = append(e, q)
		}
	}
	v := ended(t, saved(t, "lower.mtx", fromEntries(a.NRows, e)), Options{Pairs: []string{"gmres:30+none"}, RHS: "ones"})
	mustSay(t, v, "one-triangle", diagnose.OnSystem, diagnose.Drag, inspect.Proved, "declared general", "one triangle")
	silent(t, ended(t, saved(t, "a.mtx", a), Options{Pairs: []string{"cg+none"}}), "one-triangle")
}

// Row 32: each pairing tells what it costs: vectors of gmres:30 in memory,
// products, set-up.
func TestNeed32CostsBesideCounts(t *testing.T) {
	v := ended(t, "sample:duct:20", Options{Pairs: []string{"gmres:30+none", "gmres:100+none", "bicgstab+none"}})
	n := int64(v.Facts.N)
	short, long := trial(t, v, "gmres:30+none"), trial(t, v, "gmres:100+none")
	if more := long.MemoryBytes - short.MemoryBytes; more < 70*8*n || more > 71*8*n+200_000 {
		t.Errorf("70 vectors more take %d bytes, one has %d", more, 8*n)
	}
	for _, r := range v.Choice.Ranked {
		if r.Reached && (r.Memory <= 0 || r.Iterations <= 0 || !(r.For[2] > 0)) {
			t.Errorf("%s is ranked without its costs: %+v", r.Pairing, r)
		}
	}
}

// Row 39: a text dump with too few digits: see TestDigitsDecideWhatIsProved; a
// definite matrix whose digits suffice is not doubted.
func TestNeed39FewDigitsAreSaid(t *testing.T) {
	short := ended(t, written(t, cantilever(50), 6), Options{Pairs: []string{"cg+jacobi"}})
	f := mustSay(t, short, "few-digits", diagnose.OnSystem, diagnose.Note, inspect.Measured, "6 digits")
	within(t, "what is open in an entry", evidence(t, f, "open in an entry").Value, 5e-6, 1e-12)
	silent(t, ended(t, written(t, cantilever(5), 0), Options{Pairs: []string{"cg+jacobi"}}), "few-digits")
}

// Row 33: the line-up is made from the facts, what cannot run is listed with
// its reason.
func TestNeed33WhatIsRuledOutIsSaid(t *testing.T) {
	v := ended(t, "sample:duct:12", Options{Seconds: 20})
	if v.Choice.Pairing == "" || len(v.Choice.RuledOut) == 0 {
		t.Fatalf("chosen %q, ruled out %v", v.Choice.Pairing, v.Choice.RuledOut)
	}
	for _, r := range v.Choice.RuledOut {
		if r.Pairing == "" || r.Reason == "" {
			t.Errorf("ruled out without a reason: %+v", r)
		}
		if strings.HasPrefix(r.Pairing, "cg+") && !strings.Contains(r.Reason, "symmetric") {
			t.Errorf("cg is ruled out because %s", r.Reason)
		}
	}
}
