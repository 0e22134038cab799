package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

const (
	noisy      = 0.02 // half the range of the counts over their middle
	fewestRuns = 3
)

// noise: changing b by one unit in the last place changes the count.
var noise = Rule{"iteration-noise", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		low, high, ok := Counts(h)
		middle, half := float64(low+high)/2, float64(high-low)/2
		if !ok || !asked(c, h) || half < noisy*middle || high-low < 2 {
			continue
		}
		out = append(out, Finding{Weight: Note, Certainty: inspect.Measured, Subject: h.Pairing,
			Claim: fmt.Sprintf("its count is %.0f +- %.0f under changes of one unit in the last place of b (%d runs)",
				middle, math.Ceil(half), len(h.Counts)+1),
			Advice: fmt.Sprintf("compare it with others only beyond %s: rounding alone moves it that far", percent(math.Max(0.01, half/middle))),
			Evidence: []Evidence{number("fewest iterations", float64(low), ""), number("most iterations", float64(high), ""),
				number("runs", float64(len(h.Counts)+1), "")}})
	}
	return out
}}

// asked says whether somebody wants to hear of a trial that solved the system:
// it was asked for, or it is the one to be recommended.
func asked(c Case, h trace.History) bool {
	best, ok := quickest(c)
	return !c.Race || h.Today || ok && h.Pairing == best.Pairing
}

// Counts returns the fewest and the most iterations that a trial takes when
// each b_i is changed by one unit in its last place; ok is false where it was
// not run again often enough.
func Counts(h trace.History) (low, high int, ok bool) {
	low, high = h.Iterations, h.Iterations
	for _, k := range h.Counts {
		low, high = min(low, k), max(high, k)
	}
	return low, high, len(h.Counts) >= fewestRuns-1
}

// Apart says whether two trials that solved the system differ in time by more
// than rounding and the clock explain: slow/fast must exceed what the spread of
// either count allows, and at least by clock (relative).
func Apart(fast, slow trace.History, clock float64) bool {
	return slow.OwnTime.Seconds()*(1-share(slow)) > fast.OwnTime.Seconds()*(1+share(fast))*(1+clock)
}

// share is half the range of a trial's counts, relative to its own count.
func share(h trace.History) float64 {
	low, high, ok := Counts(h)
	if !ok || h.Iterations == 0 {
		return 0
	}
	return float64(high-low) / 2 / float64(h.Iterations)
}
