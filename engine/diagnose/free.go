package diagnose

import (
	"fmt"
	"math"

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
	if len(free) <= constants(f) {
		return nil
	}
	claim, rows := c.motions(free)
	g := Finding{Weight: Blocker, Certainty: inspect.Measured, Subject: OnSystem,
		Claim:  claim,
		Advice: "look there for a missing support or a hinge too many; b pushes along none of it, so that cg finds an answer all the same, up to this motion",
		Try:    []string{"cg+ic:0"},
		Evidence: []Evidence{{Quantity: "||Av||/(||A|| ||v||) after equilibration", Value: free[0].Quotient, Iteration: none, Rows: rows},
			number("the next direction", free[len(free)-1].Next, ""), number("free directions", float64(len(free)), "")}}
	if load := pushing(f, free); load > 1e-10 {
		along := "it"
		if len(free) > 1 {
			along = "them"
		}
		g.Claim += fmt.Sprintf("; b pushes along %s with %s of its norm, and no x can answer that", along, num(load))
		g.Advice = "look there for a missing support or a hinge too many; until it is added, project solves for the part of b that can be answered"
		g.Try = []string{"project/cg+ic:0"}
		g.Evidence = append(g.Evidence, number("part of b along it", load, ""))
	}
	g.Advice += openDigits(f, free[0].Quotient)
	return []Finding{g}
}}

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
	d := free[0]
	head := "one zero-energy motion"
	if len(free) > 1 {
		head = fmt.Sprintf("%d zero-energy motions", len(free))
	}
	whole := 0
	for _, v := range free {
		if v.Rigid != "" || 4*v.Support > c.Facts.N-c.Facts.Singletons {
			whole++
		}
	}
	if whole == len(free) {
		return fmt.Sprintf("%s of the whole%s: nothing holds it in place", head, kinds(free)), d.Rows
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

// localRows are the rows, the largest share first, that together carry 95 % of
// a direction, at most six, and their part.
func localRows(d inspect.NullDirection) (rows []int, part float64) {
	for k, s := range d.Shares {
		if part >= 0.95 || k == 6 {
			break
		}
		rows, part = append(rows, d.Rows[k]), part+s
	}
	return rows, part
}

// pushing is the part of b along what is free, relative to b.
func pushing(f *inspect.Facts, free []inspect.NullDirection) float64 {
	if u := f.Unreachable; u.Answer == inspect.Yes {
		return u.Value
	}
	sum := 0.0
	for _, d := range free {
		if d.Load > 0 {
			sum += d.Load * d.Load
		}
	}
	return math.Sqrt(sum)
}
