package engine

import (
	"slices"

	"dwindle/engine/choose"
	"dwindle/engine/run"
	"dwindle/engine/trace"
)

const repeatTimes = 2 // repetitions of a trial

// repeat runs the quickest trials of a race again, where their times are too
// close for one run to tell them apart and there is time.
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
		cost := repeatTimes * histories[i].OwnTime
		if cost > left {
			trials = slices.Delete(trials, i, i+1) // another may still fit
			continue
		}
		left -= cost
		b.Repeat(s.ctx, trials[i], repeatTimes)
		if trials[i].History().Reruns == nil {
			return // something else is wanted of the bench
		}
	}
}
