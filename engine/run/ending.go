package run

import (
	"fmt"
	"math"
	"time"

	"dwindle/engine/trace"
)

const (
	flatFactor  = 0.999 // a cycle that cuts the residual by less is flat
	flatCycles  = 20    // so many flat cycles in a row: stagnated
	floorAudits = 5     // so many audits at the floor: stagnated
	parted      = 0.1   // the own number is this far below its true value: they have parted
	runaway     = 1e8   // true residual over the first one: diverged
	falseBy     = 2     // the true number over the target from which a stop there would be false
)

// ending is what the ending rules remember between iterations.
type ending struct {
	xInf       float64 // ‖x‖∞ at the last audit
	flat       int     // flat cycles in a row
	atFloor    int     // audits in a row at the floor
	floorBest  float64 // smallest audit since the numbers parted
	falseStop  bool    // the own number met the target, an audit did not
	falseValue float64
	falseIter  int
	slow       int     // steps of refinement in a row that have not halved the residual
	halved     float64 // the residual that was last a half of the one before it
	firstTrue  float64
}

// judge ends the trial where a rule holds. Growth or flatness of the residual
// alone never does, except for restarted methods.
func (t *Trial) judge(r trace.Reading, rec trace.Record, own float64, a *audit) {
	if a != nil {
		t.judgeAudit(rec, own, a)
	}
	if t.ended() {
		return
	}
	if t.judgeRestarts(r.Events); t.ended() {
		return
	}
	if t.judgeRefinement(rec); t.ended() {
		return
	}
	iter := int(rec.Iter)
	switch {
	case r.Done:
		t.judgeDone(r)
	case iter >= t.limits.Iterations:
		t.end(trace.IterationLimit, fmt.Sprintf("%d iterations", iter)+a.fieldWords())
	case t.limits.Seconds > 0 && t.hist.OwnTime >= time.Duration(t.limits.Seconds*1e9):
		t.end(trace.TimeLimit, fmt.Sprintf("%.3g s of own time", t.hist.OwnTime.Seconds())+a.fieldWords())
	}
}

func (t *Trial) atLimit(iter int) bool {
	return iter >= t.limits.Iterations ||
		t.limits.Seconds > 0 && t.hist.OwnTime >= time.Duration(t.limits.Seconds*1e9)
}

// judgeAudit decides converged, least-squares, diverged and the floor.
func (t *Trial) judgeAudit(rec trace.Record, own float64, a *audit) {
	e, tol := &t.ending, t.limits.Target.Tol
	e.xInf = a.xInf
	if rec.Iter == 0 {
		e.firstTrue = a.true2
	}
	passed := t.limits.Target.relative(a.true2, scales{b: t.sizes.b, r0: e.firstTrue,
		a: t.sizes.aInf, x: a.xInf, bMax: t.sizes.bInf, r: a.rInf})
	t.forecast.seeAudit(int(rec.Iter), own, passed)
	least, isLeast := t.leastSquares(rec.Audit, a)
	switch {
	case math.IsNaN(a.true2) || math.IsInf(a.true2, 0):
		t.end(trace.Diverged, "the true residual is not a finite number")
	case passed <= tol && !(t.limits.Unreachable > tol) && a.unsolvedField() == nil:
		t.end(trace.Converged, t.twoWords(a))
	case isLeast:
		t.end(trace.LeastSquares, least)
	case a.true2 > runaway*e.firstTrue && !t.bounded(), e.firstTrue > 0 && a.true2 > runaway*runaway*e.firstTrue: // the latter no theory allows
		t.end(trace.Diverged, fmt.Sprintf("the true residual has grown by %.1g", a.true2/e.firstTrue)+t.unboundWords())
	}
	if t.ended() {
		return
	}
	if own <= tol && passed > falseBy*tol && !e.falseStop {
		e.falseStop, e.falseValue, e.falseIter = true, rec.Audit, int(rec.Iter)
		t.event(trace.Event{Iter: rec.Iter, Kind: trace.FalseStop, Quantity: "true relative residual", Value: rec.Audit, Scale: rec.Residual})
	}
	t.judgeFloor(rec, a)
}

// bounded says that theory bounds the growth of the residual. Where b is out
// of the range of A it does so for methods of minimal residual alone, and the
// energy norm that conjugate gradients make small is a norm only for a
// semi-definite A.
func (t *Trial) bounded() bool {
	e, l := t.method.Solver, t.limits
	return !e.NoGuarantee && (t.hist.Monotone || !(l.Unreachable > l.Target.Tol) && !(e.Energy && l.NoNorm))
}

// unboundWords says why the residual could grow, where the system is to blame.
func (t *Trial) unboundWords() string {
	switch {
	case t.limits.Unreachable > t.limits.Target.Tol:
		return "; b is not in the range of A"
	case t.method.Solver.Energy && t.limits.NoNorm:
		return "; A is not symmetric and definite"
	}
	return ""
}

// judgeFloor counts audits at the accuracy floor: the own number has fallen
// far below its true value, and the true value no longer improves. A restart
// brings the two together again, so that restarted methods are judged by their
// cycles alone.
func (t *Trial) judgeFloor(rec trace.Record, a *audit) {
	e := &t.ending
	if t.method.Solver.Restarted {
		return
	}
	ownNow := rec.Residual * t.ownB
	if !(ownNow < parted*a.ownTrue) || rec.Iter == 0 {
		e.atFloor, e.floorBest = 0, math.Inf(1)
		return
	}
	if a.true2 < 0.5*e.floorBest {
		e.atFloor = 0
	}
	e.floorBest = math.Min(e.floorBest, a.true2)
	e.atFloor++
	t.mu.Lock()
	t.hist.FloorHits = e.atFloor
	t.mu.Unlock()
	if e.atFloor >= floorAudits {
		t.end(trace.Stagnated, fmt.Sprintf("the true residual stays at %.2g while the method's own number falls to %.2g",
			rec.Audit, rec.Residual))
	}
}

func (t *Trial) judgeRestarts(events []trace.Event) {
	for _, v := range events {
		if v.Kind != trace.Restart {
			continue
		}
		if v.Value > flatFactor {
			t.ending.flat++
		} else {
			t.ending.flat = 0
		}
		if t.ending.flat >= flatCycles {
			t.end(trace.Stagnated, fmt.Sprintf("%d cycles in a row left more than %.3g of the residual", flatCycles, flatFactor))
			return
		}
	}
}

// judgeDone ends a trial whose method cannot go on although no audit passed.
func (t *Trial) judgeDone(r trace.Reading) {
	for _, v := range r.Events {
		switch v.Kind {
		case trace.Breakdown:
			t.end(trace.BrokeDown, fmt.Sprintf("%s vanished (%.1g)", v.Quantity, v.Value))
			return
		case trace.NonFinite:
			t.end(trace.Diverged, v.Quantity+" is not a finite number")
			return
		}
	}
	t.end(trace.Stagnated, "the Krylov space is exhausted and the target is not met")
}

// end closes the trial once; later calls change nothing. A trial that comes
// to an end of its own, without an answer and after a false stop, is
// falsely-converged; one that was cut might yet have got there.
func (t *Trial) end(stop trace.Stop, reason string) {
	if t.solver != nil && t.scratch != nil && len(t.hist.Records) > 0 && stop != trace.Failed {
		t.finalAudit()
		t.lastVectors()
		t.learnAll(stop)
	}
	t.mu.Lock()
	defer t.mu.Unlock()
	if t.hist.Stop.Ended() {
		return
	}
	if e := t.ending; e.falseStop {
		before := fmt.Sprintf("its own number met the target at iteration %d, the true residual was %.3g; then ", e.falseIter, e.falseValue)
		switch stop {
		case trace.Converged, trace.LeastSquares, trace.Cancelled, trace.Failed:
		case trace.Outpaced, trace.TimeLimit:
			reason = before + reason
		default:
			stop, reason = trace.FalselyConverged, before+stop.String()+": "+reason
		}
	}
	t.hist.Stop, t.hist.Reason = stop, reason
}

// finalAudit adds what only the end is asked for: the componentwise backward
// error with its rows, and the last look at the spectrum.
func (t *Trial) finalAudit() {
	t.look(true)
	a := t.audit(true)
	worst, count, small, rows := t.componentwise(math.Sqrt(t.limits.Target.Tol), a.fields)
	t.doubt = t.ownDoubt()
	t.mu.Lock()
	defer t.mu.Unlock()
	h := &t.hist
	last := h.Records[len(h.Records)-1]
	last.Audit = over(a.true2, t.sizes.b)
	if !h.Records[len(h.Records)-1].Audited() {
		h.Records = append(h.Records[:len(h.Records)-1:len(h.Records)-1], last)
	}
	t.noteAudit(&a, last, int(last.Iter))
	h.Componentwise, h.UnsolvedRows, h.SmallRows, h.WorstRows = worst, count, small, rows
}

// event appends one event of the driver's own.
func (t *Trial) event(e trace.Event) {
	t.mu.Lock()
	t.hist.Events = append(t.hist.Events, e)
	t.mu.Unlock()
}
