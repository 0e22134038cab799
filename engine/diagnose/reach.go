package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
)

// unreachable: a part of b is out of A's range, so that no x makes the
// residual smaller than that part.
var unreachable = Rule{"unreachable-rhs", func(c Case) []Finding {
	u := c.Facts.Unreachable
	if u.Answer != inspect.Yes || !(u.Value > c.Tol) {
		return nil
	}
	return []Finding{{Weight: Blocker, Certainty: u.Certainty, Subject: OnSystem,
		Claim: fmt.Sprintf("no x brings ||b-Ax||/||b|| below %s: that part of b is out of A's range (%s)",
			fmt.Sprintf("%.6g", u.Value), u.Why),
		Advice:   "fix one unknown, make b consistent, or solve for its reachable part",
		Try:      []string{"minres+none", "project/cg+jacobi"},
		Evidence: []Evidence{{Quantity: "unreachable part of b", Value: u.Value, Unit: "of ||b||", Iteration: none, Rows: u.Rows}}}}
}}

// outOfReach says whether every trial without projection must fail.
func outOfReach(c Case) bool {
	return c.Facts.Unreachable.Answer == inspect.Yes && c.Facts.Unreachable.Value > c.Tol
}
