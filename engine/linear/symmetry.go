package linear

// ExactlySymmetric reports whether a square matrix equals its transpose, entry
// for entry and stored place for stored place, in one pass and n counters.
//
// Row i's entries right of the diagonal must be, in order of i, the next
// unmatched ones left of the diagonal in their rows.
func (a *CSR) ExactlySymmetric() bool {
	next := make([]int32, a.NRows) // entries of each row already matched
	for i := 0; i < a.NRows; i++ {
		cols, vals := a.Row(i)
		k := int(next[i])
		if k < len(cols) && int(cols[k]) < i {
			return false // (i, cols[k]) has no partner
		}
		if k < len(cols) && int(cols[k]) == i {
			k++
		}
		for ; k < len(cols); k++ {
			j := int(cols[k])
			p := a.Ptr[j] + int(next[j])
			if p >= a.Ptr[j+1] || int(a.Col[p]) != i || a.Val[p] != vals[k] {
				return false
			}
			next[j]++
		}
	}
	return true
}
