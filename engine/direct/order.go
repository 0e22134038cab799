package direct

import "dwindle/engine/linear"

// Ordering names an elimination order.
type Ordering string

// The orders.
const (
	Best    Ordering = "best"    // the one of AMD and ND that takes fewer operations; ND alone for large meshes
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

// alone is the number of vertices beyond which nested dissection is taken
// without a comparison: on meshes of that size it always won, and orders cost
// seconds.
const alone = 200_000

// cheaper returns the order of AMD and ND whose factorisation takes fewer
// operations; beyond 200 000 vertices ND, unless the degrees are so uneven
// that the graph is no mesh.
func cheaper(g *graph) linear.Permutation {
	n := g.order()
	if n > alone && g.maxDegree() <= 16*(1+len(g.adj)/n) {
		return nestedDissection(g)
	}
	amd := minimumDegree(g, 0)
	if n <= leafSize {
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
