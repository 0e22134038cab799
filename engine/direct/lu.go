package direct

import (
	"context"
	"fmt"
	"math"

	"dwindle/engine/linear"
)

// LU is P Dr A Dc Q = L U with powers of two in Dr and Dc, unit lower
// triangular L and upper triangular U, both by columns.
type LU struct {
	MinPivot, MaxPivot float64 // sizes of the pivots of the scaled matrix
	OffDiagonal        int     // pivots that are not on A's diagonal
	n                  int
	rows, cols         linear.Permutation // P and Q
	left, right        []float64          // Dr and Dc
	l, u               columns            // strict parts, rows numbered by pivots
	diag               []float64          // of U
	work               []float64
}

// columns is a sparse matrix by columns, grown one at a time.
type columns struct {
	ptr []int
	row []int32
	val []float64
}

// pivotShare is τ: the least size of a pivot relative to its column.
const pivotShare = 0.1

// luGrowth is how far the factors may outgrow the plan.
const luGrowth = 4

// FactorLU factorises a square matrix column by column: each column of L and U
// is a sparse triangular solve whose pattern is found by depth-first search
// (Gilbert and Peierls, SIAM J. Sci. Stat. Comput. 9 (1988) 862–874), with the
// searches shortened by symmetric pruning (Eisenstat and Liu, SIAM J. Matrix
// Anal. Appl. 13 (1992) 202–211). Of the entries that reach a tenth of the
// largest in the column the pivot is the one on the diagonal, else the one
// whose row has the fewest entries. Rows and columns are first scaled by
// powers of two, which rounds nothing.
//
// A column without a pivot beyond rounding ends it with a *PivotError; factors
// that outgrow four times the plan end it with an error that wraps
// ErrTooLarge.
func FactorLU(ctx context.Context, a *linear.CSR, plan *LUPlan, progress func(float64)) (*LU, error) {
	w := newLUWork(a, plan)
	limit := luGrowth*int(plan.Entries) + 8*a.NRows
	for k := range a.NRows {
		if k%64 == 0 {
			if err := ctx.Err(); err != nil {
				return nil, err
			}
			if progress != nil && k > 0 {
				progress(float64(k) / float64(a.NRows))
			}
			if len(w.f.l.row)+len(w.f.u.row) > limit {
				return nil, fmt.Errorf("the factors outgrow %d times what was predicted: %w", luGrowth, ErrTooLarge)
			}
		}
		if err := w.column(k); err != nil {
			return nil, err
		}
	}
	return w.finish(), nil
}

// luWork is a factorisation under way. Rows keep A's numbers until the end.
type luWork struct {
	f      *LU
	at     *linear.CSR // Aᵀ: columns of A
	pinv   []int32     // pivot number of each row, −1 while it has none
	length []int32     // entries of A in each row
	diag   bool
	x      []float64 // the column under work, by rows
	mark   []int32   // k+1 for rows reached in column k
	pruned []int     // where the search of a column of L ends
	stack  []int32
	next   []int   // position of the search in each column of L
	topo   []int32 // rows reached, in reverse topological order
}

func newLUWork(a *linear.CSR, plan *LUPlan) *luWork {
	n := a.NRows
	f := &LU{n: n, rows: make(linear.Permutation, n), cols: plan.Columns, diag: make([]float64, n),
		work: make([]float64, n), MinPivot: math.Inf(1)}
	f.left, f.right = equilibrateBoth(a)
	f.l.ptr, f.u.ptr = make([]int, 1, n+1), make([]int, 1, n+1)
	w := &luWork{f: f, at: a.Transpose(), pinv: make([]int32, n), length: make([]int32, n), diag: plan.Diagonal,
		x: make([]float64, n), mark: make([]int32, n), pruned: make([]int, n), next: make([]int, n)}
	for i := range n {
		w.pinv[i] = -1
		w.length[i] = int32(a.Ptr[i+1] - a.Ptr[i])
	}
	return w
}

// column computes column k of L and U.
func (w *luWork) column(k int) error {
	j := int(w.f.cols[k])
	rows, vals := w.at.Row(j)
	w.topo = w.topo[:0]
	for p, i := range rows {
		if vals[p] != 0 && w.mark[i] != int32(k+1) {
			w.reach(i, int32(k+1))
		}
	}
	for p, i := range rows {
		if vals[p] != 0 {
			w.x[i] = vals[p] * w.f.left[i] * w.f.right[j]
		}
	}
	w.solve()
	i := w.choose(j)
	if i < 0 {
		return &PivotError{Row: j, Pivot: w.bestSize(), Why: fmt.Sprintf("column %d has no pivot beyond rounding", j+1)}
	}
	w.store(k, j, i)
	w.prune(k, i)
	return nil
}

// reach appends to topo what a depth-first search from row i finds, each row
// after all it leads to.
func (w *luWork) reach(i, stamp int32) {
	w.mark[i] = stamp
	w.stack = append(w.stack[:0], i)
	w.open(i)
	for len(w.stack) > 0 {
		i := w.stack[len(w.stack)-1]
		deeper := false
		if c := w.pinv[i]; c >= 0 {
			for p := w.next[c]; p < w.pruned[c]; p++ {
				r := w.f.l.row[p]
				if w.mark[r] == stamp {
					continue
				}
				w.next[c] = p + 1
				w.mark[r] = stamp
				w.open(r)
				w.stack = append(w.stack, r)
				deeper = true
				break
			}
		}
		if !deeper {
			w.topo = append(w.topo, i)
			w.stack = w.stack[:len(w.stack)-1]
		}
	}
}

// open sets the search of row i to the begin of its column of L.
func (w *luWork) open(i int32) {
	if c := w.pinv[i]; c >= 0 {
		w.next[c] = w.f.l.ptr[c]
	}
}

// solve computes x ← L⁻¹ x on the rows reached.
func (w *luWork) solve() {
	x := w.x
	for t := len(w.topo) - 1; t >= 0; t-- {
		i := w.topo[t]
		c := w.pinv[i]
		if c < 0 || x[i] == 0 {
			continue
		}
		v := x[i]
		s, e := w.f.l.ptr[c], w.f.l.ptr[c+1]
		rows, vals := w.f.l.row[s:e], w.f.l.val[s:e]
		vals = vals[:len(rows)]
		for p, r := range rows {
			x[r] -= v * vals[p]
		}
	}
}

// bestSize returns the largest size of a row without a pivot.
func (w *luWork) bestSize() float64 {
	best := 0.0
	for _, i := range w.topo {
		if w.pinv[i] < 0 {
			best = max(best, math.Abs(w.x[i]))
		}
	}
	return best
}

// choose returns the row of the pivot for column j, −1 if there is none.
func (w *luWork) choose(j int) int32 {
	best := w.bestSize()
	if !(best > noise) || math.IsInf(best, 0) {
		return -1
	}
	if w.diag && w.pinv[j] < 0 && math.Abs(w.x[j]) >= pivotShare*best {
		return int32(j)
	}
	at := int32(-1)
	for _, i := range w.topo {
		v := math.Abs(w.x[i])
		if w.pinv[i] >= 0 || v < pivotShare*best {
			continue
		}
		if at < 0 || w.length[i] < w.length[at] || w.length[i] == w.length[at] && v > math.Abs(w.x[at]) {
			at = i
		}
	}
	return at
}

// store appends column k with its pivot in row i and clears x.
func (w *luWork) store(k, j int, i int32) {
	f := w.f
	d := w.x[i]
	f.diag[k], f.rows[k] = d, i
	f.MinPivot, f.MaxPivot = min(f.MinPivot, math.Abs(d)), max(f.MaxPivot, math.Abs(d))
	if int(i) != j {
		f.OffDiagonal++
	}
	for _, r := range w.topo {
		v := w.x[r]
		w.x[r] = 0
		switch c := w.pinv[r]; {
		case r == i:
		case c >= 0:
			f.u.row, f.u.val = append(f.u.row, c), append(f.u.val, v)
		default: // zeros stay: they are part of the pattern that searches rely on
			f.l.row, f.l.val = append(f.l.row, r), append(f.l.val, v/d)
		}
	}
	w.pinv[i] = int32(k)
	f.l.ptr, f.u.ptr = append(f.l.ptr, len(f.l.row)), append(f.u.ptr, len(f.u.row))
	w.pruned[k] = len(f.l.row)
}

// prune shortens the searches of the columns c with an entry u_ck and an entry
// of L in the row i of the new pivot: what lies in their rows without a pivot
// is reached through column k.
func (w *luWork) prune(k int, i int32) {
	f := w.f
	for _, c := range f.u.row[f.u.ptr[k]:f.u.ptr[k+1]] {
		s, e := f.l.ptr[c], f.l.ptr[c+1]
		if w.pruned[c] < e {
			continue
		}
		found := false
		for _, r := range f.l.row[s:e] {
			if r == i {
				found = true
				break
			}
		}
		if !found {
			continue
		}
		at := s
		for p := s; p < e; p++ {
			if w.pinv[f.l.row[p]] >= 0 {
				f.l.row[p], f.l.row[at] = f.l.row[at], f.l.row[p]
				f.l.val[p], f.l.val[at] = f.l.val[at], f.l.val[p]
				at++
			}
		}
		w.pruned[c] = at
	}
}

// finish numbers the rows of L by pivots.
func (w *luWork) finish() *LU {
	for p, r := range w.f.l.row {
		w.f.l.row[p] = w.pinv[r]
	}
	return w.f
}
