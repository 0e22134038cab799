package run

import "context"

const (
	warmPairing = "cg+none" // it needs nothing of A but products
	warmSteps   = 3
)

// warm sets up a trial that nobody sees and moves it a little, so that the
// first trial does not pay for pages, threads and caches that all of them use.
func (b *Bench) warm(ctx context.Context) {
	m, err := Parse(warmPairing)
	if err != nil || m.Refuse(b.have) != "" {
		return
	}
	t := newTrial(0, m, b.sys, b.sizes, b.limits, watch{clock: MachineClock()}, b.scratch, 0)
	t.quiet, t.turned = true, true
	defer t.guard()
	t.setUp(ctx)
	for range warmSteps {
		if ctx.Err() != nil || !t.canMove() {
			return
		}
		t.step()
	}
}
