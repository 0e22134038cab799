package engine

import (
	"slices"
	"time"

	"dwindle/engine/run"
	"dwindle/engine/trace"
)

const (
	repeatTimes  = 2   // repetitions of a trial
	repeatMost   = 5   // trials that are repeated
	repeatWithin = 1.5 // times the best's time: those further off are not
)

// repeat runs the quickest trials of a race again, where their times are too
// close for one run to tell them apart and there is time.
func (s *Session) repeat(b *run.Bench) {
	left := s.rerunBudget()
	list := nearBest(b.Trials())
	if len(list) < 2 {
		return
	}
	for _, t := range list {
		h := t.History()
		if cost := repeatTimes * h.OwnTime; cost <= left && h.Reruns == nil {
			left -= cost
			b.Repeat(s.ctx, t, repeatTimes)
		}
	}
}

// nearBest picks the trials that reached the target in about the best's time, the
// quickest first.
func nearBest(trials []*run.Trial) []*run.Trial {
	own := func(t *run.Trial) time.Duration { h := t.History(); return h.OwnTime }
	list := slices.DeleteFunc(slices.Clone(trials), func(t *run.Trial) bool { return t.History().Stop != trace.Converged })
	slices.SortStableFunc(list, func(a, b *run.Trial) int { return int(own(a) - own(b)) })
	for i, t := range list {
		if i == repeatMost || float64(own(t)) > repeatWithin*float64(own(list[0])) {
			return list[:i]
		}
	}
	return list
}
