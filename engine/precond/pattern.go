package precond

import (
	"slices"

	"dwindle/engine/linear"
)

// diagonal returns the position of a_ii among A's entries.
func diagonal(a *linear.CSR, i int) (at int, ok bool) {
	cols, _ := a.Row(i)
	k, ok := slices.BinarySearch(cols, int32(i))
	return a.Ptr[i] + k, ok
}

// symmetric says whether A equals its transpose exactly, pattern included. It
// meets the entries of the upper triangle row by row; each must be the next
// one not yet met in the row of its column.
func symmetric(a *linear.CSR) bool {
	next := slices.Clone(a.Ptr[:a.NRows])
	for i := 0; i < a.NRows; i++ {
		for k := next[i]; k < a.Ptr[i+1]; k++ {
			j := int(a.Col[k])
			if j < i {
				return false // its twin was not met
			}
			if j == i {
				continue
			}
			t := next[j]
			if t == a.Ptr[j+1] || int(a.Col[t]) != i || a.Val[t] != a.Val[k] {
				return false
			}
			next[j]++
		}
	}
	return true
}
