package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
)

// digits: the file's values carry fewer digits than the tolerance asks for.
var digits = Rule{"few-digits", func(c Case) []Finding {
	f := c.Facts
	if f.Delta == 0 || f.Delta <= c.Tol {
		return nil
	}
	return []Finding{{Weight: Note, Certainty: inspect.Measured, Subject: OnSystem,
		Claim: fmt.Sprintf("the file has %d digits: each entry is open by %s of itself, more than the tolerance %.0e",
			f.Digits, num(f.Delta), c.Tol),
		Advice:   "what is said here holds for this file; write 17 digits to hold it for your matrix",
		Evidence: []Evidence{number("digits", float64(f.Digits), ""), number("open in an entry", f.Delta, "relative")}}}
}}

// storedZeros: much of what the file stores is zero.
var storedZeros = Rule{"stored-zeros", func(c Case) []Finding {
	f := c.Facts
	if !f.MostlyZeros() {
		return nil
	}
	try := "prune/bicgstab+none"
	switch {
	case f.Symmetric.Answer == inspect.Yes && (f.PositiveDefinite.Answer != inspect.No || semidefinite(f)):
		try = "prune/cg+none"
	case f.Symmetric.Answer == inspect.Yes:
		try = "prune/minres+none"
	}
	return []Finding{{Weight: Drag, Certainty: inspect.Proved, Subject: OnSystem,
		Claim: fmt.Sprintf("%d of %d stored entries are zero (%.0f %%): products and incomplete factors carry them along",
			f.ExplicitZeros, f.Stored, 100*float64(f.ExplicitZeros)/float64(f.Stored)),
		Advice:   "leave them out where A is assembled or written",
		Try:      []string{try},
		Evidence: []Evidence{number("stored entries that are zero", float64(f.ExplicitZeros), fmt.Sprintf("of %d", f.Stored))}}}
}}

// triangle: a general file that holds one triangle only.
var triangle = Rule{"one-triangle", func(c Case) []Finding {
	t := c.Facts.TriangleOnly
	if t.Answer != inspect.Yes {
		return nil
	}
	return []Finding{{Weight: Drag, Certainty: t.Certainty, Subject: OnSystem,
		Claim:    "the file is declared general but holds one triangle only: " + t.Why,
		Advice:   "if A is symmetric, declare the file symmetric; a triangular A is solved by one substitution",
		Evidence: []Evidence{number("entries off the diagonal in one triangle", float64(c.Facts.Entries-c.Facts.N), "")}}}
}}

// zeroRHS: the answer is known.
var zeroRHS = Rule{"zero-rhs", func(c Case) []Finding {
	if !c.Facts.ZeroRHS {
		return nil
	}
	return []Finding{{Weight: Blocker, Certainty: inspect.Proved, Subject: OnSystem,
		Claim:    "b = 0: x = 0 is an answer, and iterations tell nothing",
		Advice:   "give the right-hand side of a real step: --rhs",
		Evidence: []Evidence{number("||b||", 0, "")}}}
}}

// defaultRHS: b is not the user's.
var defaultRHS = Rule{"not-your-rhs", func(c Case) []Finding {
	switch c.Facts.RHS {
	case "ones", "made", "unit":
	default:
		return nil
	}
	return []Finding{{Weight: Note, Certainty: inspect.Proved, Subject: OnSystem,
		Claim:  fmt.Sprintf("b is %s, not yours: counts on your own b may differ several-fold", c.Facts.RHS),
		Advice: "give it: --rhs FILE"}}
}}
