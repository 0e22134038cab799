package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// scaleLimit is the ratio of row norms from which scaling is worth a word.
const scaleLimit = 1e4

// scaling: rows live in very different units.
var scaling = Rule{"row-scaling", func(c Case) []Finding {
	f := c.Facts
	span, rows := f.RowNorm, []int{f.RowNorm.MinRow, f.RowNorm.MaxRow}
	if f.Singletons > 0 {
		span, rows = f.RestDiag, []int{f.RestDiag.MinRow, f.RestDiag.MaxRow}
	}
	if !(span.Min > 0) || span.Max/span.Min < scaleLimit {
		return nil
	}
	try := []string{"scale/gmres:30+none"}
	switch {
	case f.Symmetric.Answer == inspect.Yes && f.PositiveDefinite.Answer != inspect.No:
		try = []string{"cg+jacobi", "scale/cg+none"}
	case f.Symmetric.Answer == inspect.Yes:
		try = []string{"scale/minres+none"}
	}
	return []Finding{{Weight: Drag, Certainty: inspect.Measured, Subject: OnSystem,
		Claim: fmt.Sprintf("rows differ in size by %s (%s to %s): a norm over all of them hides the small ones",
			num(span.Max/span.Min), c.name(rows[0]), c.name(rows[1])),
		Advice:   "scale the system, or use jacobi at the least",
		Try:      try,
		Evidence: []Evidence{{Quantity: "largest over smallest row", Value: span.Max / span.Min, Iteration: none, Rows: rows}}}}
}}

// apart is how far outside the rest a decoupled row's eigenvalue must lie.
const apart = 2

// singletons: decoupled rows whose diagonal lies outside the spectrum of the
// rest and makes the condition number.
var singletons = Rule{"singleton-rows", func(c Case) []Finding {
	f := c.Facts
	if f.Singletons == 0 || f.Singletons == f.N || f.Symmetric.Answer != inspect.Yes ||
		f.PositiveDefinite.Answer == inspect.No || !(f.SingletonDiag.Min > 0) {
		return nil
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
		g.Claim, g.Evidence = g.Claim+words, append(g.Evidence, evidence...)
	}
	return []Finding{g}
}}

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
