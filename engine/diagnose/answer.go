package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// fewDigits is the part of the tolerance's digits below which an answer is
// worth a word.
const fewDigits = 0.5

// answer: a residual that met the target still leaves few correct digits. Told
// of the trial that solved the system best.
var answer = Rule{"few-correct-digits", func(c Case) []Finding {
	h, ok := bestSolved(c)
	if !ok || c.Facts.ZeroRHS || h.Stop != trace.Converged || c.Facts.Singular.Answer == inspect.Yes {
		return nil
	}
	asked := -math.Log10(c.Tol)
	f := Finding{Weight: Drag, Certainty: inspect.Estimated, Subject: h.Pairing,
		Advice: "ask for a smaller residual where the floor allows, or scale the system: the condition decides, not the method"}
	if h.Error > 0 { // the solution is known
		digits := -math.Log10(h.Error)
		if digits >= fewDigits*asked {
			return nil
		}
		f.Certainty = inspect.Measured
		f.Claim = fmt.Sprintf("its residual meets %.0e, but the answer has an error of %s: about %s",
			c.Tol, num(h.Error), count(whole(digits), "correct digit"))
		f.Evidence = []Evidence{number("relative error", h.Error, ""), number("backward error", h.Backward, "")}
		return []Finding{f}
	}
	e := expectedError(c, h)
	if !(e.error > math.Pow(c.Tol, fewDigits)) {
		return nil
	}
	f.Claim = fmt.Sprintf("its residual meets %.0e, but backward error %s times condition %s (of %s) may leave no more than %s",
		c.Tol, num(e.backward), num(e.kappa), e.of, count(whole(-math.Log10(e.error)), "correct digit"))
	f.Evidence = []Evidence{number("backward error", e.backward, ""), number("condition of "+e.of, e.kappa, ""),
		number("relative error to expect, at most", e.error, "")}
	return []Finding{f}
}}

// whole is the number of whole digits, at least none.
func whole(digits float64) int { return max(0, int(digits+0.3)) }

// bestSolved is the solved trial of the smallest backward error.
func bestSolved(c Case) (best trace.History, ok bool) {
	for _, h := range c.Trials {
		if inDouble(h) && h.Backward >= 0 && (!ok || h.Backward < best.Backward) {
			best, ok = h, true
		}
	}
	return best, ok
}

// expected is a bound of the relative error and what it is the product of.
type expected struct {
	error, backward, kappa float64
	of                     string // the matrix of condition kappa
}

// expectedError is backward error times condition (Rigal and Gaches 1967), the
// smaller of the two ways that are known: of A as it is, and twice the
// componentwise one of A equilibrated. NaN where no condition is known.
func expectedError(c Case, h trace.History) expected {
	e := expected{error: math.NaN()}
	if k, ok := conditionOfA(c); ok {
		e = expected{k * h.Backward, h.Backward, k, "A"}
	}
	if s := c.Facts.Study; s != nil && s.Equilibrated != nil && s.Equilibrated.Condition > 0 && h.Componentwise > 0 {
		k := s.Equilibrated.Condition
		if x := 2 * k * h.Componentwise; !(x >= e.error) {
			e = expected{x, 2 * h.Componentwise, k, "A equilibrated"}
		}
	}
	return e
}

// conditionOfA is the condition of A itself, from the study or the settled
// Ritz values of a trial without a preconditioner.
func conditionOfA(c Case) (float64, bool) {
	if s := c.Facts.Study; s != nil && s.Raw != nil && s.Raw.Condition > 0 {
		return s.Raw.Condition, true
	}
	for _, h := range c.Trials {
		k := h.Condition
		prep, _, _ := cut(h.Pairing)
		if k.Of == "A" && prep == "" && k.Settled && !k.Negative && explainable(c, h) {
			return k.Estimate, true
		}
	}
	return 0, false
}
