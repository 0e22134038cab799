package trace

import "sort"

// KeepLargest inserts s into rows, which stay the largest shares in falling
// order, at most MaxRows of them.
func KeepLargest(rows []RowShare, s RowShare) []RowShare {
	at := sort.Search(len(rows), func(k int) bool { return rows[k].Share < s.Share })
	if at == MaxRows {
		return rows
	}
	if len(rows) < MaxRows {
		rows = append(rows, s)
	}
	copy(rows[at+1:], rows[at:])
	rows[at] = s
	return rows
}
