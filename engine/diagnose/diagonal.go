package diagnose

import (
	"dwindle/engine/inspect"
)

// diagonal: no row holds anything beside its diagonal entry, so that there is
// nothing to iterate on.
var diagonal = Rule{"diagonal", func(c Case) []Finding {
	f := c.Facts
	if f.N == 0 || f.MatrixFree || f.Singletons != f.N {
		return nil
	}
	g := Finding{Weight: Note, Certainty: inspect.Proved, Subject: OnSystem,
		Claim:    "A is diagonal: each unknown is its b over its entry, and whatever a method does beside shows the method alone",
		Advice:   "divide, or use jacobi, which does it in one step",
		Try:      []string{"cg+jacobi"},
		Evidence: []Evidence{number("rows that hold nothing but the diagonal", float64(f.Singletons), "")}}
	if f.PositiveDefinite.Answer != inspect.Yes {
		g.Try = []string{"gmres:30+jacobi"}
	}
	return []Finding{g}
}}
