package report

import (
	"slices"
	"strings"

	"dwindle/engine/diagnose"
)

// slows are the rules whose notes tell why a system is slow to solve, although
// no spectrum or trial was there to show what they cost.
var slows = []string{"mesh-growth", "anisotropy", "coefficient-jump", "convection", "row-scaling", "penalty-rows", "ill-conditioned",
	"condition", "non-normal", "indefinite-spectrum", "zero-diagonal", "up-to-a-constant", "small-outliers", "near-null"}

// why returns the findings that the head tells: what spoils the answer, what
// slows today's pairing, what slows anything on this system, last what befell
// pairings that were asked for; each rule once. What befell a pairing that
// nobody asked for and that another one has outdone (a note) is no cause; that
// today's pairing is beaten is told where no cause is known.
func why(d Document) []diagnose.Finding {
	today := ""
	for _, t := range d.Trials {
		if t.Today {
			today = t.Pairing
		}
	}
	groups := make([][]diagnose.Finding, 6)
	for _, f := range d.Findings {
		if g, ok := whyGroup(f, today); ok && !slices.ContainsFunc(groups[g], func(x diagnose.Finding) bool { return x.Rule == f.Rule }) {
			groups[g] = append(groups[g], f)
		}
	}
	list := slices.Concat(groups[:5]...)
	if len(list) == 0 {
		return groups[5]
	}
	return list
}

// whyGroup is the place of a finding among the causes; false where it is none.
func whyGroup(f diagnose.Finding, today string) (int, bool) {
	onToday := today != "" && f.Of(today)
	onSystem := f.Subject == diagnose.OnSystem || f.Subject == ""
	switch {
	case f.Rule == "not-your-rhs" || f.Outdone:
		return 0, false
	case f.Rule == "today-beaten":
		return 5, true
	case f.Weight == diagnose.Blocker:
		return 0, true
	case f.Weight == diagnose.Drag && onToday:
		return 1, true
	case f.Weight == diagnose.Drag && onSystem:
		return 2, true
	case f.Weight == diagnose.Drag:
		return 4, true
	}
	return 3, (onSystem || onToday) && slices.Contains(slows, f.Rule)
}

// clauses are the growing forms of a claim: its first clause, then one more
// each; " ..." says that more was there.
func clauses(text string) []string {
	parts := strings.Split(text, "; ")
	forms := make([]string, len(parts))
	for i := range parts {
		forms[i] = strings.Join(parts[:i+1], "; ")
		if i < len(parts)-1 {
			forms[i] += " ..."
		}
	}
	return forms
}

// leading returns the findings with blockers first and notes last, otherwise
// in the order given. That b is not the user's is told on other lines, and so
// is by how much today's pairing is beaten, where there is a cause to tell.
func leading(fs []diagnose.Finding) []diagnose.Finding {
	cause := slices.ContainsFunc(fs, func(f diagnose.Finding) bool {
		system := f.Subject == diagnose.OnSystem && slices.Contains(slows, f.Rule)
		return (f.Weight != diagnose.Note || system) && f.Rule != "today-beaten"
	})
	fs = diagnose.Fold(fs)
	var out []diagnose.Finding
	for _, w := range []diagnose.Weight{diagnose.Blocker, diagnose.Drag, diagnose.Note} {
		for _, f := range fs {
			if f.Weight == w && f.Rule != "not-your-rhs" && !(cause && f.Rule == "today-beaten") {
				out = append(out, f)
			}
		}
	}
	return out
}
