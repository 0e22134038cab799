package direct

import "dwindle/engine/linear"

// tile is the number of rows and columns of one tile.
const tile = 4

// skyline holds the lower triangle of a symmetric matrix, row by row from the
// first entry to the diagonal, in groups of four rows that start together. The
// order is padded with rows of the identity to a multiple of four.
type skyline struct {
	n     int       // rows without padding
	order []int32   // original row of each, length n
	first []int     // first column of each group, a multiple of four
	start []int     // where the rows of each group begin in val
	val   []float64 // group g: four rows of width(g) each
}

// width returns the length of the rows of group g.
func (l *skyline) width(g int) int { return tile*(g+1) - l.first[g] }

// row returns row r of group g.
func (l *skyline) row(g, r int) []float64 {
	w := l.width(g)
	s := l.start[g] + r*w
	return l.val[s : s+w : s+w]
}

// newSkyline lays out the skyline of a in the given order.
func newSkyline(a *linear.CSR, order []int32) *skyline {
	l := &skyline{n: a.NRows, order: order, first: firsts(a, order)}
	size := 0
	for g := range l.first {
		l.start = append(l.start, size)
		size += tile * l.width(g)
	}
	l.val = make([]float64, size)
	return l
}

// firsts returns the first column of each group of rows.
func firsts(a *linear.CSR, order []int32) []int {
	place := inverse(order)
	first := make([]int, (len(order)+tile-1)/tile)
	for g := range first {
		f := tile * g
		for _, i := range order[tile*g : min(tile*g+tile, len(order))] {
			cols, vals := a.Row(int(i))
			for k, j := range cols {
				if vals[k] != 0 {
					f = min(f, int(place[j]))
				}
			}
		}
		first[g] = f / tile * tile
	}
	return first
}

// inverse returns the place of each original row.
func inverse(order []int32) []int32 {
	place := make([]int32, len(order))
	for k, i := range order {
		place[i] = int32(k)
	}
	return place
}

// cost returns the operations and the bytes of a factorisation.
func cost(first []int) (work float64, bytes int64) {
	for g, f := range first {
		w := tile*(g+1) - f
		work += tile * float64(w) * float64(w)
		bytes += int64(8 * tile * w)
	}
	return work, bytes
}

// widths returns the most entries of a row of the lower triangle, and of the
// full matrix.
func (l *skyline) widths() (widest, fullest int) {
	covering := make([]int, len(l.first)+1) // groups whose skyline starts at or before group g, as differences
	for g, f := range l.first {
		widest = max(widest, l.width(g))
		covering[f/tile]++
		covering[g]--
	}
	later := 0
	for g := range l.first {
		later += covering[g]
		fullest = max(fullest, l.width(g)+tile*later)
	}
	return widest, fullest
}

// fill writes D A D − cI.
func (l *skyline) fill(s *scaled, c float64) {
	clear(l.val)
	place := inverse(l.order)
	for p, i := range l.order {
		g := p / tile
		row := l.row(g, p%tile)
		cols, vals := s.a.Row(int(i))
		for k, j := range cols {
			if q := int(place[j]); q <= p && vals[k] != 0 {
				row[q-l.first[g]] = s.at(int(i), int(j), vals[k])
			}
		}
		row[p-l.first[g]] -= c
	}
	for p := l.n; p < tile*len(l.first); p++ {
		g := p / tile
		l.row(g, p%tile)[p-l.first[g]] = 1
	}
}
