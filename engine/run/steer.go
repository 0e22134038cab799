package run

import (
	"time"

	"dwindle/engine/trace"
)

// Steer lets f look at the trials and give orders between rounds, on the
// goroutine of Run and while no trial moves, until it returns false. As long
// as it goes on, WaitEnded waits. CancelAll takes it back. f may call Add,
// Bound, Retire and History, but nothing that waits for trials to stand still.
func (b *Bench) Steer(f func() bool) {
	b.mu.Lock()
	defer b.mu.Unlock()
	b.steer = f
	b.wake.Broadcast()
}

// Steered says whether somebody steers.
func (b *Bench) Steered() bool {
	b.mu.Lock()
	defer b.mu.Unlock()
	return b.steer != nil
}

// Bound bounds the set-up of the trial, which then ends as outpaced; 0 takes
// the bound back. It does not reach a set-up that is under way.
func (b *Bench) Bound(t *Trial, setup time.Duration) {
	t.mu.Lock()
	defer t.mu.Unlock()
	t.wait = setup
}

// Retire ends a trial that has been outpaced. Only who steers may call it.
func (b *Bench) Retire(t *Trial, reason string) {
	t.end(trace.Outpaced, reason)
	t.release()
	b.compare()
}

// askSteersman asks once, unless the bench pauses.
func (b *Bench) askSteersman() {
	b.mu.Lock()
	f := b.steer
	if b.paused || b.stopped || f == nil {
		b.mu.Unlock()
		return
	}
	b.moving = true
	b.mu.Unlock()
	goesOn := f()
	b.mu.Lock()
	if !goesOn {
		b.steer = nil
	}
	b.moving = false
	b.changed()
	b.wake.Broadcast()
	b.mu.Unlock()
}
