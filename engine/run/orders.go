package run

import (
	"context"

	"dwindle/engine/trace"
)

// Pause returns when no trial moves any more; Continue lets them go on.
func (b *Bench) Pause() {
	b.mu.Lock()
	defer b.mu.Unlock()
	b.paused = true
	for b.moving {
		b.wake.Wait()
	}
}

// Continue takes Pause back.
func (b *Bench) Continue() {
	b.mu.Lock()
	defer b.mu.Unlock()
	b.paused = false
	b.wake.Broadcast()
}

// Find returns the trial with this id, or nil.
func (b *Bench) Find(id int) *Trial {
	b.mu.Lock()
	defer b.mu.Unlock()
	for _, t := range b.trials {
		if t.ID == id {
			return t
		}
	}
	return nil
}

// Drop ends the trial and takes it off the list.
func (b *Bench) Drop(id int) {
	t := b.Find(id)
	if t == nil {
		return
	}
	b.Cancel(t, trace.Cancelled, "dropped")
	b.mu.Lock()
	defer b.mu.Unlock()
	for i, u := range b.trials {
		if u == t {
			b.trials = append(b.trials[:i:i], b.trials[i+1:]...)
			break
		}
	}
	b.changed()
}

// Cancel ends one trial with the given ending, as soon as its step is done.
func (b *Bench) Cancel(t *Trial, stop trace.Stop, reason string) {
	t.interrupt()
	b.withStill(func() {
		t.end(stop, reason)
		t.release()
	})
}

// CancelAll ends every live trial, and nobody steers any more.
func (b *Bench) CancelAll(stop trace.Stop, reason string) {
	for _, t := range b.Trials() {
		if !t.ended() {
			t.interrupt()
		}
	}
	b.withStill(func() {
		for _, t := range b.Trials() {
			t.end(stop, reason)
			t.release()
		}
		b.mu.Lock()
		b.steer = nil
		b.mu.Unlock()
	})
}

// withStill runs f while no trial moves.
func (b *Bench) withStill(f func()) {
	b.mu.Lock()
	was := b.paused
	b.mu.Unlock()
	b.Pause()
	f()
	b.mu.Lock()
	b.paused = was
	b.changed()
	b.wake.Broadcast()
	b.mu.Unlock()
}

// Hold lets a trial wait, or go on.
func (b *Bench) Hold(t *Trial, hold bool) {
	t.mu.Lock()
	t.held = hold
	switch {
	case t.hist.Stop.Ended():
	case hold && t.hist.Stop != trace.SettingUp:
		t.hist.Stop = trace.Held
	case !hold && t.hist.Stop == trace.Held:
		t.hist.Stop = trace.Running
		if len(t.hist.Records) == 0 {
			t.hist.Stop = trace.Waiting
		}
	}
	t.mu.Unlock()
	b.mu.Lock()
	b.changed()
	b.wake.Broadcast()
	b.mu.Unlock()
}

// MarkToday marks the trial, and no other; nil marks none.
func (b *Bench) MarkToday(t *Trial) {
	for _, u := range b.Trials() {
		u.mu.Lock()
		u.hist.Today = u == t
		u.mu.Unlock()
	}
	b.changed()
}

// Live says whether any trial has not ended.
func (b *Bench) Live() bool {
	for _, t := range b.Trials() {
		if !t.ended() {
			return true
		}
	}
	return false
}

// WaitEnded returns when every trial has ended and left its answer and nobody
// steers any more, or ctx is done.
func (b *Bench) WaitEnded(ctx context.Context) {
	stop := context.AfterFunc(ctx, func() {
		b.mu.Lock()
		b.wake.Broadcast()
		b.mu.Unlock()
	})
	defer stop()
	b.mu.Lock()
	defer b.mu.Unlock()
	for ctx.Err() == nil {
		ended := !b.moving && b.steer == nil
		for _, t := range b.trials {
			ended = ended && t.ended()
		}
		if ended {
			return
		}
		b.wake.Wait()
	}
}
