package run

import (
	"context"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// Columns measures one method on several right-hand sides with one set-up. Only
// who steers may use it.
type Columns struct {
	bench  *Bench
	method Method
	ready  linear.Applier // M, once built
	live   *Trial         // the one under way; nil between two
	Done   []trace.Column
}

// NewColumns begins such a measurement.
func (b *Bench) NewColumns(m Method) *Columns { return &Columns{bench: b, method: m} }

// Next solves with right-hand side rhs (length n), which its file counts as
// index. It returns false when it was interrupted by a pause, an order to end
// or ctx; called again with the same it goes on.
func (c *Columns) Next(ctx context.Context, index int, rhs []float64) bool {
	if c.live == nil {
		c.live = c.begin(rhs)
	}
	t := c.live
	for t.canMove() {
		if ctx.Err() != nil || c.bench.wanted() {
			return false
		}
		t.budget += minQuantum
		t.advance(ctx)
	}
	if c.ready == nil && t.m != nil {
		c.ready = t.m.inner
	}
	h := t.History()
	c.Done = append(c.Done, trace.Column{Index: index, Iterations: h.Iterations, Seconds: (h.OwnTime - h.SetupTime).Seconds(),
		True: h.TrueResidual, Reached: h.Stop == trace.Converged || h.Stop == trace.LeastSquares})
	t.release()
	c.live = nil
	return true
}

// begin makes the trial of one right-hand side; it stands in no list.
func (c *Columns) begin(rhs []float64) *Trial {
	b := c.bench
	s := b.sys
	s.B, s.Exact, s.Guess = rhs, nil, nil
	t := newTrial(0, c.method, s, measure(s), b.limits, b.watch, b.scratch, 0)
	t.form, t.ready = b.formFor(c.method), c.ready
	return t
}

// Tell writes what was measured into the history of a trial.
func (c *Columns) Tell(t *Trial) {
	t.mu.Lock()
	t.hist.Columns = append([]trace.Column(nil), c.Done...)
	t.mu.Unlock()
	c.bench.changed()
}
