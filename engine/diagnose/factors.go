package diagnose

import (
	"fmt"
	"slices"
	"strings"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

const (
	unstableGrowth = 1e8  // of ||inv(LU) 1|| ||A|| in the maximum norm (Chow and Saad 1997)
	ofItself       = 100  // times the condition of A: its own inverse grows no further
	nearlyAll      = 0.8  // of the entries of complete factors: little was dropped
	worthwhile     = 1000 // entries from which it matters
)

// unstable: the solves with incomplete factors blow up, and the trial fails.
var unstable = Rule{"unstable-factors", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		if h.Direct || h.Notes.Growth < unstableGrowth || h.Notes.Growth < ofItself*condition(c) || !failed(h) {
			continue
		}
		prep, solver, m := cut(h.Pairing)
		out = append(out, Finding{Weight: Drag, Certainty: inspect.Measured, Subject: h.Pairing,
			Claim: fmt.Sprintf("the factors of %s are ill-conditioned: ||inv(LU) 1|| ||A|| = %s (above %.0e), so that M amplifies rounding; the trial ends %s",
				m, num(h.Notes.Growth), unstableGrowth, h.Stop),
			Advice: "match or scale A before it is factorised, shift its diagonal, or drop less with pivoting",
			Try:    []string{"match/" + strings.TrimPrefix(prep, "match/") + solver + "+" + m, prep + solver + "+ilutp"},
			Evidence: []Evidence{number("||inv(LU) 1|| ||A||", h.Notes.Growth, "maximum norm"),
				number("smallest pivot", h.Notes.MinPivot, ""), number("fill", h.Notes.Fill, "entries of A")}})
	}
	return out
}}

// condition is that of A as it stands; 0 if it is not known.
func condition(c Case) float64 {
	if s := c.Facts.Study; s != nil && s.Raw != nil && s.Raw.Condition > 0 {
		return s.Raw.Condition
	}
	return 0
}

// failed says whether a trial came to an end of its own without an answer.
func failed(h trace.History) bool {
	switch h.Stop {
	case trace.FalselyConverged, trace.IterationLimit, trace.BrokeDown, trace.Diverged, trace.Stagnated:
		return true
	}
	return false
}

// nearComplete: incomplete factors that drop next to nothing.
var nearComplete = Rule{"nothing-dropped", func(c Case) (out []Finding) {
	complete, ok := direct(c)
	if !ok {
		return nil
	}
	whole := bothFactors(complete, c.Facts.N)
	for _, h := range c.Trials {
		_, _, m := cut(h.Pairing)
		kept := bothFactors(h, c.Facts.N)
		if !incomplete(m) || h.Direct || h.Notes.Entries < worthwhile || float64(kept) < nearlyAll*float64(whole) {
			continue
		}
		out = append(out, Finding{Weight: Note, Certainty: inspect.Measured, Subject: h.Pairing,
			Claim: fmt.Sprintf("%s keeps %d entries of L+U, complete factors in a good ordering have %d (%.0f %%): there is next to no fill to drop",
				m, kept, whole, 100*float64(kept)/float64(whole)),
			Advice: "factorise completely: " + complete.Pairing,
			Try:    []string{complete.Pairing},
			Evidence: []Evidence{number("entries kept", float64(kept), "of L+U"),
				number("entries of the complete factors", float64(whole), "of L+U"), number("fill", h.Notes.Fill, "entries of A")}})
	}
	return out
}}

// bothFactors counts the entries of L+U for n rows. Of factors that are one and
// its transpose the notes count one, its diagonal included.
func bothFactors(h trace.History, n int) int64 {
	if _, _, m := cut(h.Pairing); symmetricFactors(kindOfM(m)) {
		return 2*h.Notes.Entries - int64(n)
	}
	return h.Notes.Entries
}

// incomplete says whether a preconditioner drops by a tolerance or a level.
func incomplete(m string) bool {
	name, _, _ := strings.Cut(m, ":")
	return slices.Contains([]string{"ilut", "ilutp", "ict"}, name)
}

// direct is a trial with complete factors.
func direct(c Case) (trace.History, bool) {
	for _, h := range c.Trials {
		if h.Direct && h.Notes.Entries > 0 && inDouble(h) {
			return h, true
		}
	}
	return trace.History{}, false
}
