package direct

import "dwindle/engine/linear"

// Ordering names an elimination order.
type Ordering string

// The orders.
const (
	AMD     Ordering = "amd"     // MinimumDegree
	ND      Ordering = "nd"      // NestedDissection
	RCM     Ordering = "rcm"     // ReverseCuthillMcKee
	Unmoved Ordering = "natural" // as the matrix has it
)

// Orderings lists the orders, the default first.
var Orderings = []string{string(AMD), string(ND), string(RCM), string(Unmoved)}

// Order returns the named order for a square matrix; AMD where the name is
// none of Orderings.
func Order(a *linear.CSR, how Ordering) linear.Permutation {
	switch how {
	case ND:
		return NestedDissection(a)
	case RCM:
		return ReverseCuthillMcKee(a)
	case Unmoved:
		return linear.Natural(a.NRows)
	}
	return MinimumDegree(a)
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
