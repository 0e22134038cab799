package run

import (
	"context"

	"dwindle/engine/trace"
)

// Repeat runs an ended trial again as it is, as often as asked, and adds the
// times to its history: its iterates come out the same, so that only the
// machine tells the runs apart. Nothing is charged to the trial. Only who
// steers may call it; it gives up as soon as the bench is asked to pause or
// stop, and then returns false.
func (b *Bench) Repeat(ctx context.Context, t *Trial, times int) bool {
	var runs []trace.Run
	for range times {
		u := newTrial(0, t.method, b.sys, b.sizes, b.limits, b.watch, b.scratch, 0)
		u.form, u.quiet, u.turned, u.limits.Seconds = t.form, true, true, 0
		if !b.runOut(ctx, u) {
			return false
		}
		h := &u.hist
		runs = append(runs, trace.Run{Build: h.BuildTime, Setup: h.SetupTime, Own: h.OwnTime,
			BuildCPU: h.BuildCPU, SetupCPU: h.SetupCPU, OwnCPU: h.OwnCPU})
	}
	t.mu.Lock()
	t.hist.Reruns = append(t.hist.Reruns, runs...)
	t.mu.Unlock()
	b.changed()
	return true
}
