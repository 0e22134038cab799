package engine

import (
	"slices"
	"time"

	"dwindle/engine/run"
	"dwindle/engine/trace"
)

const (
	rerunTimes   = 4               // reruns of a trial
	rerunShare   = 0.1             // of the seconds of a run that all reruns may take
	rerunAtMost  = 3 * time.Second // and in the interface
	rerunFastest = 2               // so many of the quickest trials are run again, and today's
	rerunFrom    = 20              // iterations: below, rounding moves a count by one at most
)

// rerun runs the trials that matter to the choice again on right-hand sides
// moved by rounding, where that is cheap: the quickest ones and today's. It is
// the last thing a run does, on nobody's clock.
func (s *Session) rerun(b *run.Bench) {
	left := s.rerunBudget()
	for _, t := range worthRerunning(b.Trials()) {
		h := t.History()
		if cost := rerunTimes * h.OwnTime; cost <= left {
			left -= cost
			b.Again(s.ctx, t, rerunTimes)
		}
	}
}

// rerunBudget is the time all reruns may take: none where nobody set a time
// and nobody looks.
func (s *Session) rerunBudget() time.Duration {
	switch {
	case s.opt.Seconds > 0:
		s.mu.Lock()
		left := time.Duration(s.opt.Seconds*1e9) - s.elapsed()
		s.mu.Unlock()
		return min(left, time.Duration(rerunShare*s.opt.Seconds*1e9))
	case s.opt.Interactive:
		return rerunAtMost
	}
	return 0
}

// worthRerunning picks today's trial and the quickest that converged, the
// quickest first.
func worthRerunning(trials []*run.Trial) []*run.Trial {
	own := func(t *run.Trial) time.Duration { h := t.History(); return h.OwnTime }
	list := slices.DeleteFunc(slices.Clone(trials), func(t *run.Trial) bool {
		h := t.History()
		return h.Stop != trace.Converged || h.Direct || h.Iterations < rerunFrom || h.Counts != nil
	})
	slices.SortStableFunc(list, func(a, b *run.Trial) int { return int(own(a) - own(b)) })
	picked := list[:min(rerunFastest, len(list))]
	for _, t := range list[len(picked):] {
		if h := t.History(); h.Today {
			picked = append(picked, t)
		}
	}
	return picked
}
