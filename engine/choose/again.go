package choose

import "dwindle/engine/trace"

const (
	againMost   = 8   // trials of a race that are run again
	againWithin = 1.5 // times the best's cost: those further off are not
	againTimes  = 2   // repetitions of each,
	againBusy   = 4   // on a busy machine
)

// Again is the place of the trial that is to be run again next: of those in
// about the best's time, or too short to be told from it, the one with the fewest runs, of these the quickest; -1
// where all have enough, or nothing comes near the best. What repetitions show
// counts at once, so that no trial is ahead for good by one lucky run.
func Again(trials []trace.History) int {
	all := costs(trials)
	best, repeated, times := -1, 0, againTimes
	for i, h := range trials {
		if inDouble(h) && (best < 0 || all[i].own < all[best].own) {
			best = i
		}
		if len(h.Reruns) > 0 {
			repeated++
		}
		if all[i].cpu {
			times = againBusy
		}
	}
	next, near := -1, 0
	for i, h := range trials {
		if !inDouble(h) || all[i].own > againWithin*all[best].own && !like(all[i].own, all[best].own) {
			continue
		}
		near++
		n := len(h.Reruns)
		if n >= times || n == 0 && repeated >= againMost {
			continue
		}
		if next < 0 || n < len(trials[next].Reruns) || n == len(trials[next].Reruns) && all[i].own < all[next].own {
			next = i
		}
	}
	if near < 2 {
		return -1
	}
	return next
}
