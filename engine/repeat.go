package engine

import (
	"slices"

	"dwindle/engine/choose"
	"dwindle/engine/run"
	"dwindle/engine/trace"
)

// repeat runs the quickest trials of a race again, where their times are too
// close for one run to tell them apart and there is time, one run each in turn,
// so that what slows the machine for a while is shared by all.
func (s *Session) repeat(b *run.Bench) {
	trials := b.Trials()
	for left := s.rerunBudget(); ; {
		histories := make([]trace.History, len(trials))
		for i, t := range trials {
			histories[i] = t.History()
		}
		i := choose.Again(histories)
		if i < 0 {
			return
		}
		if histories[i].OwnTime > left {
			trials = slices.Delete(trials, i, i+1) // another may still fit
			continue
		}
		left -= histories[i].OwnTime
		if !b.Repeat(s.ctx, trials[i], 1) {
			return // something else is wanted of the bench
		}
	}
}
