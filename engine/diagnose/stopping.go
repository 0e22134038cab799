package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// early is how far above the tolerance the true residual must still be where a
// common stopping rule holds.
const early = 100

// ruleWords names the common stopping rules.
var ruleWords = map[string]string{
	"initial":        "||r||/||r0||",
	"preconditioned": "the preconditioned residual",
	"backward":       "the backward error ||r||/(||A|| ||x|| + ||b||)",
	"energy":         "the estimated energy norm of the error",
}

// stoppingRules: a code that stops on another common rule, at the same
// tolerance, would have stopped with a residual far from it. Told of today's
// pairing, whose code it is.
var stoppingRules = Rule{"stopping-rules", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		m, ok := earliest(h, c.Tol)
		if !ok || !h.Today || !h.Stop.Ended() {
			continue
		}
		f := Finding{Weight: Note, Certainty: inspect.Measured, Subject: h.Pairing,
			Claim: fmt.Sprintf("a code that stops on %s stops at it %d: ||b-Ax||/||b|| is %s there, %.1f decades above %.0e",
				ruleWords[m.Rule], m.Iter, num(m.True), math.Log10(m.True/c.Tol), c.Tol),
			Advice:   "ask what your code's tolerance is relative to, and test ||b-Ax||/||b|| once at the end",
			Evidence: []Evidence{{Quantity: "true relative residual", Value: m.True, Iteration: m.Iter}}}
		for _, w := range h.WouldStop {
			if w.Iter >= 0 {
				f.Evidence = append(f.Evidence, Evidence{Quantity: "rule " + w.Rule + " holds", Value: w.True, Unit: "true residual", Iteration: w.Iter})
			}
		}
		out = append(out, f)
	}
	return out
}}

// earliest is the rule that holds with the largest true residual, where that
// is far above the tolerance.
func earliest(h trace.History, tol float64) (worst trace.StopMark, ok bool) {
	for _, m := range h.WouldStop {
		if m.Rule != "rhs" && m.Iter >= 0 && m.True > early*tol && !(ok && m.True <= worst.True) {
			worst, ok = m, true
		}
	}
	return worst, ok
}
