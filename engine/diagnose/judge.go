package diagnose

import (
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
	notDefinite,
	oppositeSign,
	unsolvedRows,
	breakdown,
	divergence,
	stagnation,
	floor,
	pivots,
	singletons,
	scaling,
	costly,
	beaten,
	digits,
	triangle,
	zeroRHS,
	defaultRHS,
}

// Judge applies every rule and returns the findings, the most important
// first: by weight, then by certainty, then in the order of the catalogue.
func Judge(c Case) []Finding {
	if c.Facts == nil {
		return nil
	}
	var all []Finding
	for _, r := range Catalogue {
		for _, f := range r.Judge(c) {
			f.Rule = r.Name
			all = append(all, f)
		}
	}
	slices.SortStableFunc(all, func(a, b Finding) int {
		if d := weightOrder(a.Weight) - weightOrder(b.Weight); d != 0 {
			return d
		}
		return certaintyOrder(a.Certainty) - certaintyOrder(b.Certainty)
	})
	return all
}

func weightOrder(w Weight) int { return slices.Index([]Weight{Blocker, Drag, Note}, w) }

func certaintyOrder(c inspect.Certainty) int {
	return slices.Index([]inspect.Certainty{inspect.Proved, inspect.Measured, inspect.Estimated}, c)
}
