package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
)

// farFromNormal is the departure from normality from which eigenvalues tell
// next to nothing: they make up less than a fifth of ‖A‖_F².
const farFromNormal = 0.9

// nonNormal: eigenvalues do not tell what GMRES will do.
var nonNormal = Rule{"non-normal", func(c Case) []Finding {
	f := c.Facts
	if f.Study == nil || f.Study.Normality == nil || !(f.Study.Normality.Henrici >= farFromNormal) {
		return nil
	}
	m := f.Study.Normality
	size := fmt.Sprintf("at least %.3f", m.Henrici)
	if m.Exact {
		size = fmt.Sprintf("%.3f", m.Henrici)
	}
	g := Finding{Weight: Note, Certainty: inspect.Measured, Subject: OnSystem,
		Claim:    fmt.Sprintf("A is far from normal: its departure from normality is %s of ||A||_F, so eigenvalues do not tell how gmres will converge", size),
		Advice:   "judge by residual curves, not by eigenvalues; a preconditioner or scaling changes the picture first",
		Try:      instead(f),
		Evidence: []Evidence{number("departure from normality", m.Henrici, "")}}
	if m.FieldHoldsZero {
		g.Claim += fmt.Sprintf("; its field of values reaches from %s to %s, over zero, and bounds nothing either", num(m.FieldMin), num(m.FieldMax))
		g.Evidence = append(g.Evidence, number("smallest eigenvalue of (A+A')/2", m.FieldMin, ""), number("largest eigenvalue of (A+A')/2", m.FieldMax, ""))
	}
	return []Finding{g}
}}
