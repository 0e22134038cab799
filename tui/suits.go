package tui

import (
	"cmp"
	"slices"

	"dwindle/engine/choose"
	"dwindle/engine/inspect"
)

// fitness is how well a candidate suits the system.
type fitness int

const (
	suits     fitness = iota // all that it assumes of A holds
	mayDo                    // something that it assumes is not known, or it is for comparison only
	unfounded                // something that it assumes does not hold
	cannot                   // refused
)

// fitnessOf holds what a candidate assumes against the facts.
func fitnessOf(c choose.Candidate, f *inspect.Facts) fitness {
	if c.Refused != "" {
		return cannot
	}
	if f == nil {
		return mayDo
	}
	worst := suits
	if c.Baseline {
		worst = mayDo
	}
	hold := func(assumed bool, fact inspect.Fact) {
		switch {
		case !assumed || fact.Answer == inspect.Yes:
		case fact.Answer == inspect.No:
			worst = unfounded
		default:
			worst = max(worst, mayDo)
		}
	}
	hold(c.Symmetric || c.SymmetricA, f.Symmetric)
	hold(c.Definite || c.DefiniteA, f.PositiveDefinite)
	return worst
}

// bestFirst orders candidates by how well they suit, those alike as they were.
func bestFirst(all []choose.Candidate, f *inspect.Facts) []choose.Candidate {
	out := slices.Clone(all)
	slices.SortStableFunc(out, func(a, b choose.Candidate) int { return cmp.Compare(fitnessOf(a, f), fitnessOf(b, f)) })
	return out
}
