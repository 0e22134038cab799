package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// apart is how far outside the rest a decoupled row's eigenvalue must lie.
const apart = 2

// causeGain is how much smaller the condition must be without these rows before
// they are called its cause.
const causeGain = 1000

// singletons: decoupled rows whose diagonal lies outside the spectrum of the
// rest and makes the condition number.
var singletons = Rule{"singleton-rows", func(c Case) []Finding {
	f := c.Facts
	if f.Singletons == 0 || f.Singletons == f.N || f.Symmetric.Answer != inspect.Yes ||
		f.PositiveDefinite.Answer == inspect.No || !(f.SingletonDiag.Min > 0) {
		return nil
	}
	if g, ok := measuredSingletons(c); ok {
		return g
	}
	low, how, certainty := restLow(c)
	high := f.RestGershgorin.Max
	g := Finding{Weight: Drag, Subject: OnSystem, Certainty: certainty,
		Advice: "eliminate these rows, or rescale them (jacobi does)",
		Try:    []string{"cg+jacobi"},
		Evidence: []Evidence{{Quantity: "decoupled rows", Value: float64(f.Singletons), Iteration: none, Rows: f.SingletonRows},
			number("their smallest diagonal", f.SingletonDiag.Min, ""), number("their largest diagonal", f.SingletonDiag.Max, ""),
			number("smallest eigenvalue of the rest at least", low, ""), number("largest eigenvalue of the rest at most", high, "")}}
	switch {
	case low > apart*f.SingletonDiag.Min:
		g.Claim = fmt.Sprintf("%d decoupled rows (diagonal %s) lie below the rest, which starts at %s or above (%s): they raise the condition %s-fold or more",
			f.Singletons, num(f.SingletonDiag.Min), num(low), how, num(low/f.SingletonDiag.Min))
	case f.SingletonDiag.Max > apart*high:
		g.Certainty = inspect.Proved
		g.Claim = fmt.Sprintf("%d decoupled rows (diagonal %s) lie above the rest, which ends at %s or below (Gershgorin): they raise the condition %s-fold or more",
			f.Singletons, num(f.SingletonDiag.Max), num(high), num(f.SingletonDiag.Max/high))
	default:
		return nil
	}
	if words, evidence, ok := withoutSingletons(c); ok {
		g.Claim, g.Evidence = g.Claim+"; without them "+words, append(g.Evidence, evidence...)
	}
	return []Finding{g}
}}

// measuredSingletons judges by the spectra with and without these rows, where
// both are known; ok is false where they are not.
func measuredSingletons(c Case) (out []Finding, ok bool) {
	f := c.Facts
	s := f.Study
	if s == nil || s.Raw == nil || s.Rest == nil || !(s.Raw.Condition > 0) || !(s.Rest.Condition > 0) {
		return nil, false
	}
	raw, rest := s.Raw, s.Rest
	gain := raw.Condition / rest.Condition
	if gain < apart {
		return nil, true
	}
	does := "raise"
	if gain >= causeGain {
		does = "are the cause of"
	}
	g := Finding{Weight: Drag, Subject: OnSystem, Certainty: lesser(raw.Certainty, rest.Certainty),
		Claim: fmt.Sprintf("%d decoupled rows (diagonal %s) %s the condition %s: without them it is %s",
			f.Singletons, num(f.SingletonDiag.Min), does, num(raw.Condition), num(rest.Condition)),
		Advice: "eliminate these rows, or rescale them (jacobi does)",
		Try:    []string{"cg+jacobi"},
		Evidence: []Evidence{{Quantity: "decoupled rows", Value: float64(f.Singletons), Iteration: none, Rows: f.SingletonRows},
			number("their smallest diagonal", f.SingletonDiag.Min, ""), number("their largest diagonal", f.SingletonDiag.Max, ""),
			number("condition", raw.Condition, ""), number("condition without them", rest.Condition, ""),
			number("smallest eigenvalue of the rest", rest.Smallest, ""), number("largest eigenvalue of the rest", rest.Largest, "")}}
	if words, evidence, ok := withoutSingletons(c); ok {
		g.Claim, g.Evidence = g.Claim+", and "+words, append(g.Evidence, evidence...)
	} else {
		g.Claim += fmt.Sprintf(", the eigenvalues of the rest reach from %s to %s", num(rest.Smallest), num(rest.Largest))
	}
	return []Finding{g}, true
}

// restLow is a lower end of the spectrum of the rows that are coupled: by
// Gershgorin, or by θ·min a_ii with θ the smallest settled Ritz value of the
// Jacobi-preconditioned matrix.
func restLow(c Case) (low float64, how string, certainty inspect.Certainty) {
	f := c.Facts
	low, how, certainty = f.RestGershgorin.Min, "Gershgorin", inspect.Proved
	for _, h := range c.Trials {
		prep, _, m := cut(h.Pairing)
		k := h.Condition
		if prep != "" || m != "jacobi" || !k.Settled || k.Negative || k.Of == "" || h.Stop == trace.Refused {
			continue
		}
		if e := k.Smallest * f.RestDiag.Min; e > low {
			low, how, certainty = e, "from the Ritz values of "+h.Pairing, inspect.Estimated
		}
	}
	return low, how, certainty
}
