package engine

import (
	"slices"
	"strings"
	"testing"

	"dwindle/engine/choose"
	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// Row 30: counts move with rounding. cg on bcsstk13 with its diagonal has lost
// orthogonality long before it ends (1447 iterations [V]).
func TestNeed30CountsMoveWithRounding(t *testing.T) {
	v := ended(t, openFile(t, "bcsstk13.mtx.gz"), Options{Today: "cg+jacobi", Pairs: []string{"scale/cg+none"}, RHS: "ones", Tol: 1e-6, Seconds: 300})
	a, b := trial(t, v, "cg+jacobi"), trial(t, v, "scale/cg+none")
	low, high, ok := diagnose.Counts(a)
	t.Logf("cg+jacobi takes %d, again %v; scale/cg+none %d, again %v", a.Iterations, a.Counts, b.Iterations, b.Counts)
	if !ok || len(a.Counts) != rerunTimes || low == high {
		t.Fatalf("the count of cg+jacobi was not seen to move: %v", a.Counts)
	}
	within(t, "its middle", float64(low+high)/2, 1447, 0.05)
	if f, ok := finding(v, "iteration-noise", "cg+jacobi"); ok && !strings.Contains(f.Claim, "+-") {
		t.Errorf("the noise is told as %s", f.Claim)
	}
	// a difference of 5 % in time, on steady clocks, is not called a win
	a.CPUShare, b.CPUShare = 1, 1
	a.OwnTime = b.OwnTime + b.OwnTime/20
	c := diagnose.Case{Facts: v.Facts, Trials: []trace.History{a, b}, Tol: 1e-6, StopBy: "rhs"}
	found := diagnose.Judge(c)
	for _, f := range found {
		if f.Rule == "today-beaten" {
			t.Errorf("5 %% is called a win: %s", f.Claim)
		}
	}
	doubts := strings.Join(choose.Rank(v.Facts, c.Trials, found, "", 0).Doubts, "; ")
	if !strings.Contains(doubts, "not told apart") {
		t.Errorf("the choice does not doubt a difference of 5 %%: %s", doubts)
	}
}

// A count that rounding moves far is told with its range; strakos is the
// textbook case (Strakos 1991).
func TestNeed30NoiseIsTold(t *testing.T) {
	v := ended(t, "sample:strakos:n=48,high=1000,rho=0.7", Options{Pairs: []string{"cg+none"}, Seconds: 60, Tol: 1e-10})
	h := only(t, v)
	low, high, ok := diagnose.Counts(h)
	t.Logf("%d, again %v", h.Iterations, h.Counts)
	if !ok {
		t.Fatalf("not run again: %v", h.Counts)
	}
	if float64(high-low)/float64(high+low) > 0.02 && high-low >= 2 {
		f := mustSay(t, v, "iteration-noise", "cg+none", diagnose.Note, inspect.Measured, "+-", "5 runs")
		if evidence(t, f, "fewest").Value != float64(low) || evidence(t, f, "most").Value != float64(high) {
			t.Errorf("evidence %v, counts %v", f.Evidence, h.Counts)
		}
	} else {
		silent(t, v, "iteration-noise")
	}
}

// Reruns change nothing else: the same records, products and answer with and
// without them, and no time charged.
func TestRerunsAreNobodysWork(t *testing.T) {
	with := only(t, ended(t, "sample:plate:30", Options{Pairs: []string{"cg+ssor"}, Seconds: 60}))
	without := only(t, ended(t, "sample:plate:30", Options{Pairs: []string{"cg+ssor"}}))
	if len(with.Counts) != rerunTimes || without.Counts != nil {
		t.Fatalf("counts %v and %v", with.Counts, without.Counts)
	}
	if with.Products != without.Products || with.PrecondUses != without.PrecondUses || with.TrueResidual != without.TrueResidual ||
		!slices.EqualFunc(with.Records, without.Records, sameRecord) {
		t.Error("reruns have changed the trial")
	}
	for _, k := range with.Counts { // a smooth problem: rounding moves nothing
		if k != with.Iterations {
			t.Errorf("counts %v beside %d", with.Counts, with.Iterations)
		}
	}
}

func sameRecord(a, b trace.Record) bool {
	return a.Iter == b.Iter && a.MatVecs == b.MatVecs && a.Solves == b.Solves && a.Residual == b.Residual
}
