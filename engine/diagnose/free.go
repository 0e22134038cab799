package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
)

// mechanism: motions of a symmetric system that cost no energy, where they are
// not the constants that the facts know already.
var mechanism = Rule{"mechanism", func(c Case) []Finding {
	f := c.Facts
	if f.Study == nil || f.Symmetric.Answer != inspect.Yes || f.PositiveDefinite.Answer == inspect.Yes ||
		f.NegativeCount.Answer == inspect.Yes || f.DiagNegative > 0 {
		return nil
	}
	var free []inspect.NullDirection
	for _, d := range f.Study.Null {
		if d.Quotient <= inspect.ZeroLimit {
			free = append(free, d)
		}
	}
	if free == nil || max(f.Study.Nullity, more(f)) <= constants(f) {
		return nil
	}
	claim, rows := c.motions(free)
	g := Finding{Weight: Blocker, Certainty: inspect.Measured, Subject: OnSystem,
		Claim: claim,
		Evidence: []Evidence{{Quantity: "||Av||/(||A|| ||v||) after equilibration", Value: free[0].Quotient, Iteration: none, Rows: rows},
			number("the next direction", free[len(free)-1].Next, ""), number("free directions", float64(f.Study.Nullity), least(f))}}
	c.pushed(&g)
	g.Advice = "look there for a missing support or a hinge too many; " + g.Advice + openDigits(f, free[0].Quotient)
	return []Finding{g}
}}

// pushed tells of what b has along the motions, and what helps against it.
func (c Case) pushed(g *Finding) {
	f, it := c.Facts, "it"
	if f.Study.Nullity > 1 {
		it = "them"
	}
	switch u := f.Unreachable; {
	case u.Answer == inspect.Yes:
		atLeast := ""
		if f.Study.More {
			atLeast = "at least "
		}
		g.Claim += fmt.Sprintf("; b pushes along %s with %s%s of its norm, and no x can answer that", it, atLeast, num(u.Value))
		g.Advice, g.Try = "until it is added, project solves for the part of b that can be answered", []string{"project/cg+ic:0"}
		if f.Study.More {
			g.Advice, g.Try = "until it is added, a method of minimal residuals comes as near to b as can be", []string{"minres+none"}
		}
		g.Evidence = append(g.Evidence, number("part of b along "+it, u.Value, least(f)))
	case u.Answer == inspect.No:
		g.Advice, g.Try = "b pushes along none of it, so that cg finds an answer all the same, up to this motion", []string{"cg+ic:0"}
	default:
		g.Advice, g.Try = "whether b pushes along it is open, and a method of minimal residuals comes as near to b as can be", []string{"minres+none"}
	}
}

// more is how many directions the pivots of LDL' say are free, where the search
// for them did not come to its end; else 0.
func more(f *inspect.Facts) int {
	if f.Study == nil || !f.Study.More {
		return 0
	}
	return f.Study.ZeroPivots
}

// least marks a number that the search for what is free did not get to the end
// of.
func least(f *inspect.Facts) string {
	if f.Study.More {
		return "at least"
	}
	return ""
}

// zeros is how many of the directions are free to rounding.
func zeros(free []inspect.NullDirection) (k int) {
	for _, d := range free {
		if d.Quotient <= inspect.ZeroLimit {
			k++
		}
	}
	return k
}

// constants is how many free directions the row sums account for.
func constants(f *inspect.Facts) int {
	if f.RowSumsZero.Answer == inspect.Yes {
		return f.NullComponents
	}
	return 0
}

// openDigits says that the printed digits of the file leave open what a number,
// relative to A, is.
func openDigits(f *inspect.Facts, value float64) string {
	if !(f.Delta > value) {
		return ""
	}
	return fmt.Sprintf("; the file has %d digits and leaves this open: write 17 digits and run again", f.Digits)
}

// motions words what is free and names rows that carry it.
func (c Case) motions(free []inspect.NullDirection) (claim string, rows []int) {
	d, head := free[0], c.numberOf()
	whole := 0
	for _, v := range free {
		if v.Rigid != "" || c.ofWhole(v) {
			whole++
		}
	}
	if whole == len(free) {
		return head + c.held(free), d.Rows
	}
	if len(free) > 1 {
		head += ", the most local one"
		d = mostLocal(free)
	}
	rows, share := localRows(d)
	if d.Support > len(rows) {
		return fmt.Sprintf("%s carried 99 %% by %d rows, %.0f %% by %s: a part free to move, or a missing support",
			head+",", d.Support, 100*share, c.list(rows, 6)), rows
	}
	return fmt.Sprintf("%s, carried %.0f %% by %s: a point free to spin, or a missing support", head, 100*share, c.list(rows, 6)), rows
}

// numberOf tells how many motions cost no energy; where not all were found, so
// far as they are counted.
func (c Case) numberOf() string {
	n, head := c.Facts.Study.Nullity, "one zero-energy motion"
	if n > 1 {
		head = fmt.Sprintf("%d zero-energy motions", n)
	}
	switch k := more(c.Facts); {
	case k > n:
		return fmt.Sprintf("at least %s (LDL' leaves %d pivots zero to rounding)", head, k)
	case c.Facts.Study.More:
		return "at least " + head
	}
	return head
}

// ofWhole says whether a motion is one of all that hangs together, or of a
// whole part of more rows than are told one by one.
func (c Case) ofWhole(v inspect.NullDirection) bool {
	all := c.Facts.N - c.Facts.Singletons
	return 4*v.Support > all || 4*v.Support > v.PartRows && v.Support > mostLocalRows
}

// held words that the whole, or whole parts, can move. What supports leave free
// is told from a system that has none only where constants are free, which are
// all translations at once.
func (c Case) held(free []inspect.NullDirection) string {
	parts := map[int]bool{}
	for _, v := range free {
		parts[v.Part] = true
	}
	of, it := " of the whole", "it"
	switch d := free[0]; {
	case len(parts) > 1:
		of, it = fmt.Sprintf(" of %d separate parts", len(parts)), "them"
	case d.PartRows < c.Facts.N-c.Facts.Singletons && d.PartRows > 0:
		of = fmt.Sprintf(" of a separate part of %d rows, %s among them", d.PartRows, c.name(d.Rows[0]))
	}
	of += kinds(free)
	switch {
	case c.Facts.RowSumsZero.Answer == inspect.Yes && len(free) > 1:
		return fmt.Sprintf("%s: nothing holds %s in place", of, it)
	case len(free) > 1:
		return fmt.Sprintf("%s: too few supports hold %s in place, or none", of, it)
	}
	return of + ": a hinge, or a support too few"
}

// kinds counts rigid motions by their kind, in brackets.
func kinds(free []inspect.NullDirection) string {
	shift, turn := 0, 0
	for _, d := range free {
		switch d.Rigid {
		case "translation":
			shift++
		case "rotation":
			turn++
		}
	}
	if shift+turn < len(free) {
		return ""
	}
	return fmt.Sprintf(" (%s, %s)", count(shift, "translation"), count(turn, "rotation"))
}

func mostLocal(free []inspect.NullDirection) inspect.NullDirection {
	best := free[0]
	for _, d := range free {
		if d.Support < best.Support {
			best = d
		}
	}
	return best
}

// mostLocalRows is how many rows of a direction are told at most.
const mostLocalRows = 6

// localRows are the rows, the largest share first, that together carry 95 % of
// a direction, at most six, and their part.
func localRows(d inspect.NullDirection) (rows []int, part float64) {
	for k, s := range d.Shares {
		if part >= 0.95 || k == mostLocalRows {
			break
		}
		rows, part = append(rows, d.Rows[k]), part+s
	}
	return rows, part
}
