package diagnose

import (
	"fmt"
	"strings"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// breakdown: a quantity the method divides by vanished; or BiCGStab reached
// its answer in the half step, which looks like one and is none.
var breakdown = Rule{"breakdown", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		for _, e := range events(h, trace.HalfStep) {
			if !asked(c, h) {
				break
			}
			out = append(out, Finding{Weight: Note, Certainty: inspect.Measured, Subject: h.Pairing,
				Claim:    fmt.Sprintf("reached the answer in the half step of iteration %d (||s|| = %s of ||r0||): no breakdown, but a code that divides by t't stops with one", e.Iter, num(e.Value)),
				Advice:   "test ||s|| before the second half step",
				Evidence: []Evidence{{Quantity: "||s||", Value: e.Value, Unit: "of ||r0||", Iteration: int(e.Iter)}}})
		}
		if h.Stop != trace.BrokeDown && !strings.Contains(h.Reason, trace.BrokeDown.String()) {
			continue
		}
		for _, e := range events(h, trace.Breakdown) {
			kind := kindOf(e.Quantity, regular(c.Facts) && !strings.HasSuffix(h.Pairing, "+none"))
			if kind.shadow && e.Iter == 1 {
				kind = atOnce(c, h, e.Quantity)
			}
			claim := fmt.Sprintf("broke down at iteration %d: %s = %s as a cosine, zero to rounding", e.Iter, e.Quantity, num(e.Value))
			if kind.means != "" {
				claim += ": " + kind.means
			}
			if kind.shadow && c.Facts.Singular.Answer == inspect.Yes {
				claim += "; A is singular"
			}
			out = append(out, Finding{Weight: Drag, Certainty: inspect.Measured, Subject: h.Pairing, Claim: claim, Advice: kind.remedy,
				Try: instead(c.Facts), Evidence: []Evidence{{Quantity: e.Quantity, Value: e.Value, Unit: "as a cosine", Iteration: int(e.Iter)}}})
		}
	}
	return out
}}

// atOnce is the loss of a shadow vector in the first step, where it is r0 itself:
// a number of the quadratic form of A, which may vanish for a regular A as well.
func atOnce(c Case, h trace.History, quantity string) kind {
	prep, _, m := cut(h.Pairing)
	r := "r0"
	if prep == "" && c.Facts.Guess == nil {
		r = "b"
	}
	form := r + "'A " + r
	switch {
	case m != "none" && quantity == "phat'Ap":
		form = r + "'inv(M) A inv(M) " + r
	case m != "none":
		form = r + "'A inv(M) " + r
	}
	return kind{fmt.Sprintf("the shadow vector is %s there, and %s = 0, so that no step length exists", r, form),
		"take another shadow vector or another starting guess, or use gmres", false}
}

// kind is what the loss of one quantity means and what helps.
type kind struct {
	means, remedy string
	shadow        bool // of a shadow vector
}

// kindOf tells apart what can vanish: the shadow vector turns orthogonal to
// the residual, the step meets a zero of the recurrence, or the stabiliser
// cannot move. Where A is known not to be singular, M has made it so.
func kindOf(quantity string, byM bool) kind {
	switch quantity {
	case "rho":
		return kind{"the shadow vector is orthogonal to the residual", "restart with a new shadow vector, or use gmres", true}
	case "rhat'v", "rhat'u", "phat'Ap":
		return kind{"the shadow vector is orthogonal to A p, so that no step length exists", "restart with a new shadow vector, or use gmres", true}
	case "omega":
		return kind{"A s is orthogonal to s, as near an imaginary spectrum", "use gmres, or a stabiliser of more steps: bicgstabl or idr", false}
	case "R(k,k)":
		if byM {
			return kind{"A inv(M) maps the space to itself without an answer, though A is not singular: inv(M) over- or underflows", "use another preconditioner", false}
		}
		return kind{"A maps the space to itself without an answer: A is singular on it", "use a method of least squares, or fix the null space", false}
	}
	return kind{"", "use a method that does not divide by it", false}
}

// regular says that A is known not to be singular.
func regular(f *inspect.Facts) bool { return f.Singular.Answer == inspect.No }
