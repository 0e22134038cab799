package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
)

// upToConstant: A maps constants to zero, and b is in its range all the same:
// the answer exists, and is not the only one.
var upToConstant = Rule{"up-to-a-constant", func(c Case) []Finding {
	f := c.Facts
	if f.RowSumsZero.Answer != inspect.Yes || f.NullComponents == 0 || f.Unreachable.Answer != inspect.No {
		return nil
	}
	parts := ""
	if f.Components > 1 {
		parts = fmt.Sprintf(" in each of %d of its %d parts", f.NullComponents, f.Components)
	}
	return []Finding{{Weight: Note, Certainty: lesser(f.RowSumsZero.Certainty, f.Unreachable.Certainty), Subject: OnSystem,
		Claim:  fmt.Sprintf("A is singular: its rows sum to zero%s; b is consistent, so that x is known up to a constant there", parts),
		Advice: "methods of Krylov spaces find one answer as A stands; fix one unknown, or take the mean out of x, to name it",
		Evidence: []Evidence{number("null vectors", float64(f.NullComponents), ""),
			number("part of b out of reach", f.Unreachable.Value, "of ||b||")}}}
}}
