package diagnose

import (
	"strings"

	"dwindle/engine/trace"
)

// plainest returns the one ended trial of which the curve of conjugate
// gradients is explained, if the rule has something to say of it: today's;
// where none is, the first without a preconditioner, else with jacobi, else
// the only trial there is. So a session of many trials is told once what its
// system does to the method, not once for each.
func plainest(c Case, speaks func(trace.History) bool) (best trace.History, ok bool) {
	least := len(plainness)
	for _, h := range c.Trials {
		k := plain(h, len(c.Trials) == 1)
		if h.Today {
			return h, explainable(c, h) && speaks(h)
		}
		if k < least && explainable(c, h) && speaks(h) {
			best, least, ok = h, k, true
		}
	}
	return best, ok
}

// plainness are the preconditioners in the order in which a trial is taken.
var plainness = []string{"none", "jacobi", ""}

// plain is the place of a trial in that order.
func plain(h trace.History, only bool) int {
	prep, _, m := cut(h.Pairing)
	for k, name := range plainness {
		if prep == "" && name != "" && strings.HasPrefix(m, name) || name == "" && only {
			return k
		}
	}
	return len(plainness)
}

// explainable says that a trial came to an end of its own within the
// assumptions of its method: what the coefficients of another tell is worth
// nothing.
func explainable(c Case, h trace.History) bool {
	_, outside := assumption(c.Facts, h)
	switch h.Stop {
	case trace.Converged, trace.LeastSquares, trace.FalselyConverged, trace.IterationLimit, trace.TimeLimit, trace.Stagnated:
		return !outside && !h.Condition.Negative
	}
	return false
}
