package precond

import "dwindle/engine/linear"

// nodeOf returns the node of each row, from the first row of each.
func (s *strength) nodeOf(first []int32) []int32 {
	node := make([]int32, s.a.NRows)
	for j := 0; j+1 < len(first); j++ {
		for i := first[j]; i < first[j+1]; i++ {
			node[i] = int32(j)
		}
	}
	return node
}

// condensed returns the couplings between nodes: for nodes I and J the sum of
// a_ij²/(a_ii a_jj) over their rows, held against θ².
func (s *strength) condensed(first, node []int32) *strength {
	count := len(first) - 1
	c := linear.ByRows(count, count, func(w *linear.RowWork, j int) {
		for i := int(first[j]); i < int(first[j+1]); i++ {
			cols, vals := s.a.Row(i)
			for k, c := range cols {
				w.Add(node[c], vals[k]*vals[k]/(s.diag[i]*s.diag[c]))
			}
		}
	})
	return &strength{a: c, square: s.square * s.square, diag: constants(count)}
}

// constants returns n ones.
func constants(n int) []float64 {
	one := make([]float64, n)
	for i := range one {
		one[i] = 1
	}
	return one
}
