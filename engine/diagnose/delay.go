package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

const (
	delayShare = 0.15 // of the iterations, from which a delay is worth a word
	delayLeast = 10   // iterations
)

// lostOrthogonality: rounding makes cg find the same eigenvalues again, and
// by as many iterations it comes later. Told of one trial, see plainest.
var lostOrthogonality = Rule{"lost-orthogonality", func(c Case) []Finding {
	h, ok := plainest(c, func(h trace.History) bool {
		return h.FloorHits == 0 && h.Delay >= delayLeast && float64(h.Delay) >= delayShare*float64(h.Iterations)
	})
	if !ok {
		return nil
	}
	f := Finding{Weight: Note, Certainty: inspect.Estimated, Subject: h.Pairing,
		Claim: fmt.Sprintf("rounding delays it by about %d of its %d iterations: without, about %d would do",
			h.Delay, h.Iterations, h.Iterations-h.Delay),
		Advice: "no fault of your code; a preconditioner that draws the far eigenvalues in shortens the delay too",
		Evidence: []Evidence{{Quantity: "iterations spent on eigenvalues found before", Value: float64(h.Delay),
			Iteration: h.Iterations}}}
	if l, ok := mostCopied(h.Locks); ok {
		f.Claim += fmt.Sprintf(" (the eigenvalue %s was found %d times)", num(l.Value), l.Copies)
		f.Evidence = append(f.Evidence, Evidence{Quantity: fmt.Sprintf("copies of the eigenvalue %s", num(l.Value)),
			Value: float64(l.Copies), Iteration: l.Iter})
	}
	return []Finding{f}
}}

// mostCopied is the settled eigenvalue that was found most often, if any was
// found twice.
func mostCopied(locks []trace.Lock) (best trace.Lock, ok bool) {
	for _, l := range locks {
		if l.Copies > max(1, best.Copies) {
			best, ok = l, true
		}
	}
	return best, ok
}
