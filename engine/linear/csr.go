package linear

import (
	"fmt"
	"sort"
)

// CSR is a sparse matrix stored by compressed rows. Columns ascend strictly
// within a row. Treat it as read-only once built.
type CSR struct {
	NRows, NCols int
	Ptr          []int     // length NRows+1; row i is Ptr[i]:Ptr[i+1]
	Col          []int32   // length Ptr[NRows]
	Val          []float64 // length Ptr[NRows]
}

// Dims returns the row and column count.
func (a *CSR) Dims() (rows, cols int) { return a.NRows, a.NCols }

// Entries returns the number of stored entries, explicit zeros included.
func (a *CSR) Entries() int { return len(a.Val) }

// Bytes returns the memory the matrix takes.
func (a *CSR) Bytes() int64 {
	return int64(len(a.Val))*12 + int64(len(a.Ptr))*8
}

// Row returns views of row i: columns ascending, and values.
func (a *CSR) Row(i int) (cols []int32, vals []float64) {
	s, e := a.Ptr[i], a.Ptr[i+1]
	return a.Col[s:e], a.Val[s:e]
}

// At returns entry (i, j), 0 where none is stored.
func (a *CSR) At(i, j int) float64 {
	cols, vals := a.Row(i)
	k := sort.Search(len(cols), func(k int) bool { return int(cols[k]) >= j })
	if k < len(cols) && int(cols[k]) == j {
		return vals[k]
	}
	return 0
}

// Diagonal writes the diagonal to dst (length NRows); missing entries are 0.
func (a *CSR) Diagonal(dst []float64) {
	for i := range dst {
		dst[i] = a.At(i, i)
	}
}

// Transpose returns Aᵀ as a new matrix, by one counting pass.
func (a *CSR) Transpose() *CSR {
	t := &CSR{NRows: a.NCols, NCols: a.NRows,
		Ptr: Bulk[int](a.NCols + 1), Col: Bulk[int32](len(a.Col)), Val: Bulk[float64](len(a.Val))}
	for _, c := range a.Col {
		t.Ptr[c+1]++
	}
	for i := 0; i < a.NCols; i++ {
		t.Ptr[i+1] += t.Ptr[i]
	}
	next := append([]int(nil), t.Ptr[:a.NCols]...)
	for i := 0; i < a.NRows; i++ {
		for k := a.Ptr[i]; k < a.Ptr[i+1]; k++ {
			p := next[a.Col[k]]
			next[a.Col[k]]++
			t.Col[p], t.Val[p] = int32(i), a.Val[k]
		}
	}
	return t
}

// Entry is one coefficient a_ij at zero-based (I, J).
type Entry struct {
	I, J int
	V    float64
}

// FromEntries builds a matrix from entries in any order; duplicates are
// summed in the order given. It panics on an index outside the shape: callers
// check theirs first. Meant for generators and tests; readers stream.
func FromEntries(rows, cols int, entries []Entry) *CSR {
	a := &CSR{NRows: rows, NCols: cols, Ptr: make([]int, rows+1)}
	for _, e := range entries {
		if e.I < 0 || e.I >= rows || e.J < 0 || e.J >= cols {
			panic(fmt.Sprintf("linear: entry (%d,%d) outside %d x %d", e.I, e.J, rows, cols))
		}
		a.Ptr[e.I+1]++
	}
	for i := 0; i < rows; i++ {
		a.Ptr[i+1] += a.Ptr[i]
	}
	a.Col = make([]int32, len(entries))
	a.Val = make([]float64, len(entries))
	next := append([]int(nil), a.Ptr[:rows]...)
	for _, e := range entries {
		a.Col[next[e.I]], a.Val[next[e.I]] = int32(e.J), e.V
		next[e.I]++
	}
	a.Compact()
	return a
}

// Compact sorts each row by column and sums duplicates in their present
// order, in place. It returns how many entries were merged away.
func (a *CSR) Compact() (merged int) {
	out := 0
	start := 0
	for i := 0; i < a.NRows; i++ {
		s, e := start, a.Ptr[i+1]
		start = e
		cols, vals := a.Col[s:e], a.Val[s:e]
		if !ascending(cols) {
			sort.Stable(&rowSorter{cols, vals})
		}
		first := out
		for k := range cols {
			if out > first && a.Col[out-1] == cols[k] {
				a.Val[out-1] += vals[k]
				merged++
				continue
			}
			a.Col[out], a.Val[out] = cols[k], vals[k]
			out++
		}
		a.Ptr[i+1] = out
	}
	a.Col, a.Val = a.Col[:out], a.Val[:out]
	return merged
}

func ascending(cols []int32) bool {
	for k := 1; k < len(cols); k++ {
		if cols[k] <= cols[k-1] {
			return false
		}
	}
	return true
}

type rowSorter struct {
	cols []int32
	vals []float64
}

func (r *rowSorter) Len() int           { return len(r.cols) }
func (r *rowSorter) Less(i, j int) bool { return r.cols[i] < r.cols[j] }
func (r *rowSorter) Swap(i, j int) {
	r.cols[i], r.cols[j] = r.cols[j], r.cols[i]
	r.vals[i], r.vals[j] = r.vals[j], r.vals[i]
}
