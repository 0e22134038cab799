package load

import (
	"math"
	"slices"

	"dwindle/engine/linear"
)

// rowsAtOnce is how many rows a thread sorts at a time.
const rowsAtOnce = 4096

// sortRows sorts every row by column, on all threads, and sums duplicates in
// their present order. It returns how many entries were merged away.
func sortRows(a *linear.CSR) (merged int) {
	parts := (a.NRows + rowsAtOnce - 1) / rowsAtOnce
	left := make([]bool, parts) // rows that Compact must see
	linear.Parallel(parts, func(part int) {
		var s rowSorter
		for i := part * rowsAtOnce; i < min((part+1)*rowsAtOnce, a.NRows); i++ {
			cols, vals := a.Row(i)
			if !s.sort(cols, vals) {
				left[part] = true
			}
		}
	})
	if slices.Contains(left, true) {
		return a.Compact()
	}
	return 0
}

// rowSorter sorts one row after the other.
type rowSorter struct {
	keys []uint64
	vals []float64
}

// sort sorts a row, equal columns in their present order, and tells whether
// all are different.
func (s *rowSorter) sort(cols []int32, vals []float64) (different bool) {
	const short = 32
	switch {
	case ascending(cols):
		return true
	case len(cols) <= short:
		insert(cols, vals)
	case len(cols) > math.MaxUint32:
		return false
	default:
		s.long(cols, vals)
	}
	return ascending(cols)
}

// insert sorts a short row by insertion.
func insert(cols []int32, vals []float64) {
	for k := 1; k < len(cols); k++ {
		c, v := cols[k], vals[k]
		at := k
		for ; at > 0 && cols[at-1] > c; at-- {
			cols[at], vals[at] = cols[at-1], vals[at-1]
		}
		cols[at], vals[at] = c, v
	}
}

// long sorts a row of at most 2^32 entries by column and place, which are
// different for all.
func (s *rowSorter) long(cols []int32, vals []float64) {
	s.keys, s.vals = s.keys[:0], append(s.vals[:0], vals...)
	for k, c := range cols {
		s.keys = append(s.keys, uint64(c)<<32|uint64(k))
	}
	slices.Sort(s.keys)
	for k, key := range s.keys {
		cols[k], vals[k] = int32(key>>32), s.vals[uint32(key)]
	}
}

func ascending(cols []int32) bool {
	for k := 1; k < len(cols); k++ {
		if cols[k] <= cols[k-1] {
			return false
		}
	}
	return true
}
