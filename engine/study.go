package engine

import (
	"context"
	"errors"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
)

// study takes the second look at the system: a short one before a run, a
// longer one where facts alone were asked for. Skip ends it early, with what
// it has found.
func (s *Session) study(sys linear.System, facts *inspect.Facts) (*inspect.Facts, error) {
	ctx, cancel := context.WithCancel(s.ctx)
	defer cancel()
	s.set(func() { s.skip = cancel })
	defer s.set(func() { s.skip = nil })
	budget := inspect.Quick
	if s.opt.FactsOnly {
		budget = inspect.Thorough
	}
	budget.Bytes = s.opt.Memory
	latest, err := inspect.Examine(ctx, sys, facts, budget, func(f *inspect.Facts) {
		facts = f
		s.set(func() { s.facts = f })
	})
	if errors.Is(err, context.Canceled) && s.ctx.Err() == nil {
		return facts, nil // skipped
	}
	return latest, err
}

// Skip ends the second look at the system, if it is under way.
func (s *Session) Skip() {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.skip != nil {
		s.skip()
	}
}
