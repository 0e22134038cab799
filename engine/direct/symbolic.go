package direct

import "dwindle/engine/linear"

// compose returns the permutation that takes place k from place inner[k] of
// the outer one.
func compose(outer, inner linear.Permutation) linear.Permutation {
	out := make(linear.Permutation, len(inner))
	for k, i := range inner {
		out[k] = outer[i]
	}
	return out
}
