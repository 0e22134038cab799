package diagnose

import (
	"cmp"
	"slices"

	"dwindle/engine/inspect"
)

// Catalogue lists the rules in the order their findings are told, all else
// equal: first what makes an answer worthless, then what costs, then notes.
var Catalogue = []Rule{
	zeroRHS,
	precision,
	outsideAssumptions,
	lostDefiniteness,
	unreachable,
	mechanism,
	wrongWay,
	transposedM,
	notLinear,
	preconditioner,
	falseConvergence,
	beaten,
	notDefinite,
	oppositeSign,
	unsolvedField,
	unsolvedRows,
	nullGrowth,
	unstable,
	breakdown,
	divergence,
	stagnation,
	floor,
	empty,
	zeroDiagonal,
	pivots,
	singletons,
	nearNull,
	diagonal,
	upToConstant,
	replaced,
	fewAsymmetric,
	outliers,
	restartLength,
	answer,
	storedZeros,
	scaling,
	penalties,
	costly,
	anisotropy,
	convection,
	skew,
	jumps,
	illConditioned,
	growth,
	nonNormal,
	restoring,
	explained,
	plateau,
	residualRises,
	superlinear,
	lostOrthogonality,
	nearComplete,
	guess,
	noise,
	changesNothing,
	stoppingRules,
	indefiniteSpectrum,
	digits,
	triangle,
	defaultRHS,
}

// Judge applies every rule, drops what another finding explains, and returns
// the findings, the most important first: by weight, then the system and
// today's pairing before other trials, then what a rule says first before what it
// says again, then in the order of the catalogue.
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
	all = resolve(all)
	again, ranks := map[string]int{}, make(map[*Finding]int, len(all))
	order := make([]*Finding, len(all))
	for i := range all {
		f := &all[i]
		advise(c, f)
		soften(c, f)
		f.Claim += alsoOf(f.Also)
		order[i], ranks[f] = f, again[f.Rule]
		again[f.Rule]++
	}
	slices.SortStableFunc(order, func(a, b *Finding) int {
		return cmp.Or(weightOrder(a.Weight)-weightOrder(b.Weight), concern(c, *a)-concern(c, *b), ranks[a]-ranks[b])
	})
	out := make([]Finding, len(order))
	for i, f := range order {
		out[i] = *f
	}
	return out
}

func weightOrder(w Weight) int { return slices.Index([]Weight{Blocker, Drag, Note}, w) }

func certaintyOrder(c inspect.Certainty) int {
	return slices.Index([]inspect.Certainty{inspect.Proved, inspect.Measured, inspect.Estimated}, c)
}
