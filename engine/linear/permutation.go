package linear

import "slices"

// Permutation is an order of 0..n−1: Permutation[k] is the original index of
// what comes to place k. As a matrix, row k of P has its 1 in column P[k].
type Permutation []int32

// Natural returns the order that changes nothing.
func Natural(n int) Permutation {
	p := make(Permutation, n)
	for i := range p {
		p[i] = int32(i)
	}
	return p
}

// Valid reports whether each of 0..n−1 occurs once, n being the length.
func (p Permutation) Valid() bool {
	seen := make([]bool, len(p))
	for _, i := range p {
		if i < 0 || int(i) >= len(p) || seen[i] {
			return false
		}
		seen[i] = true
	}
	return true
}

// Inverse returns the place of each original index: the permutation of Pᵀ.
func (p Permutation) Inverse() Permutation {
	q := make(Permutation, len(p))
	for k, i := range p {
		q[i] = int32(k)
	}
	return q
}

// Forward computes dst = P x: x in the new order. No overlap.
func (p Permutation) Forward(dst, x []float64) {
	for k, i := range p {
		dst[k] = x[i]
	}
}

// Backward computes dst = Pᵀ x: x, which is in the new order, in the original
// one. No overlap.
func (p Permutation) Backward(dst, x []float64) {
	for k, i := range p {
		dst[i] = x[k]
	}
}

// Permute returns P A Qᵀ, whose entry (k, l) is that of A at (rows[k],
// cols[l]). A nil permutation changes nothing; the same one twice is the
// symmetric permutation P A Pᵀ.
func (a *CSR) Permute(rows, cols Permutation) *CSR {
	if rows == nil {
		rows = Natural(a.NRows)
	}
	b := &CSR{NRows: a.NRows, NCols: a.NCols,
		Ptr: Bulk[int](a.NRows + 1), Col: Bulk[int32](len(a.Col)), Val: Bulk[float64](len(a.Val))}
	place := cols.Inverse()
	for k, i := range rows {
		c, v := a.Row(int(i))
		s := b.Ptr[k]
		e := s + len(c)
		b.Ptr[k+1] = e
		copy(b.Val[s:e], v)
		copy(b.Col[s:e], c)
		if cols == nil {
			continue
		}
		for p, j := range b.Col[s:e] {
			b.Col[s+p] = place[j]
		}
		sortRow(b.Col[s:e], b.Val[s:e])
	}
	return b
}

// sortRow sorts one row by column; the columns are distinct.
func sortRow(cols []int32, vals []float64) {
	if len(cols) > 32 {
		sortLongRow(cols, vals)
		return
	}
	for i := 1; i < len(cols); i++ {
		c, v := cols[i], vals[i]
		k := i
		for ; k > 0 && cols[k-1] > c; k-- {
			cols[k], vals[k] = cols[k-1], vals[k-1]
		}
		cols[k], vals[k] = c, v
	}
}

func sortLongRow(cols []int32, vals []float64) {
	type pair struct {
		c int32
		v float64
	}
	pairs := make([]pair, len(cols))
	for k, c := range cols {
		pairs[k] = pair{c, vals[k]}
	}
	slices.SortFunc(pairs, func(x, y pair) int { return int(x.c) - int(y.c) })
	for k, p := range pairs {
		cols[k], vals[k] = p.c, p.v
	}
}
