package diagnose

import (
	"cmp"
	"slices"

	"dwindle/engine/inspect"
)

// Catalogue lists the rules in the order their findings are told, all else
// equal: first what makes an answer worthless, then what costs, then notes.
var Catalogue = []Rule{
	outsideAssumptions,
	lostDefiniteness,
	unreachable,
	preconditioner,
	falseConvergence,
	beaten,
	notDefinite,
	oppositeSign,
	unsolvedRows,
	breakdown,
	divergence,
	stagnation,
	floor,
	pivots,
	singletons,
	outliers,
	restartLength,
	answer,
	scaling,
	costly,
	explained,
	plateau,
	residualRises,
	superlinear,
	lostOrthogonality,
	digits,
	triangle,
	zeroRHS,
	defaultRHS,
}

// Judge applies every rule and returns the findings, the most important
// first: by weight, then what a rule says first before what it says again of
// another trial, then by certainty, then in the order of the catalogue.
func Judge(c Case) []Finding {
	if c.Facts == nil {
		return nil
	}
	type told struct {
		Finding
		again int // how many findings of its rule come before it
	}
	var all []told
	for _, r := range Catalogue {
		for k, f := range r.Judge(c) {
			f.Rule = r.Name
			all = append(all, told{f, k})
		}
	}
	slices.SortStableFunc(all, func(a, b told) int {
		return cmp.Or(weightOrder(a.Weight)-weightOrder(b.Weight), a.again-b.again,
			certaintyOrder(a.Certainty)-certaintyOrder(b.Certainty))
	})
	out := make([]Finding, len(all))
	for i, f := range all {
		out[i] = f.Finding
	}
	return out
}

func weightOrder(w Weight) int { return slices.Index([]Weight{Blocker, Drag, Note}, w) }

func certaintyOrder(c inspect.Certainty) int {
	return slices.Index([]inspect.Certainty{inspect.Proved, inspect.Measured, inspect.Estimated}, c)
}
