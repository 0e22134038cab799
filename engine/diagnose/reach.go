package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
)

// unreachable: a part of b is out of A's range, so that no x makes the
// residual smaller than that part. Silent where it is not proved and a trial
// has got clearly further.
var unreachable = Rule{"unreachable-rhs", func(c Case) []Finding {
	u := c.Facts.Unreachable
	if u.Answer != inspect.Yes || !(u.Value > c.Tol) || u.Certainty != inspect.Proved && refuted(c, u.Value) {
		return nil
	}
	g := Finding{Weight: Blocker, Certainty: u.Certainty, Subject: OnSystem,
		Claim: fmt.Sprintf("no x brings ||b-Ax||/||b|| below %s: that part of b is out of A's range (%s)",
			fmt.Sprintf("%.6g", u.Value), u.Why),
		Advice:   "fix one unknown, make b consistent, or solve for its reachable part",
		Try:      []string{"minres+none", "project/cg+jacobi"},
		Evidence: []Evidence{{Quantity: "unreachable part of b", Value: u.Value, Unit: "of ||b||", Iteration: none, Rows: u.Rows}}}
	switch f := c.Facts; {
	case f.Symmetric.Answer != inspect.Yes:
		g.Try = []string{"project/gmres:30+none"}
	case f.NegativeCount.Answer == inspect.Yes || f.DiagNegative+f.DiagZero+f.DiagMissing > 0 || f.Study != nil && f.Study.More:
		g.Try = []string{"minres+none"} // cg is none for it, or would run off along what project does not know
	}
	if left := leftOf(c.Facts); len(left) > 0 && c.Facts.ColSumsZero.Answer != inspect.Yes {
		where, rows := c.equations(left)
		g.Claim += "; " + where
		g.Advice = "these equations say the same of x and not of b: correct one of them, make b consistent, or solve for its reachable part"
		g.Evidence[0].Rows = rows
		g.Evidence = append(g.Evidence, number("||A'y||/(||A|| ||y||) after equilibration", left[0].Quotient, ""))
	}
	return []Finding{g}
}}

// refuted says whether a trial has left less than half of a residual.
func refuted(c Case, residual float64) bool {
	for _, h := range c.Trials {
		if h.BestTrue > 0 && 2*h.BestTrue < residual {
			return true
		}
	}
	return false
}

// leftOf returns the left directions of a nonsymmetric A.
func leftOf(f *inspect.Facts) []inspect.NullDirection {
	if f.Study == nil {
		return nil
	}
	return f.Study.Left
}

// equations names the rows of the most local left direction: which equations
// repeat each other.
func (c Case) equations(left []inspect.NullDirection) (claim string, rows []int) {
	d := mostLocal(left)
	rows, share := localRows(d)
	switch {
	case d.Level != nil && len(left) == 1 && d.Support > len(rows):
		claim = "the left sides add up to zero: y is constant on " + d.Level.Text(c.Facts.Names)
	case d.Support <= len(rows):
		claim = fmt.Sprintf("the equations of %s depend on each other", c.list(rows, 6))
	case share >= 0.5:
		claim = fmt.Sprintf("%d equations depend on each other, %.0f %% of it in %s", d.Support, 100*share, c.list(rows, 6))
	default:
		claim = fmt.Sprintf("%d equations depend on each other", d.Support)
	}
	return claim, rows
}

// outOfReach says whether every trial without projection must fail.
func outOfReach(c Case) bool {
	return c.Facts.Unreachable.Answer == inspect.Yes && c.Facts.Unreachable.Value > c.Tol
}

// projected are pairings that take what is out of reach out of b; none where
// not all of it is known.
func projected(f *inspect.Facts) []string {
	switch {
	case f.Study != nil && f.Study.More:
		return nil
	case f.Symmetric.Answer != inspect.Yes:
		return []string{"project/gmres:30+none"}
	case f.NegativeCount.Answer == inspect.Yes || f.DiagNegative+f.DiagZero+f.DiagMissing > 0:
		return []string{"project/minres+none"}
	}
	return []string{"project/cg+jacobi"}
}
