package choose

import (
	"fmt"
	"math"

	"dwindle/engine/trace"
)

const (
	margin      = 1.2 // over the best's time: beyond, a trial has lost
	patient     = 5.0 // the same where the choice does not go by seconds
	hopelessBy  = 3.0 // predicted iterations over the limit of a trial beyond hope
	needsToFall = 0.9 // of the prediction before: falling by more, a trial is gaining
)

// lost returns the trials that can no longer win. Before anything has
// converged these are only the ones that are hopeless by their own predictions
// and not gaining; afterwards those that have used more own time than the
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
		if h.Stop != trace.Running || h.Today || h.Pairing == r.Today {
			continue
		}
		reason := ""
		if found {
			reason = r.outpaced(h, *best)
		} else if live > 1 {
			reason = r.hopeless(h)
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
	room := margin
	if r.Goal == Memory || r.Goal == Robust {
		room = patient
	}
	t, own := best.OwnTime.Seconds(), h.OwnTime.Seconds()
	solve, solves := (h.OwnTime - h.SetupTime).Seconds(), (best.OwnTime - best.SetupTime).Seconds()
	if own <= room*t || solve <= room*solves {
		return ""
	}
	if r.Goal == Memory && h.MemoryBytes < best.MemoryBytes && own <= 10*room*t {
		return ""
	}
	s := fmt.Sprintf("%s has the answer after %s; this one is at %.2g after %s", best.Pairing, took(t), h.Residual, took(own))
	if n := len(h.Predictions); n > 0 && !math.IsInf(h.Predictions[n-1].Total, 0) {
		s += fmt.Sprintf(", about %.0f more iterations to go", math.Max(1, h.Predictions[n-1].Total-float64(h.Iterations)))
	}
	return s
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
	return fmt.Sprintf("at this rate it needs %.2g iterations, %d are allowed", last.Low, r.Limit)
}
