package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

const (
	lastBit   = 4 * 0x1p-53 // componentwise backward error of an answer that is right to the last bit of A's entries
	anyAnswer = 0.1         // relative residual above which x is no answer, however it came about
)

// Utmost returns the trial whose answer is all that double precision gives,
// where none has reached the tolerance: x solves a system whose entries differ
// from A's and b's by no more than their own rounding (Oettli and Prager 1964),
// so that storing any x in double precision leaves a residual of that size. A
// matrix that is singular to rounding has no such answer.
func Utmost(f *inspect.Facts, trials []trace.History) (best trace.History, ok bool) {
	if f == nil || f.Singular.Answer == inspect.Yes || holdsZero(f.Study) {
		return best, false
	}
	for _, h := range trials {
		switch {
		case solved(h):
			return best, false
		case h.Stop.Ended() && h.Componentwise <= lastBit && h.TrueResidual <= anyAnswer && (!ok || h.TrueResidual < best.TrueResidual):
			best, ok = h, true
		}
	}
	return best, ok
}

// holdsZero says that a direction is free to rounding.
func holdsZero(s *inspect.Study) bool {
	return s != nil && len(s.Null) > 0 && s.Null[0].Quotient <= inspect.ZeroLimit
}

// AskFor is a tolerance, of one digit, that can be had where x leaves this
// residual.
func AskFor(residual float64) float64 {
	r := 1.2 * residual
	unit := math.Pow(10, math.Floor(math.Log10(r)))
	return math.Ceil(r/unit) * unit
}

// precision: the tolerance asks for more than double precision can hold.
var precision = Rule{"double-precision", func(c Case) []Finding {
	h, ok := Utmost(c.Facts, c.Trials)
	if !ok || h.TrueResidual <= c.Tol {
		return nil
	}
	return []Finding{{Weight: Blocker, Certainty: inspect.Measured, Subject: OnSystem,
		Claim: fmt.Sprintf("double precision allows no %.0e here: %s solves A to the last bit of its entries, and %.2g is left",
			c.Tol, h.Pairing, h.TrueResidual),
		Advice: fmt.Sprintf("ask for %.1g, or stop by the backward error (--stop backward)", AskFor(h.TrueResidual)),
		Evidence: []Evidence{{Quantity: "componentwise backward error of " + h.Pairing, Value: h.Componentwise, Iteration: h.Iterations},
			{Quantity: "true relative residual", Value: h.TrueResidual, Iteration: h.Iterations}}}}
}}
