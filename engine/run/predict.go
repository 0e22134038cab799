package run

import (
	"cmp"
	"math"
	"slices"

	"dwindle/engine/trace"
)

const (
	firstTold  = 3    // the iteration at which a prediction is first told
	toldAgain  = 1.1  // and by which factor later ones lie apart
	bend       = 0.6  // see forecast
	leastFall  = 0.25 // decades below which a curve has shown nothing yet
	lowShare   = 0.5  // of the predicted way to go: nine in ten trials take more than lowShare
	highShare  = 1.9  // and less than highShare of it
	cyclesTold = 2    // cycles from which a restarted method is taken to go on as it does
	steadyLow  = 0.9  // the same for restarted methods, which are steadier
	steadyHigh = 1.2
)

// forecast is what predictions are made of: the method's own number by the
// stopping rule, in decades.
//
// A Krylov method gets faster as it goes, for it learns the outer eigenvalues.
// With d decades gone of t to go at iteration k, the trials of this project's
// samples end near k exp(bend √ln(t/d)) iterations; a straight line would say
// k t/d, which is far too many in the first half. The constant is fitted to
// the samples; on other matrices it holds less well, and the range says so. A
// restarted method gets no faster from cycle to cycle: there a straight
// line through the last half is used.
type forecast struct {
	next int     // the iteration to tell at
	low  float64 // log10 of the smallest own number so far
	gap  float64 // log10 of the true number over the own one at the last audit
}

// seeAudit takes in how far the own number was from the true one.
func (f *forecast) seeAudit(own, truth float64) {
	if own > 0 && truth > 0 && !math.IsInf(own, 0) && !math.IsInf(truth, 0) {
		f.gap = math.Log10(truth / own)
	}
}

// predict tells, at growing iterations, how many iterations the trial is
// expected to take.
func (t *Trial) predict(own float64) {
	f, k := &t.forecast, t.hist.Iterations
	if own > 0 {
		f.low = math.Min(f.low, math.Log10(own))
	}
	if k < max(f.next, firstTold) || t.hist.Direct {
		return
	}
	f.next = int(math.Ceil(toldAgain * float64(k)))
	p := f.tell(k, math.Log10(t.limits.Target.Tol))
	switch total, ok := t.straight(own, math.Log10(t.limits.Target.Tol)-f.gap); {
	case t.hist.FloorHits > 1:
		p = trace.Prediction{Iter: k, Total: math.Inf(1), Low: math.Inf(1), High: math.Inf(1)}
	case ok:
		p = around(k, total, steadyLow, steadyHigh)
	}
	if t.limits.Target.Rule == StopRHS && t.hist.Floor > t.limits.Target.Tol {
		p.High = math.Inf(1) // rounding may end it above the target
	}
	t.mu.Lock()
	t.hist.Predictions = append(t.hist.Predictions, p)
	t.mu.Unlock()
}

// tell is the prediction at iteration k for a method that gets faster.
func (f *forecast) tell(k int, tol float64) trace.Prediction {
	fallen := math.Max(leastFall, -f.low)
	togo := math.Max(fallen, f.gap-tol)
	p := around(k, float64(k)*math.Exp(bend*math.Sqrt(math.Log(togo/fallen))), lowShare, highShare)
	if -f.low < leastFall {
		p.High = math.Inf(1)
	}
	return p
}

// around is a prediction with its range, as shares of the way to go.
func around(k int, total, low, high float64) trace.Prediction {
	togo := math.Max(1, total-float64(k))
	at := float64(k)
	return trace.Prediction{Iter: k, Total: at + togo, Low: at + low*togo, High: at + high*togo}
}

// straight predicts a restarted method by a straight line through the second
// half of its curve, once it has restarted often enough.
func (t *Trial) straight(own, target float64) (total float64, ok bool) {
	if !t.hist.Restarted || cycles(t.hist.Events) < cyclesTold || !(own > 0) {
		return 0, false
	}
	k := t.hist.Iterations
	half, last := t.recordAt(k/2), t.hist.Records[len(t.hist.Records)-1]
	fall := math.Log10(half.Residual / last.Residual)
	if !(fall > 0) {
		return math.Inf(1), true
	}
	each := fall / float64(last.Iter-half.Iter)
	return float64(k) + (math.Log10(own)-target)/each, true
}

// cycles counts restarts, up to cyclesTold.
func cycles(events []trace.Event) int {
	n := 0
	for _, e := range events {
		if e.Kind == trace.Restart {
			n++
		}
		if n == cyclesTold {
			break
		}
	}
	return n
}

// recordAt is the record at iteration k, or the next one kept.
func (t *Trial) recordAt(k int) trace.Record {
	list := t.hist.Records
	i, _ := slices.BinarySearchFunc(list, uint32(k), func(r trace.Record, k uint32) int { return cmp.Compare(r.Iter, k) })
	return list[min(i, len(list)-1)]
}
