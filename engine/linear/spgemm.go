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
	return ByRows(a.NRows, b.NCols, func(w *RowWork, i int) { addProduct(w, a, b, i) })
}

// Galerkin returns R A P as a new matrix, row by row without storing a product
// of two of them. Otherwise it is like Multiply.
func Galerkin(r, a, p *CSR) *CSR {
	if r.NCols != a.NRows || a.NCols != p.NRows {
		panic(fmt.Sprintf("linear: product of %d x %d, %d x %d and %d x %d", r.NRows, r.NCols, a.NRows, a.NCols, p.NRows, p.NCols))
	}
	spare := &workStore{cols: a.NCols}
	return ByRows(r.NRows, p.NCols, func(w *RowWork, i int) {
		ra := spare.get()
		ra.begin(i)
		addProduct(ra, r, a, i)
		for _, j := range ra.cols {
			s := ra.sum[j]
			cols, vals := p.Row(int(j))
			for l, c := range cols {
				w.Add(c, s*vals[l])
			}
		}
		spare.put(ra)
	})
}

// addProduct adds row i of A B.
func addProduct(w *RowWork, a, b *CSR, i int) {
	acols, avals := a.Row(i)
	for k, j := range acols {
		s := avals[k]
		bcols, bvals := b.Row(int(j))
		for l, c := range bcols {
			w.Add(c, s*bvals[l])
		}
	}
}

// workStore hands out RowWorks for rows of so many columns: as many as there
// are threads that ask at once.
type workStore struct {
	mu   sync.Mutex
	cols int
	idle []*RowWork
}

func (s *workStore) get() *RowWork {
	s.mu.Lock()
	defer s.mu.Unlock()
	if last := len(s.idle) - 1; last >= 0 {
		w := s.idle[last]
		s.idle = s.idle[:last]
		return w
	}
	return &RowWork{sum: make([]float64, s.cols), row: make([]int32, s.cols)}
}

func (s *workStore) put(w *RowWork) {
	s.mu.Lock()
	s.idle = append(s.idle, w)
	s.mu.Unlock()
}

// RowWork gathers one row of a matrix under construction.
type RowWork struct {
	sum  []float64 // by column, length cols
	row  []int32   // the row (from 1) to which sum[c] belongs, length cols
	now  int32     // the row under work, from 1
	cols []int32   // columns of the row under work, as met
	hint int       // entries of the last piece, to size the next
}

// begin turns to row i.
func (w *RowWork) begin(i int) { w.now, w.cols = int32(i+1), w.cols[:0] }

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

// ByRows builds a rows x cols matrix on the thread team. fill adds up row i;
// it may be called for several rows at once, each with a RowWork of its own.
// Beyond the matrix it needs memory for groupParts parts of it.
func ByRows(rows, cols int, fill func(w *RowWork, i int)) *CSR {
	m := &CSR{NRows: rows, NCols: cols, Ptr: Bulk[int](rows + 1)}
	spare := &workStore{cols: cols}
	pieces := make([]piece, groupParts)
	for first := 0; first < rows; first += groupParts * productRows {
		parts := min(groupParts, (rows-first+productRows-1)/productRows)
		Parallel(parts, func(part int) {
			lo := first + part*productRows
			w := spare.get()
			pieces[part].build(w, lo, min(lo+productRows, rows), fill, m.Ptr)
			spare.put(w)
		})
		m.attach(pieces[:parts], first)
	}
	return m
}

// groupParts is how many parts of a matrix are built before they are moved to
// their place.
const groupParts = 16

// piece is a part of a matrix under construction.
type piece struct {
	cols []int32
	vals []float64
}

// build gathers the rows lo to hi; ends[i+1] becomes the end of row i, from
// the start of the piece.
func (p *piece) build(w *RowWork, lo, hi int, fill func(w *RowWork, i int), ends []int) {
	if p.cols == nil {
		p.cols, p.vals = make([]int32, 0, w.hint), make([]float64, 0, w.hint)
	}
	p.cols, p.vals = p.cols[:0], p.vals[:0]
	for i := lo; i < hi; i++ {
		w.begin(i)
		fill(w, i)
		sortColumns(w.cols)
		p.cols = append(p.cols, w.cols...)
		for _, c := range w.cols {
			p.vals = append(p.vals, w.sum[c])
		}
		ends[i+1] = len(p.cols)
	}
	w.hint = len(p.cols) + len(p.cols)/8
}

// attach appends the pieces that begin at row first.
func (m *CSR) attach(pieces []piece, first int) {
	starts := make([]int, len(pieces)+1)
	starts[0] = len(m.Col)
	for i, p := range pieces {
		starts[i+1] = starts[i] + len(p.cols)
	}
	m.grow(starts[len(pieces)], min(first+len(pieces)*productRows, m.NRows))
	Parallel(len(pieces), func(i int) {
		copy(m.Col[starts[i]:], pieces[i].cols)
		copy(m.Val[starts[i]:], pieces[i].vals)
		lo := first + i*productRows
		for k := lo + 1; k <= min(lo+productRows, m.NRows); k++ {
			m.Ptr[k] += starts[i]
		}
	})
}

// grow makes room for total entries, those of the first rows, and, where it
// must allocate, for the rows to come as well if they are alike.
func (m *CSR) grow(total, rows int) {
	if total > cap(m.Col) {
		room := total
		if rows < m.NRows {
			room = int(1.02*float64(total)/float64(rows)*float64(m.NRows)) + productRows
		}
		col, val := Bulk[int32](room)[:len(m.Col)], Bulk[float64](room)[:len(m.Val)]
		copy(col, m.Col)
		copy(val, m.Val)
		m.Col, m.Val = col, val
	}
	m.Col, m.Val = m.Col[:total], m.Val[:total]
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
