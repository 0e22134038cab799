package run

import (
	"fmt"
	"math"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// tail writes the lower doubles of the iterate in the user's units to the
// scratch and returns them; nil where x is kept in one double. The ways back
// that are let through (admit.go) move entries and change none.
func (t *Trial) tail() []float64 {
	s, ok := t.solver.(krylov.Tailer)
	if !ok {
		return nil
	}
	if t.scratch.low == nil {
		t.scratch.low = linear.Bulk[float64](t.sys.N())
	}
	low := t.scratch.low
	if t.back == nil {
		s.Tail(low)
		return low
	}
	s.Tail(t.scratch.w)
	t.back.Solution(low, t.scratch.w)
	return low
}

// trueResidual writes b−Ax of the current iterate, whose upper doubles in the
// user's units are x, to dst, and returns its 2-norm and that of x alone. Where
// x is kept in two doubles both are evaluated in twice the working precision;
// elsewhere the second is NaN.
func (t *Trial) trueResidual(dst, x []float64) (norm, rounded float64) {
	low := t.tail()
	if low == nil {
		return linear.Residual(dst, t.sys.A, x, t.sys.B), math.NaN()
	}
	a := t.sys.Matrix()
	rounded = a.PairResidual(dst, x, nil, t.sys.B)
	return a.PairResidual(dst, x, low, t.sys.B), rounded
}

// twoWords says of a trial that keeps x in two doubles what the audit found of x
// rounded to one; nothing of others.
func (t *Trial) twoWords(a *audit) string {
	if !t.hist.TwoDoubles {
		return ""
	}
	return fmt.Sprintf("x is kept in two doubles, and rounded to one it leaves %.3g", over(a.rounded, t.sizes.b))
}

// judgeRefinement ends iterative refinement in two doubles that has come to its
// end: with exact factors it contracts from step to step or not at all
// (Demmel et al. 2006 stop at the first step that does not halve the
// correction; here the residual has several).
func (t *Trial) judgeRefinement(rec trace.Record) {
	e := &t.ending
	switch {
	case !t.hist.TwoDoubles || !t.exactFactors():
	case rec.Iter == 0 || rec.Residual <= 0.5*e.halved:
		e.halved, e.slow = rec.Residual, 0
	default:
		if e.slow++; e.slow >= slowSteps {
			t.end(trace.Stagnated, fmt.Sprintf("%d steps of refinement in a row have not halved the true residual, which stays near %.2g", slowSteps, e.halved))
		}
	}
}

// slowSteps are the steps of refinement in a row that may leave more than half
// of the residual.
const slowSteps = 5

// exactFactors says that M is a complete factorisation of the prepared A.
func (t *Trial) exactFactors() bool { return t.hist.Direct && t.prepared.Shift == 0 }

// doubt is how far a solution in two doubles may lie from the true one,
// relative to it: in the 2-norm, and in the entry where that is largest.
type doubt struct{ norm, worst float64 }

// noDoubt is that of a solution of which nothing is known.
var noDoubt = doubt{math.NaN(), math.NaN()}

// ownDoubt estimates how far the iterate in two doubles lies from the solution:
// with exact factors the correction d = M⁻¹(b−Ax) is the error to within its
// own contraction ρ, measured on d itself, ‖d‖/(1−ρ) at most. NaN where nothing
// contracts by a half. The residual of the final audit is in the scratch.
// Nothing is counted.
func (t *Trial) ownDoubt() doubt {
	if !t.hist.TwoDoubles || !t.exactFactors() {
		return noDoubt
	}
	s := t.scratch
	r := s.r
	if t.back != nil {
		t.back.Guess(s.own, s.r) // a reordering: b and r move as a guess does
		r = s.own
	}
	d, rest, again := make([]float64, len(r)), make([]float64, len(r)), make([]float64, len(r))
	t.m.inner.Apply(d, r)
	t.prepared.Matrix().PairResidual(rest, d, nil, r)
	t.m.inner.Apply(again, rest)
	size := linear.Norm2(d)
	rho := over(linear.Norm2(again), size)
	if !(rho <= 0.5) {
		return noDoubt
	}
	t.solver.Solution(s.w)
	return doubt{over(size, linear.Norm2(s.w)) / (1 - rho), worstShare(d, s.w) / (1 - rho)}
}

// worstShare is max |d_i/x_i| over the entries of x that are not zero.
func worstShare(d, x []float64) float64 {
	worst := 0.0
	for i, v := range x {
		if v != 0 {
			worst = math.Max(worst, math.Abs(d[i]/v))
		}
	}
	return worst
}

// compare measures every ended trial against a solution that was kept in two
// doubles, once there is one that is known to be that of the system. Nothing is
// charged to any trial.
func (b *Bench) compare() {
	trials := b.Trials()
	for _, ref := range trials {
		if ref.answer == nil || ref.low == nil || !(ref.doubt.norm >= 0) || ref.hist.Stop != trace.Converged {
			continue
		}
		for _, t := range trials {
			t.against(ref, b.scratch.w)
		}
		return
	}
}

// against measures how far the answer of the trial lies from that of ref, once;
// w is memory of length n.
func (t *Trial) against(ref *Trial, w []float64) {
	if t.answer == nil || t.hist.Near != nil {
		return
	}
	size := linear.Norm2(ref.answer)
	linear.Lin(w, 1, t.answer, -1, ref.answer) // exact where the two are near each other
	linear.Axpy(-1, ref.low, w)
	if off := over(linear.Norm2(w), size); off <= math.MaxFloat64 {
		t.mu.Lock()
		t.hist.Near = &trace.Nearness{Of: ref.hist.Pairing, Error: off, Worst: worstShare(w, ref.answer),
			Doubt: ref.doubt.norm, WorstDoubt: ref.doubt.worst}
		t.mu.Unlock()
	}
}
