package diagnose

import (
	"fmt"
	"strings"

	"dwindle/engine/inspect"
)

// penalties: large numbers on the diagonal that hold single unknowns.
var penalties = Rule{"penalty-rows", func(c Case) []Finding {
	f := c.Facts
	if f.Study == nil || f.Symmetric.Answer != inspect.Yes || f.PositiveDefinite.Answer == inspect.No && !semidefinite(f) {
		return nil
	}
	for _, l := range f.Study.Lines {
		if l.Kind != "penalty" || !(l.Value > 0) || !(l.Other > 0) {
			continue
		}
		return []Finding{{Weight: Note, Certainty: inspect.Measured, Subject: OnSystem,
			Claim: fmt.Sprintf("%s on the diagonal (%s) where others have %s, far above their couplings: as many eigenvalues lie far above the rest (%s)",
				holds(l.Count), num(l.Value), num(l.Other), c.list(l.Rows, 6)),
			Advice: "impose these values by elimination, or scale (jacobi does); a penalty also costs digits",
			Try:    []string{"cg+jacobi"},
			Evidence: []Evidence{{Quantity: "penalty rows", Value: float64(l.Count), Iteration: none, Rows: l.Rows},
				number("their typical diagonal", l.Value, ""), number("typical diagonal of the others", l.Other, "")}}}
	}
	return nil
}}

func holds(n int) string {
	if n == 1 {
		return "1 row holds a penalty"
	}
	return fmt.Sprintf("%d rows hold a penalty", n)
}

// replaced: A is symmetric but for rows of the identity whose columns were
// left in place.
var replaced = Rule{"row-replaced", func(c Case) []Finding {
	f := c.Facts
	if f.Study == nil || f.Study.Lopsided == nil || !f.Study.Lopsided.OnlyThem {
		return nil
	}
	l := f.Study.Lopsided
	return []Finding{{Weight: Drag, Certainty: inspect.Measured, Subject: OnSystem,
		Claim: fmt.Sprintf("A is symmetric to rounding except for %s of the identity form, whose columns still hold entries (%s): values fixed by replacing rows",
			count(l.Identity, "row"), c.list(l.IdentityRows, 6)),
		Advice: "move these columns, times the fixed values, to the right-hand side: then A is symmetric, and methods for symmetric systems apply",
		Evidence: []Evidence{{Quantity: "rows replaced", Value: float64(l.Identity), Iteration: none, Rows: l.IdentityRows},
			number("rows that differ from their column", float64(l.Count), "")}}}
}}

// fewAsymmetric: all that is not symmetric lies in a few rows, that are not of
// the identity form, or in a few single entries.
var fewAsymmetric = Rule{"few-rows-asymmetric", func(c Case) []Finding {
	f := c.Facts
	if f.Study == nil || f.Study.Lopsided == nil || f.Study.Lopsided.OnlyThem {
		return nil
	}
	if pairs := f.Study.Lopsided.Pairs; len(pairs) > 0 {
		return unequal(pairs)
	}
	if len(f.Study.Lopsided.Few) == 0 {
		return nil
	}
	few := f.Study.Lopsided.Few
	return []Finding{{Weight: Drag, Certainty: inspect.Measured, Subject: OnSystem,
		Claim: fmt.Sprintf("A is symmetric but for %s (%s): without %s row and column every a_ij = a_ji",
			count(len(few), "row"), c.list(few, 8), verb(len(few), "its", "their")),
		Advice: "look at how these rows are assembled: symmetric, A could be solved by cg or minres",
		Evidence: []Evidence{{Quantity: "rows that carry all asymmetry", Value: float64(len(few)), Iteration: none, Rows: few},
			number("rows that differ from their column", float64(f.Study.Lopsided.Count), "")}}}
}}

// unequal tells of single entries that have no equal across.
func unequal(pairs [][2]int) []Finding {
	var names []string
	var rows []int
	for _, p := range pairs {
		i, j := p[0]+1, p[1]+1
		names = append(names, fmt.Sprintf("a_%d,%d and a_%d,%d differ", i, j, j, i))
		rows = append(rows, p[0], p[1])
	}
	return []Finding{{Weight: Drag, Certainty: inspect.Measured, Subject: OnSystem,
		Claim:    fmt.Sprintf("A is symmetric but for %s: %s", count(len(pairs), "pair")+" of entries", strings.Join(names, ", ")),
		Advice:   "look at how these entries are assembled: symmetric, A could be solved by cg or minres",
		Evidence: []Evidence{{Quantity: "unequal pairs", Value: float64(len(pairs)), Iteration: none, Rows: rows}}}}
}

// smallShift is the shift of the diagonal, relative to it, up to which A is
// nearly definite.
const smallShift = 0.1

// restoring: a small shift of the diagonal would make A definite.
var restoring = Rule{"restoring-shift", func(c Case) []Finding {
	f := c.Facts
	if f.Study == nil || f.Study.Restore == nil || f.Study.Restore.Shift > smallShift {
		return nil
	}
	r := f.Study.Restore
	rows, part := r.Rows, 0.0
	for k, s := range r.Shares {
		if part >= 0.9 {
			rows = r.Rows[:k]
			break
		}
		part += s
	}
	where := fmt.Sprintf("carried %.0f %% by %s", 100*part, c.list(rows, 6))
	if part < 0.5 {
		where = "spread over the system, most at " + c.list(rows, 3)
	}
	g := Finding{Weight: Note, Certainty: inspect.Measured, Subject: OnSystem,
		Claim:  fmt.Sprintf("A + s diag A is positive definite from s = %s on; the direction that needs it is %s", num(r.Shift), where),
		Advice: "if A should be definite, so little is missing, there; if not, a preconditioner may be built from the shifted matrix",
		Try:    []string{fmt.Sprintf("shift:%.2g/minres+ic:0", 1.2*r.Shift)},
		Evidence: []Evidence{{Quantity: "shift relative to the diagonal", Value: r.Shift, Iteration: none, Rows: r.Rows},
			number("its error, at most", r.Bound, "")}}
	g.Advice += openDigits(f, r.Shift)
	return []Finding{g}
}}
