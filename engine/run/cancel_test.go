package run

import (
	"context"
	"testing"
	"time"

	"dwindle/engine/trace"
)

// What is ended while another trial of the same round moves stays ended: it is
// not set up anew because its solver is gone.
func TestEndedWithinARoundStaysEnded(t *testing.T) {
	var b *Bench
	ticks, before, done := 0, 0, make(chan struct{})
	clock := func() time.Duration {
		ticks++
		if b == nil || done == nil {
			return time.Duration(ticks) * time.Millisecond
		}
		first, second := b.trials[0].History(), b.trials[1].History()
		switch {
		case second.Iterations == 0:
			before = first.Iterations
		case first.Iterations > before: // in its second slice, with the other one's still to come
			over := done
			done = nil
			go func() {
				b.CancelAll(trace.TimeLimit, "the time is over")
				close(over)
			}()
			for !b.wanted() {
				time.Sleep(time.Millisecond)
			}
		}
		return time.Duration(ticks) * time.Millisecond
	}
	over := done
	made := NewBench(sample(t, "plate:60"), limits(1e-14, 100_000), 0, clock)
	for _, p := range []string{"cg+none", "cr+none"} {
		m, err := Parse(p)
		if err != nil {
			t.Fatal(err)
		}
		made.Add(m)
	}
	b = made
	ctx, cancel := context.WithTimeout(context.Background(), time.Minute)
	defer cancel()
	ended := make(chan struct{})
	go func() { b.Run(ctx); close(ended) }()
	<-over
	time.Sleep(50 * time.Millisecond) // the round goes to its end
	cancel()
	<-ended
	for _, u := range b.Trials() {
		if h := u.History(); h.Stop != trace.TimeLimit || h.Iterations == 0 {
			t.Errorf("%s after %d iterations: %v", h.Pairing, h.Iterations, h.Stop)
		}
	}
}
