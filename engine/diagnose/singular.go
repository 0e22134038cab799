package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
)

// upToConstant: A maps constants to zero, and b is in its range all the same, as
// far as that is known: the answer exists, and is not the only one. Silent where
// more than constants is known to be free.
var upToConstant = Rule{"up-to-a-constant", func(c Case) []Finding {
	f := c.Facts
	u := f.Unreachable
	open := u.Answer == inspect.Unknown && !math.IsNaN(u.Value)
	if f.RowSumsZero.Answer != inspect.Yes || f.NullComponents == 0 || u.Answer != inspect.No && !open ||
		f.Study != nil && max(f.Study.Nullity, more(f)) > f.NullComponents {
		return nil
	}
	parts := ""
	if f.Components > 1 {
		parts = fmt.Sprintf(" in each of %d of its %d parts", f.NullComponents, f.Components)
	}
	claim, vectors := "b is consistent, so that x is known up to a constant there", "null vectors"
	if open {
		claim, vectors = "b is consistent with that, so that x is known up to a constant there, and up to more if A has other null vectors", "null vectors seen"
	}
	return []Finding{{Weight: Note, Certainty: lesser(f.RowSumsZero.Certainty, u.Certainty), Subject: OnSystem,
		Claim:  fmt.Sprintf("A is singular: its rows sum to zero%s; %s", parts, claim),
		Advice: "methods of Krylov spaces find one answer as A stands; fix one unknown, or take the mean out of x, to name it",
		Evidence: []Evidence{number(vectors, float64(f.NullComponents), ""),
			number("part of b out of reach", u.Value, "of ||b||")}}}
}}
