package linear

import "math"

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

// roundings is how many units of rounding two entries that are equal but for
// their rounding may differ by.
const roundings = 16 * 0x1p-53

// Mirror tells whether entries on both sides of the diagonal of a square matrix
// are equal but for rounding.
type Mirror struct {
	diag    []float64 // |a_ii|
	largest []float64 // largest |a_ij| of row i
}

// NewMirror prepares a Mirror of the square matrix a, with two numbers a row.
func NewMirror(a *CSR) *Mirror {
	m := &Mirror{diag: make([]float64, a.NRows), largest: make([]float64, a.NRows)}
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, j := range cols {
			v := math.Abs(vals[k])
			m.largest[i] = max(m.largest[i], v)
			if int(j) == i {
				m.diag[i] = v
			}
		}
	}
	return m
}

// Same reports whether v = a_ij and w = a_ji differ by no more than 16 units of
// rounding of what they were summed from. That is at least they themselves. A
// sum of semi-definite parts, such as element matrices, may cancel; each part is
// at most √(k_ii k_jj) of that part, and all together √(a_ii a_jj) (Cauchy and
// Schwarz). Where a diagonal entry is zero it is the smaller one of the largest
// entries of both rows.
func (m *Mirror) Same(i, j int, v, w float64) bool {
	diff := math.Abs(v - w)
	if diff <= roundings*max(math.Abs(v), math.Abs(w)) {
		return true
	}
	summed := math.Sqrt(m.diag[i]) * math.Sqrt(m.diag[j])
	if summed == 0 {
		summed = min(m.largest[i], m.largest[j])
	}
	return diff <= roundings*summed
}

// Pairs calls do for each column j that row i of a square matrix or row i of its
// transpose holds, in order, with v = a_ij and w = a_ji.
func Pairs(a, transposed *CSR, i int, do func(j int, v, w float64)) {
	ci, vi := a.Row(i)
	cj, vj := transposed.Row(i)
	for p, q := 0, 0; p < len(ci) || q < len(cj); {
		switch {
		case q == len(cj) || p < len(ci) && ci[p] < cj[q]:
			do(int(ci[p]), vi[p], 0)
			p++
		case p == len(ci) || cj[q] < ci[p]:
			do(int(cj[q]), 0, vj[q])
			q++
		default:
			do(int(ci[p]), vi[p], vj[q])
			p++
			q++
		}
	}
}

// Symmetric reports whether a square matrix equals its transpose but for
// rounding, as Mirror has it.
func (a *CSR) Symmetric() bool {
	if a.ExactlySymmetric() {
		return true
	}
	m, at, same := NewMirror(a), a.Transpose(), true
	for i := 0; i < a.NRows && same; i++ {
		Pairs(a, at, i, func(j int, v, w float64) { same = same && m.Same(i, j, v, w) })
	}
	return same
}
