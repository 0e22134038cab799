package choose

import (
	"time"

	"dwindle/engine/trace"
)

// waitShare is the part of the time left that a direct solve waits at most.
const waitShare = 0.25

// waits says that a direct solve is not begun yet: nothing has converged, but a
// live trial is expected to sooner than the factorisation may take, and has not
// had that time. A factorisation under way is not interrupted, and would take
// the time that the others need to arrive.
func (r Race) waits(pairing string) bool {
	if _, found := r.best(); found {
		return false
	}
	p := split(pairing)
	for _, c := range r.Candidates {
		if !c.Direct || c.Solver != bare(p.solver) || c.Precond != bare(p.precond) {
			continue
		}
		takes := setupEntry * time.Duration(r.Facts.Entries)
		if c.Memory > 0 {
			takes = factorTime(c.Memory, r.Facts.N)
		}
		if r.Left > 0 {
			takes = min(takes, time.Duration(waitShare*r.given*float64(r.Left)))
		}
		return r.sooner(takes.Seconds())
	}
	return false
}

// sooner says that a live trial that has had less than so many seconds of its
// own is expected to arrive within as many.
func (r Race) sooner(than float64) bool {
	for _, h := range r.Trials {
		n := len(h.Predictions)
		if h.Stop == trace.Running && n > 0 && h.OwnTime.Seconds() < than && remaining(h, h.Predictions[n-1].Total) < than {
			return true
		}
	}
	return false
}
