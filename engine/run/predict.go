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
	leastFall  = 0.25 // decades below which a curve has shown nothing yet, and nothing is told
	usually    = 1.2  // power of k at which the decades grow, see forecast
	leastPower = 0.3  // what is read off a curve is held between these
	mostPower  = 3
	ownPart    = 0.25 // and counts for so much of the logarithm
	bend       = 0.68
	quickest   = 0.2 // most trials take more than k e^(quickest y)
	slowest    = 2   // and less than k e^(anyway + slowest y)
	anyway     = 0.1
	cyclesTold = 2   // cycles from which a restarted method is taken to go on as it does
	steadyLow  = 0.6 // of the predicted way to go: the range of restarted methods, which are steadier
	steadyHigh = 1.5
	leastSlope = 1e-3 // decades over half of a restarted curve: less is no way at all
)

// forecast is what predictions are made of: the method's own number by the
// stopping rule, in decades.
//
// A curve has d decades gone of t to go at iteration k, and had h gone at k/2.
// Were d to grow like a power p of k, p = log2(d/h) could be read off and the
// trial would end at k (t/d)^(1/p). No power holds for long: what is read off
// is drawn towards the usual one, by three quarters of the logarithm, and where
// much is to go yet, fewer iterations than that are needed, for a Krylov method
// learns the outer eigenvalues: with s = ln(t/d)/p the end is told near k e^y,
// y = min(s, bend √s). The constants are fitted to 1200 trials of many pairings
// on samples and open matrices, at two to nine tenths of their way; how much
// single trials differ, the range says. A restarted method gets no faster from
// cycle to cycle: there a straight line through the last half is used.
type forecast struct {
	next  int     // the iteration to tell at
	first float64 // log10 of the own number at the start
	low   float64 // log10 of the smallest own number so far
	gap   float64 // log10 of the true number over the own one at the last audit
	truly float64 // decades that the true number has fallen at the best audit
	begin float64 // log10 of the true number at the start
}

// seeAudit takes in how far the own number was from the true one.
func (f *forecast) seeAudit(k int, own, truth float64) {
	if !(own > 0 && truth > 0) || math.IsInf(own, 0) || math.IsInf(truth, 0) {
		return
	}
	f.gap = math.Log10(truth / own)
	if k == 0 {
		f.begin = math.Log10(truth)
	}
	f.truly = math.Max(f.truly, f.begin-math.Log10(truth))
}

// see takes in the own number of one iteration.
func (f *forecast) see(k int, own float64) {
	if !(own > 0) || math.IsInf(own, 1) {
		return
	}
	l := math.Log10(own)
	if k == 0 {
		f.first, f.low = l, l
	}
	f.low = math.Min(f.low, l)
}

// predict tells, at growing iterations, how many iterations the trial is
// expected to take: nothing before its curve has begun to fall, by its own
// number and by the true one.
func (t *Trial) predict(own float64) {
	f, k := &t.forecast, t.hist.Iterations
	f.see(k, own)
	if k < max(f.next, firstTold) || t.hist.Direct {
		return
	}
	f.next = int(math.Ceil(toldAgain * float64(k)))
	goal := math.Log10(t.limits.Target.Tol)
	p, told := f.tell(k, t.lowest(k/2), goal)
	told = told && f.truly >= leastFall
	if total, ok := t.straight(own, goal-f.gap); ok {
		p, told = around(k, total, steadyLow, steadyHigh), true
	}
	if t.hist.FloorHits > 1 {
		p, told = trace.Prediction{Iter: k, Total: math.Inf(1), Low: math.Inf(1), High: math.Inf(1)}, true
	}
	if !told {
		return
	}
	t.mu.Lock()
	t.hist.Predictions = append(t.hist.Predictions, p)
	t.mu.Unlock()
}

// tell is the prediction at iteration k, with the log10 of the smallest own
// number up to k/2; false where the curve has not fallen far enough to tell
// anything.
func (f *forecast) tell(k int, halfway, goal float64) (trace.Prediction, bool) {
	fallen := f.first - f.low
	if !(fallen >= leastFall) {
		return trace.Prediction{}, false
	}
	power := float64(mostPower)
	if before := f.first - halfway; before > 0 {
		power = math.Min(mostPower, math.Max(leastPower, math.Log2(fallen/before)))
	}
	s := math.Log(math.Max(1, (f.first+f.gap-goal)/fallen)) /
		(math.Pow(power, ownPart) * math.Pow(usually, 1-ownPart))
	y := math.Min(s, bend*math.Sqrt(s))
	at := func(share float64) float64 { return math.Max(float64(k+1), float64(k)*math.Exp(share)) }
	return trace.Prediction{Iter: k, Total: at(y), Low: at(quickest * y), High: at(anyway + slowest*y)}, true
}

// lowest is the log10 of the smallest own number up to iteration k.
func (t *Trial) lowest(k int) float64 {
	low := t.forecast.first
	for _, r := range t.hist.Records {
		if r.Iter > uint32(k) {
			break
		}
		if r.Residual > 0 {
			low = math.Min(low, math.Log10(r.Residual))
		}
	}
	return low
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
	if !(fall > leastSlope) {
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
