package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// illFrom is the condition, after equilibration, from which a system is called
// ill-conditioned: methods without a strong preconditioner need hundreds of
// steps, and restarted ones hardly gain.
const illFrom = 1e5

// illConditioned: A is ill-conditioned, and scaling does not help it. Silent
// where a few nearly free directions are told to make the condition. Of a system
// too large for the second look the trials tell a lower bound.
var illConditioned = Rule{"ill-conditioned", func(c Case) []Finding {
	f := c.Facts
	if f.Study == nil || f.Singular.Answer == inspect.Yes || len(f.Study.Null) > 0 {
		return nil
	}
	g := Finding{Weight: Note, Subject: OnSystem, Advice: "a strong preconditioner, or a direct solve"}
	switch x := f.Study.Equilibrated; {
	case x != nil && x.Condition >= illFrom && !math.IsInf(x.Condition, 0):
		g.Certainty = x.Certainty
		g.Claim = fmt.Sprintf("A is ill-conditioned, %s in the %s-norm once rows and columns are equilibrated, and scaling takes no more away", num(x.Condition), x.Norm)
		g.Evidence = []Evidence{number("condition after equilibration", x.Condition, "")}
	case x == nil || !(x.Condition > 0):
		h, of := widest(c)
		if !(h.Condition.Estimate >= illFrom) || explained.Judge(c) != nil {
			return nil
		}
		k := h.Condition
		g.Certainty = inspect.Measured
		g.Claim = fmt.Sprintf("A is ill-conditioned: the condition of %s is at least %s, for %s has met Ritz values from %s to %s",
			of, num(k.Estimate), h.Pairing, num(k.Smallest), num(k.Largest))
		if f.PositiveDefinite.Answer != inspect.Yes {
			g.Certainty = inspect.Estimated
			g.Claim += ", if A is definite, which is not proved and which nothing so far speaks against"
		}
		g.Evidence = []Evidence{{Quantity: "condition of " + of + ", at least", Value: k.Estimate, Iteration: h.Iterations}}
	default:
		return nil
	}
	for _, h := range c.Trials {
		if prep, _, m := cut(h.Pairing); prep == "" && m == "none" && failed(h) {
			g.Claim += fmt.Sprintf("; %s ends %s at %s", h.Pairing, h.Stop, num(h.TrueResidual))
			break
		}
	}
	if best, ok := quickest(c); ok {
		g.Try = []string{best.Pairing}
		with := ": "
		if _, _, m := cut(best.Pairing); m == "none" {
			with = "; here without: "
		}
		g.Advice += fmt.Sprintf(with+"%s has solved the system in %s and %s", best.Pairing, steps(best.Iterations), seconds(best.OwnTime.Seconds()))
	}
	return []Finding{g}
}}

// widest is the ended trial whose Ritz values tell most of the condition of a
// definite A scaled by its diagonal, and what they are of; a zero History where
// none does. Ritz values lie within the spectrum, so that their ratio is never
// above the condition, however early the trial ended.
func widest(c Case) (best trace.History, of string) {
	f := c.Facts
	if !definiteSoFar(c) {
		return best, of
	}
	for _, h := range c.Trials {
		k, name := h.Condition, "A"
		prep, _, m := cut(h.Pairing)
		switch {
		case prep != "" || !h.Stop.Ended() || k.Negative || !(k.Estimate > best.Condition.Estimate):
			continue
		case m == "jacobi":
			name = "A scaled by its diagonal"
		case m != "none" || k.Of != "A" || f.Diag.Max > evenDiagonal*f.Diag.Min:
			continue // units may make it
		}
		best, of = h, name
	}
	return best, of
}

// evenDiagonal is the ratio of diagonal entries up to which scaling by them
// changes next to nothing.
const evenDiagonal = 1.1

// definiteSoFar says that A is positive definite, or, where that is too large to
// be proved, that conjugate gradients have converged on it and that no trial has
// met a negative Ritz value.
func definiteSoFar(c Case) bool {
	f := c.Facts
	switch {
	case f.Symmetric.Answer != inspect.Yes || f.PositiveDefinite.Answer == inspect.No:
		return false
	case f.PositiveDefinite.Answer == inspect.Yes:
		return true
	}
	converged := false
	for _, h := range c.Trials {
		if h.Condition.Negative {
			return false
		}
		_, s, _ := cut(h.Pairing)
		converged = converged || kindOfM(s) == "cg" && h.Stop == trace.Converged
	}
	return converged
}
