package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

const (
	fasterBy   = 4  // the second half of the decades takes so many times fewer iterations
	fasterFrom = 40 // iterations
)

// superlinear: cg gains speed while Ritz values settle, so that its early
// slope tells too many iterations. Told of one trial, see plainest.
var superlinear = Rule{"superlinear", func(c Case) []Finding {
	h, ok := plainest(c, func(h trace.History) bool {
		_, gain := halves(h)
		return solved(h) && gain >= fasterBy && h.Iterations >= fasterFrom
	})
	if !ok {
		return nil
	}
	at, gain := halves(h)
	return []Finding{{Weight: Note, Certainty: inspect.Measured, Subject: h.Pairing,
		Claim: fmt.Sprintf("it gains speed on its way: the first half of the decades took %d iterations, the second %.0f times fewer, as Ritz values settled",
			at, gain),
		Advice: "do not judge it by its first iterations; the slope there foretells too many",
		Evidence: []Evidence{{Quantity: "half of the decades of the energy error", Value: gain,
			Unit: "times faster after", Iteration: at}}}}
}}

// halves returns the iteration at which half of the decades of the energy
// error were gained, and how many times fewer iterations the other half took.
func halves(h trace.History) (at int, gain float64) {
	e := h.EnergyErrors
	if len(e) < 4 {
		return 0, 0
	}
	last := e[len(e)-1]
	half := math.Sqrt(e[0].Lower * last.Lower)
	for _, x := range e {
		if x.Lower <= half {
			return x.Iter, float64(x.Iter) / float64(last.Iter-x.Iter+1)
		}
	}
	return 0, 0
}
