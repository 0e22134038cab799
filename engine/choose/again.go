package choose

import "dwindle/engine/trace"

const (
	againMost   = 8   // trials of a race that are run again
	againWithin = 1.5 // times the best's cost: those further off are not
)

// Again is the place of the trial that is to be run again next: the quickest of
// those in about the best's time that has not been; -1 where there is none, or
// nothing comes near the best. What repetitions show counts at once, so that no
// trial is ahead for good by one lucky run.
func Again(trials []trace.History) int {
	all := costs(trials)
	best := -1
	for i, h := range trials {
		if reached(h) && (best < 0 || all[i].own < all[best].own) {
			best = i
		}
	}
	next, near, done := -1, 0, 0
	for i, h := range trials {
		if !reached(h) || all[i].own > againWithin*all[best].own {
			continue
		}
		near++
		switch {
		case h.Reruns != nil:
			done++
		case next < 0 || all[i].own < all[next].own:
			next = i
		}
	}
	if near < 2 || done >= againMost {
		return -1
	}
	return next
}
