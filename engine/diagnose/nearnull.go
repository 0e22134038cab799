package diagnose

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"dwindle/engine/inspect"
)

// nearNull: a few directions are mapped nearly to zero, far below all others.
var nearNull = Rule{"near-null", func(c Case) []Finding {
	f := c.Facts
	if f.Study == nil || len(f.Study.Null) <= constants(f) || f.SingularAtSight() && f.RowSumsZero.Answer != inspect.Yes ||
		mechanism.Judge(c) != nil {
		return nil
	}
	s := f.Study
	d, last := s.Null[0], s.Null[len(s.Null)-1]
	g := Finding{Weight: Drag, Certainty: inspect.Estimated, Subject: OnSystem, Claim: freeClaim(len(s.Null), last),
		Advice: "if a mode of the model should be held, hold it; otherwise solve directly, trust only these digits" + measuredDigits(c) + ", and " + reachable(c),
		Try:    []string{"richardson:1+lu"},
		Evidence: []Evidence{{Quantity: "||Av||/(||A|| ||v||) after equilibration", Value: last.Quotient, Iteration: none, Rows: d.Rows},
			number("the next direction", last.Next, "")}}
	if f.Symmetric.Answer == inspect.Yes {
		g.Try = []string{"richardson:1+ldl"}
	}
	if zeros(s.Null) > constants(f) && f.PositiveDefinite.Answer != inspect.Yes {
		c.singularToRounding(&g)
		return []Finding{g}
	}
	if c.tied(&g) {
		g.Evidence[0].Rows = nil
	}
	if x := s.Equilibrated; x != nil && x.Condition > 0 && s.Digits >= 0 {
		g.Claim += fmt.Sprintf("; the condition %s leaves about %s of x", num(x.Condition), count(int(math.Round(s.Digits)), "correct digit"))
		g.Evidence = append(g.Evidence, number("condition after equilibration", x.Condition, ""), number("correct digits to expect of x", math.Round(s.Digits), "about"))
	}
	g.Advice += openDigits(f, last.Quotient)
	return []Finding{g}
}}

// tied words a finding anew where all that is nearly free are pairs of unknowns
// tied to each other: beside such a tie what they do together is small, and
// there is nothing to hold.
func (c Case) tied(g *Finding) bool {
	var pairs []string
	least := math.Inf(1)
	for _, d := range c.Facts.Study.Null {
		switch {
		case d.Tied > 0:
			rows := slices.Sorted(slices.Values(d.Rows[:2]))
			pairs, least = append(pairs, c.list(rows, 2)), math.Min(least, d.Tied)
			g.Evidence = append(g.Evidence, Evidence{Quantity: "their coupling over their others", Value: d.Tied, Iteration: none, Rows: rows})
		case d.Quotient > inspect.ZeroLimit:
			return false
		}
	}
	if len(pairs) == 0 || len(pairs) < len(c.Facts.Study.Null)-constants(c.Facts) {
		return false
	}
	d := c.Facts.Study.Null[len(c.Facts.Study.Null)-1]
	g.Claim = fmt.Sprintf("the unknowns of %s are tied to each other %s times as stiffly as to all else: beside that, after equilibration, A maps what they do together to %s of its norm, the next to %s",
		strings.Join(pairs[:min(len(pairs), mostNamed)], ", "), num(least), num(d.Quotient), num(d.Next))
	if len(pairs) > mostNamed {
		g.Claim = strings.Replace(g.Claim, " are tied", fmt.Sprintf(" and %d more pairs are tied", len(pairs)-mostNamed), 1)
	}
	g.Advice = "make one unknown of such a pair, or scale the tie down: some 1e4 times the rest holds as well and costs fewer digits; otherwise solve directly, trust only these digits" +
		measuredDigits(c) + ", and " + reachable(c)
	return true
}

// singularToRounding words a finding on directions that A maps to zero to
// rounding: which unknowns carry them, which equations depend on each other,
// and whether b is within reach.
func (c Case) singularToRounding(g *Finding) {
	f := c.Facts
	free := f.Study.Null
	g.Weight, g.Certainty = Blocker, inspect.Measured
	g.Claim = "A is singular to rounding: " + g.Claim
	there := "this direction"
	if where := c.level(free); where != "" {
		g.Claim, there = g.Claim+"; "+where, "a constant there"
		g.Evidence[0].Rows = nil
	} else if rows, share := localRows(mostLocal(free)); share >= 0.5 {
		g.Claim += fmt.Sprintf("; %.0f %% of it in the unknowns of %s", 100*share, c.list(rows, 6))
	}
	g.Advice = "find out which equation repeats others, or which unknown nothing determines; b may be out of reach"
	g.Try = nil
	if left := leftOf(f); len(left) > 0 && !outOfReach(c) { // else told with b
		where, rows := c.equations(left)
		g.Claim += "; " + where
		g.Evidence = append(g.Evidence, Evidence{Quantity: "||A'y||/(||A|| ||y||) after equilibration", Value: left[0].Quotient, Iteration: none, Rows: rows})
	}
	symmetric := f.Symmetric.Answer == inspect.Yes
	switch u := f.Unreachable; {
	case u.Answer == inspect.Yes:
		g.Advice = "find out which equation repeats others, or which unknown nothing determines; until then solve for the part of b that is in reach"
		g.Try = []string{"project/gmres:30+none"}
		if symmetric {
			g.Try = []string{"minres+none"}
		}
	case u.Answer == inspect.No && symmetric:
		g.Weight = Note
		g.Claim += "; b is consistent, so that x is known up to " + there
		g.Advice = "methods of Krylov spaces find one answer as A stands; fix x in one row of it to name it"
		g.Try = []string{"minres+none"}
	case u.Answer == inspect.No:
		g.Advice = "find out which equation repeats others, or which unknown nothing determines; b is consistent all the same, so that answers exist, up to this direction"
		g.Try = []string{"gmres:30+none"}
	case symmetric:
		g.Try = []string{"minres+none"}
	}
	g.Advice += openDigits(f, free[0].Quotient)
}

// measuredDigits tells what was measured of x for this b, which the condition
// foretells for any b.
func measuredDigits(c Case) string {
	if h, ok := Utmost(c.Facts, c.Trials); ok && Right(h) != "" {
		return fmt.Sprintf(" (for this b, x of %s was found %s)", h.Pairing, Right(h))
	}
	return ""
}

// level tells where the one direction that is free to rounding is one number.
func (c Case) level(free []inspect.NullDirection) string {
	if l := free[0].Level; zeros(free) == 1 && l != nil {
		return "constant on " + l.Text(c.Facts.Names)
	}
	return ""
}

// reachable says which tolerance the trials show to be in reach.
func reachable(c Case) string {
	best, pairing := math.Inf(1), ""
	for _, h := range c.Trials {
		if h.BestTrue < best && !h.TwoDoubles {
			best, pairing = h.BestTrue, h.Pairing
		}
	}
	if best > c.Tol && best < 1 {
		return fmt.Sprintf("ask for no smaller a residual than can be had: the smallest ||b-Ax||/||b|| so far is %s, by %s", num(best), pairing)
	}
	return "ask for no smaller a residual than a direct solve gives"
}

// freeClaim tells how many directions are nearly free, and how far the least
// free of them lies below the next.
func freeClaim(n int, last inspect.NullDirection) string {
	claim := "one direction is nearly free: after equilibration A maps it to " + num(last.Quotient) + " of its norm"
	if n > 1 {
		claim = fmt.Sprintf("%d directions are nearly free: after equilibration A maps them to %s of their norm or less", n, num(last.Quotient))
	}
	if last.Next > 0 {
		claim += ", the next to " + num(last.Next)
	}
	return claim
}
