package choose

import (
	"cmp"
	"fmt"
	"math"

	"dwindle/engine/trace"
)

const (
	margin      = 1.2 // over the best's time: beyond, a trial has lost; on a busy machine more
	patient     = 5.0 // the same where the choice does not go by seconds
	hopelessBy  = 3.0 // predicted iterations over the limit of a trial beyond hope
	needsToFall = 0.9 // of the prediction before: falling by more, a trial is gaining
)

// lost returns the trials that can no longer win. Before anything has
// converged these are only the ones that are hopeless by their own predictions
// and not gaining: far from the target at the limit of iterations, or too slow
// for the time that is left while another is not; afterwards those that have used more own time than the
// best, with a margin, and whose time for a further right-hand side is behind
// too. Today's pairing never loses, and neither does the last live one.
func (r Race) lost(best *trace.History, found bool) []End {
	var out []End
	live := 0
	for _, h := range r.Trials {
		if !h.Stop.Ended() {
			live++
		}
	}
	for i, h := range r.Trials {
		if h.Stop != trace.Running || h.Today || h.Pairing == r.Today || h.TwoDoubles { // two doubles do not run for time
			continue
		}
		reason := ""
		if found {
			reason = r.outpaced(h, *best)
		} else if live > 1 {
			reason = cmp.Or(r.hopeless(h), r.tooLate(i))
		}
		if reason != "" {
			out = append(out, End{i, reason})
			live--
		}
	}
	return out
}

// outpaced says why h cannot win against the best, or nothing.
func (r Race) outpaced(h, best trace.History) string {
	room := margin + coldCaches*(1-r.given)
	if r.Goal == Memory || r.Goal == Robust || best.UnsolvedRows > 0 {
		room = patient
	}
	t, own := best.OwnTime.Seconds(), h.OwnTime.Seconds()
	solve, solves := (h.OwnTime - h.SetupTime).Seconds(), (best.OwnTime - best.SetupTime).Seconds()
	if own <= math.Max(tooShort, room*t) || solve <= room*solves {
		return ""
	}
	if r.Goal == Memory && h.MemoryBytes < best.MemoryBytes && own <= 10*room*t {
		return ""
	}
	return fmt.Sprintf("%s has the answer after %s; this one, last measured at %.2g, has used %s%s",
		best.Pairing, took(r.byClock(best)), h.TrueResidual, took(r.byClock(h)), r.toGo(h))
}

// byClock is the own time of a trial by the clock, in seconds, as it is told.
func (r Race) byClock(h trace.History) float64 {
	if d, ok := r.clock[h.Pairing]; ok {
		return d.Seconds()
	}
	return h.OwnTime.Seconds()
}

// toGo says what is foreseen of a trial that has not arrived, if it has
// iterated long enough to say anything.
func (r Race) toGo(h trace.History) string {
	n := len(h.Predictions)
	switch {
	case h.Unfallen():
		return " and has not begun to fall"
	case n == 0:
		return ""
	case math.IsInf(h.Predictions[n-1].Total, 1) || r.Limit > 0 && h.Predictions[n-1].Total > float64(r.Limit):
		return " and will not get there in the iterations it has"
	}
	return fmt.Sprintf(", about %.0f more iterations to go", math.Max(1, h.Predictions[n-1].Total-float64(h.Iterations)))
}

// hopeless says why a restarted method will not get there, or nothing. Other
// methods may be flat for long and converge all the same.
func (r Race) hopeless(h trace.History) string {
	n := len(h.Predictions)
	if !h.Restarted || n < 4 || r.Limit <= 0 {
		return ""
	}
	last, before := h.Predictions[n-1], h.Predictions[n-3]
	if last.Low < hopelessBy*float64(r.Limit) || last.Total < needsToFall*before.Total {
		return ""
	}
	if math.IsInf(last.Low, 1) {
		return "its cycles no longer reduce the residual"
	}
	return fmt.Sprintf("at this rate it needs %.2g iterations, %d are allowed", last.Low, r.Limit)
}

// tooLate says why a trial cannot make it in the time that is left, were it
// alone, while another one can; or nothing.
func (r Race) tooLate(i int) string {
	h := r.Trials[i]
	n := len(h.Predictions)
	if r.Left <= 0 || n < 4 || h.Predictions[n-1].Total < needsToFall*h.Predictions[n-3].Total {
		return ""
	}
	need := remaining(h, h.Predictions[n-1].Low) / r.given
	if !(need > r.Left.Seconds()) || !r.another(i) {
		return ""
	}
	return fmt.Sprintf("it needs at least %s more, %s are left", took(need), took(r.Left.Seconds()))
}

// another says that a live trial beside i is expected to make it in the time
// that is left, were it alone.
func (r Race) another(i int) bool {
	for k, h := range r.Trials {
		n := len(h.Predictions)
		if k != i && h.Stop == trace.Running && n > 0 && remaining(h, h.Predictions[n-1].Total)/r.given < r.Left.Seconds() {
			return true
		}
	}
	return false
}

// remaining is the seconds that h takes to come to so many iterations.
func remaining(h trace.History, iterations float64) float64 {
	each := (h.OwnTime - h.SetupTime).Seconds() / math.Max(1, float64(h.Iterations))
	return each * (iterations - float64(h.Iterations))
}
