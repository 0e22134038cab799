package direct

import "slices"

// layout lists the rows of each supernode's block: its own columns, then the
// rows below in ascending order.
type layout struct {
	*Symbolic
	rowAt []int   // where the rows of each supernode begin; length supernodes+1
	rows  []int32 // places in the order
	valAt []int   // where its block begins among the stored numbers
	below [][]int32
}

// lay lists the rows: those of A's columns and of the supernodes hanging below.
func (s *Symbolic) lay(g *graph) *layout {
	n := len(s.up)
	l := &layout{Symbolic: s, rowAt: make([]int, n+1), valAt: make([]int, n+1), rows: make([]int32, 0, s.listed)}
	l.below = s.children()
	place := s.Order.Inverse()
	mark := make([]int32, s.N)
	for k := range n {
		first, end := s.start[k], s.start[k+1]
		stamp := int32(k + 1)
		for j := first; j < end; j++ {
			l.rows = append(l.rows, j)
		}
		from := len(l.rows)
		take := func(i int32) {
			if i >= end && mark[i] != stamp {
				mark[i] = stamp
				l.rows = append(l.rows, i)
			}
		}
		for _, v := range s.Order[first:end] {
			for _, w := range g.neighbours(v) {
				take(place[w])
			}
		}
		for _, c := range l.below[k] {
			for _, i := range l.rows[l.rowAt[c]:l.rowAt[c+1]] {
				take(i)
			}
		}
		slices.Sort(l.rows[from:])
		l.rowAt[k+1] = len(l.rows)
		l.valAt[k+1] = l.valAt[k] + (len(l.rows)-l.rowAt[k])*int(end-first)
	}
	return l
}

// children lists the supernodes directly below each, ascending.
func (s *Symbolic) children() [][]int32 {
	number := make([]int, len(s.up)+1)
	for _, p := range s.up {
		if p >= 0 {
			number[p]++
		}
	}
	all := make([]int32, len(s.up))
	below := make([][]int32, len(s.up))
	at := 0
	for k := range below {
		below[k] = all[at : at : at+number[k]]
		at += number[k]
	}
	for k, p := range s.up {
		if p >= 0 {
			below[p] = append(below[p], int32(k))
		}
	}
	return below
}

// rowsOf returns the rows of supernode k.
func (l *layout) rowsOf(k int) []int32 { return l.rows[l.rowAt[k]:l.rowAt[k+1]] }

// width returns the columns of supernode k.
func (l *layout) width(k int) int { return int(l.start[k+1] - l.start[k]) }
