package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// unsolvedField: the norm over all rows met the tolerance, and a field of
// unknowns missed its own.
var unsolvedField = Rule{"unsolved-field", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		f := missed(h)
		if f == nil || !h.Stop.Ended() || solved(h) || !normMet(c, h) {
			continue
		}
		own := "its own b"
		for _, g := range c.Facts.Fields {
			if g.Name == f.Name && g.RHSNorm == 0 {
				own = "b"
			}
		}
		prep, solver, precond := cut(h.Pairing)
		g := Finding{Weight: Drag, Certainty: inspect.Measured, Subject: h.Pairing,
			Claim: fmt.Sprintf("the norm over all rows is met with %s, but field %s (%d rows) ends at %s of %s, above its %s",
				num(h.TrueResidual), f.Name, f.Rows, num(f.Residual), own, num(f.Tol)),
			Advice: "a field in small units hides in the norm: scale the rows, or ask for a smaller tolerance",
			Evidence: []Evidence{{Quantity: "residual of field " + f.Name, Value: f.Residual, Iteration: h.Iterations},
				{Quantity: "true relative residual", Value: h.TrueResidual, Iteration: h.Iterations}}}
		if prep == "" {
			g.Try = []string{"scale/" + solver + "+" + precond}
		}
		out = append(out, g)
	}
	return out
}}

// normMet says whether the session's stopping rule held at the end, whatever
// the fields say; against r₀ it cannot be told from ‖b‖ with a guess.
func normMet(c Case, h trace.History) bool {
	switch c.StopBy {
	case "backward":
		return h.Backward <= c.Tol
	case "absolute":
		return h.TrueResidual*c.Facts.RHSNorm <= c.Tol
	}
	return h.TrueResidual <= c.Tol
}

// missed is the field that misses its own tolerance by the largest factor, nil
// where each holds.
func missed(h trace.History) *trace.Field {
	var worst *trace.Field
	for k := range h.Fields {
		f := &h.Fields[k]
		if f.Tol > 0 && !(f.Residual <= f.Tol) && (worst == nil || f.Residual*worst.Tol > worst.Residual*f.Tol) {
			worst = f
		}
	}
	return worst
}

// inField tells which field all rows belong to, "" where they are of several.
func (c Case) inField(rows []int) string {
	if len(rows) == 0 {
		return ""
	}
	field := c.Facts.Names.Field(rows[0])
	for _, r := range rows {
		if c.Facts.Names.Field(r) != field {
			return ""
		}
	}
	if field == "" {
		return ""
	}
	return ", all in field " + field
}
