package direct

import "dwindle/engine/linear"

// Ordering names an elimination order.
type Ordering string

// The orders.
const (
	Best    Ordering = "best"    // the one of AMD and ND that takes fewer operations
	AMD     Ordering = "amd"     // MinimumDegree
	ND      Ordering = "nd"      // NestedDissection
	RCM     Ordering = "rcm"     // ReverseCuthillMcKee
	Unmoved Ordering = "natural" // as the matrix has it
)

// Orderings lists the orders, the default first.
var Orderings = []string{string(Best), string(AMD), string(ND), string(RCM), string(Unmoved)}

// Order returns the named order for the pattern of A + Aᵀ; the best where the
// name is none of Orderings.
func Order(a *linear.CSR, how Ordering) linear.Permutation {
	if how == Unmoved {
		return linear.Natural(a.NRows)
	}
	return orderGraph(patternOf(a), how)
}

func orderGraph(g *graph, how Ordering) linear.Permutation {
	switch how {
	case ND:
		return nestedDissection(g)
	case RCM:
		return reverseCuthillMcKee(g)
	case Unmoved:
		return linear.Natural(g.order())
	case AMD:
		return minimumDegree(g, 0)
	}
	return cheaper(g)
}

// cheaper returns the order of AMD and ND whose factorisation takes fewer
// operations.
func cheaper(g *graph) linear.Permutation {
	amd := minimumDegree(g, 0)
	if g.order() <= leafSize {
		return amd // the same
	}
	if nd := nestedDissection(g); analyse(g, nd).Work < analyse(g, amd).Work {
		return nd
	}
	return amd
}

// compose returns the permutation that takes place k from place inner[k] of
// the outer one.
func compose(outer, inner linear.Permutation) linear.Permutation {
	out := make(linear.Permutation, len(inner))
	for k, i := range inner {
		out[k] = outer[i]
	}
	return out
}
