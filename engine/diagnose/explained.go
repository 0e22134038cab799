package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

const (
	explains  = 0.6 // of the bound: a count from there on is explained by the condition
	far       = 0.1 // of the bound: a count below is not
	restPart  = 0.3 // of the bound of the rest: a count from there on is explained by the rest
	knownFrom = 50  // iterations
)

// explained: whether the condition number is why cg takes its count. Told of
// one trial, see plainest.
var explained = Rule{"condition", func(c Case) []Finding {
	h, ok := plainest(c, func(h trace.History) bool {
		return solved(h) && h.Energy && h.Condition.Settled && h.Iterations >= knownFrom
	})
	if !ok {
		return nil
	}
	kappa := h.Condition.Estimate
	bound := allows(kappa, c.Tol)
	part := float64(h.Iterations) / bound
	f := Finding{Weight: Note, Certainty: inspect.Estimated, Subject: h.Pairing,
		Evidence: []Evidence{{Quantity: "condition of " + spectrumOf(h) + ", at least", Value: kappa, Iteration: h.Iterations},
			number("iterations it bounds, sqrt(k)/2 ln(2/tol)", bound, ""), number("iterations", float64(h.Iterations), "")}}
	w, outlying := madeBy(c, h)
	switch {
	case part >= explains && part <= 1.2:
		f.Claim = fmt.Sprintf("the condition of %s, %s or more, explains its count: it allows %.0f its, it takes %d",
			spectrumOf(h), num(kappa), bound, h.Iterations)
		f.Advice = "only a preconditioner that lowers the condition shortens it"
	case part <= far && outlying:
		left := h.Condition.Largest / w.Next
		f.Claim = fmt.Sprintf("the condition of %s, %s, would allow %.3g its, it takes %d: %s the condition, the rest has %s, which allows %.0f",
			spectrumOf(h), num(kappa), bound, h.Iterations, count(w.Removed, "eigenvalue")+verb(w.Removed, " makes", " make"),
			num(left), allows(left, c.Tol))
		f.Advice = "judge by the rest of the spectrum, not by the condition"
		f.Evidence = append(f.Evidence, number("condition of the rest", left, ""))
	default:
		return nil
	}
	return []Finding{f}
}}

// allows is the bound of cg's iterations by the condition number,
// √κ/2·ln(2/tol) (Daniel 1967).
func allows(kappa, tol float64) float64 { return math.Ceil(math.Sqrt(kappa) / 2 * math.Log(2/tol)) }

// madeBy returns the few eigenvalues that make the condition, where the rest
// explains the count.
func madeBy(c Case, h trace.History) (trace.Counterfactual, bool) {
	for _, w := range h.Without {
		if float64(h.Iterations) >= restPart*allows(h.Condition.Largest/w.Next, c.Tol) {
			return w, true
		}
	}
	return trace.Counterfactual{}, false
}
