package linear

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"sync"
)

// productRows is how many rows of a product make one part.
const productRows = 2048

// Multiply returns A B as a new matrix, row by row (Gustavson, ACM Trans.
// Math. Softw. 4 (1978) 250–269). Entries that cancel to zero stay in the
// pattern. It runs on the thread team; each row adds in the order of A's and
// then B's columns, so the result does not depend on the number of threads.
// It panics where the inner dimensions differ.
func Multiply(a, b *CSR) *CSR {
	if a.NCols != b.NRows {
		panic(fmt.Sprintf("linear: product of %d x %d and %d x %d", a.NRows, a.NCols, b.NRows, b.NCols))
	}
	return ByRows(a.NRows, b.NCols, func(w *RowWork, i int) {
		acols, avals := a.Row(i)
		for k, j := range acols {
			s := avals[k]
			bcols, bvals := b.Row(int(j))
			for l, c := range bcols {
				w.Add(c, s*bvals[l])
			}
		}
	})
}

// RowWork gathers one row of a matrix under construction.
type RowWork struct {
	sum  []float64 // by column, length cols
	row  []int32   // the row (from 1) to which sum[c] belongs, length cols
	now  int32     // the row under work, from 1
	cols []int32   // columns of the row under work, as met
	hint int       // entries of the last piece, to size the next
}

// Add adds v to the entry in column c of the row under work.
func (w *RowWork) Add(c int32, v float64) {
	if w.row[c] == w.now {
		w.sum[c] += v
		return
	}
	w.row[c], w.sum[c] = w.now, v
	w.cols = append(w.cols, c)
}

// Has says whether Add has met column c in the row under work.
func (w *RowWork) Has(c int32) bool { return w.row[c] == w.now }

// Scale multiplies the row under work by s.
func (w *RowWork) Scale(s float64) {
	for _, c := range w.cols {
		w.sum[c] *= s
	}
}

// Largest cuts the row under work to its n entries of largest size, of equal
// ones those met first, and scales them so that the row sum stays.
func (w *RowWork) Largest(n int) {
	if len(w.cols) <= n {
		return
	}
	all, kept := 0.0, 0.0
	for _, c := range w.cols {
		all += w.sum[c]
	}
	slices.SortStableFunc(w.cols, func(a, b int32) int {
		return cmp.Compare(math.Abs(w.sum[b]), math.Abs(w.sum[a]))
	})
	w.cols = w.cols[:n]
	for _, c := range w.cols {
		kept += w.sum[c]
	}
	if f := all / kept; f > 0 && !math.IsInf(f, 0) {
		w.Scale(f)
	}
}

// piece is the part of a matrix built by one part of the work.
type piece struct {
	ends []int // where each row ends, from the start of the piece
	cols []int32
	vals []float64
}

// ByRows builds a rows x cols matrix on the thread team. fill adds up row i;
// it may be called for several rows at once, each with a RowWork of its own.
func ByRows(rows, cols int, fill func(w *RowWork, i int)) *CSR {
	parts := (rows + productRows - 1) / productRows
	pieces := make([]piece, parts)
	spare := sync.Pool{New: func() any {
		return &RowWork{sum: make([]float64, cols), row: make([]int32, cols)}
	}}
	Parallel(parts, func(part int) {
		w := spare.Get().(*RowWork)
		lo := part * productRows
		pieces[part] = w.build(lo, min(lo+productRows, rows), fill)
		spare.Put(w)
	})
	return joined(rows, cols, pieces)
}

// build gathers the rows lo to hi.
func (w *RowWork) build(lo, hi int, fill func(w *RowWork, i int)) piece {
	p := piece{ends: make([]int, hi-lo), cols: make([]int32, 0, w.hint), vals: make([]float64, 0, w.hint)}
	for i := lo; i < hi; i++ {
		w.now, w.cols = int32(i+1), w.cols[:0]
		fill(w, i)
		sortColumns(w.cols)
		p.cols = append(p.cols, w.cols...)
		for _, c := range w.cols {
			p.vals = append(p.vals, w.sum[c])
		}
		p.ends[i-lo] = len(p.cols)
	}
	w.hint = len(p.cols) + len(p.cols)/8
	return p
}

// sortColumns sorts ascending; rows are short and nearly in order.
func sortColumns(cols []int32) {
	if len(cols) > 32 {
		slices.Sort(cols)
		return
	}
	for k := 1; k < len(cols); k++ {
		c := cols[k]
		l := k - 1
		for ; l >= 0 && cols[l] > c; l-- {
			cols[l+1] = cols[l]
		}
		cols[l+1] = c
	}
}

// joined sets the pieces one after the other.
func joined(rows, cols int, pieces []piece) *CSR {
	m := &CSR{NRows: rows, NCols: cols, Ptr: make([]int, rows+1)}
	starts := make([]int, len(pieces)+1)
	for i, p := range pieces {
		starts[i+1] = starts[i] + len(p.cols)
	}
	total := starts[len(pieces)]
	m.Col, m.Val = make([]int32, total), make([]float64, total)
	Parallel(len(pieces), func(i int) {
		p := &pieces[i]
		copy(m.Col[starts[i]:], p.cols)
		copy(m.Val[starts[i]:], p.vals)
		for k, end := range p.ends {
			m.Ptr[i*productRows+k+1] = starts[i] + end
		}
		*p = piece{}
	})
	return m
}
