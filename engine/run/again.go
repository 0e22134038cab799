package run

import (
	"context"
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// Again runs an ended trial again, as often as asked, each time with every b_i
// moved up or down by one unit in its last place, and keeps the iterations each
// of them took in its history: how far rounding alone moves the count. Nothing
// is charged to any trial. Only who steers may call it; it gives up as soon as
// the bench is asked to pause or stop.
func (b *Bench) Again(ctx context.Context, t *Trial, times int) {
	var counts []int
	for k := range times {
		u := b.nudged(t, uint64(k))
		if !b.runOut(ctx, u) {
			return
		}
		counts = append(counts, u.hist.Iterations)
	}
	t.mu.Lock()
	t.hist.Counts = counts
	t.mu.Unlock()
	b.changed()
}

// nudged is the trial anew, on a right-hand side moved by rounding.
func (b *Bench) nudged(t *Trial, seed uint64) *Trial {
	s := b.sys
	s.B, s.Exact = make([]float64, len(b.sys.B)), nil
	linear.Uniform(s.B, seed)
	for i, sign := range s.B {
		s.B[i] = b.sys.B[i]
		if s.B[i] != 0 { // no smallest number in place of a zero
			s.B[i] = math.Nextafter(s.B[i], math.Inf(sideOf(sign)))
		}
	}
	u := newTrial(0, t.method, s, b.sizes, b.limits, b.watch, b.scratch, 0)
	u.form, u.quiet, u.turned, u.limits.Seconds = t.form, true, true, 0
	return u
}

// sideOf is 1 or −1.
func sideOf(x float64) int {
	if x < 0 {
		return -1
	}
	return 1
}

// runOut runs a trial that nobody sees to its end; false if something else is
// wanted of the bench first.
func (b *Bench) runOut(ctx context.Context, t *Trial) bool {
	defer t.guard()
	t.setUp(ctx)
	for t.canMove() {
		if ctx.Err() != nil || b.wanted() {
			return false
		}
		t.step()
	}
	return t.hist.Stop != trace.Cancelled && t.hist.Stop != trace.Failed
}

// wanted says whether the bench is to pause or stop.
func (b *Bench) wanted() bool {
	b.mu.Lock()
	defer b.mu.Unlock()
	return b.paused || b.stopped
}
