package direct

import (
	"context"
	"math"

	"dwindle/engine/linear"
)

// ldlWork is an LDLᵀ factorisation under way.
type ldlWork struct {
	l       *layout
	a       symmetricEntries
	place   linear.Permutation
	local   []int32 // index of a place in the front under work
	updates []frontUpdate
	doubts  []doubt
	out     *LDL
}

// frontUpdate is what a front leaves to the one above: first the columns it
// could not eliminate, then the rows below.
type frontUpdate struct {
	rows    []int32 // places
	delayed int
	val     []float64 // packed lower triangle
}

// front is a dense symmetric matrix: complete columns, which may be
// eliminated, and the rows below them.
type front struct {
	rows []int32
	full int       // complete columns
	col  []float64 // column c: len(rows) numbers, both triangles among the complete ones
	low  []float64 // the rest, a packed lower triangle
}

func (f *front) column(c int) []float64 {
	m := len(f.rows)
	return f.col[c*m : c*m+m]
}

// node assembles and eliminates the front of supernode k.
func (w *ldlWork) node(ctx context.Context, k int) error {
	f := w.assemble(k)
	e := elimination{front: f, d: make([]float64, f.full), e: make([]float64, f.full)}
	if err := e.run(ctx); err != nil {
		return err
	}
	w.updates[k] = frontUpdate{rows: f.rows[e.done:], delayed: f.full - e.done}
	if len(f.rows) > e.done {
		val, err := e.update(ctx)
		if err != nil {
			return err
		}
		w.updates[k].val = val
	}
	w.keep(k, &e)
	return nil
}

// assemble adds up the columns of A and the updates from below.
func (w *ldlWork) assemble(k int) *front {
	own, width := w.l.rowsOf(k), w.l.width(k)
	f := &front{rows: append([]int32(nil), own[:width]...)}
	for _, c := range w.l.below[k] {
		f.rows = append(f.rows, w.updates[c].rows[:w.updates[c].delayed]...)
	}
	f.full = len(f.rows)
	f.rows = append(f.rows, own[width:]...)
	for i, r := range f.rows {
		w.local[r] = int32(i)
	}
	f.col = make([]float64, f.full*len(f.rows))
	f.low = make([]float64, packed(len(f.rows)-f.full))
	first := w.l.start[k]
	for c := range width {
		j := int(w.l.Order[int(first)+c])
		cols, vals := w.a.a.Row(j)
		for p, i := range cols {
			if q := w.place[i]; vals[p] != 0 && q >= first+int32(c) {
				f.add(c, int(w.local[q]), w.a.at(int(i), j, vals[p]))
			}
		}
	}
	for _, c := range w.l.below[k] {
		w.extend(f, &w.updates[c])
		w.updates[c] = frontUpdate{}
	}
	return f
}

// add adds v at (i, j) of the front, which is symmetric.
func (f *front) add(i, j int, v float64) {
	if i > j {
		i, j = j, i
	}
	switch {
	case j < f.full:
		f.column(i)[j] += v
		if i != j {
			f.column(j)[i] += v
		}
	case i < f.full:
		f.column(i)[j] += v
	default:
		i, j = i-f.full, j-f.full
		f.low[j*(j+1)/2+i] += v
	}
}

// extend adds an update from below.
func (w *ldlWork) extend(f *front, u *frontUpdate) {
	at := make([]int, len(u.rows))
	for i, r := range u.rows {
		at[i] = int(w.local[r])
	}
	p := 0
	for i, li := range at {
		for t := range i + 1 {
			f.add(at[t], li, u.val[p+t])
		}
		p += i + 1
	}
}

// keep stores what the front eliminated and counts its pivots.
func (w *ldlWork) keep(k int, e *elimination) {
	m, n := len(e.rows), e.done
	node := ldlNode{rows: e.rows, d: e.d[:n:n], e: e.e[:n:n], l: make([]float64, 0, n*m-n*(n+1)/2)}
	if n == 0 {
		node.rows = nil
	}
	for t := range n {
		node.l = append(node.l, e.column(t)[t+1:]...)
	}
	out := w.out
	out.nodes[k] = node
	out.Delayed += e.full - n
	out.entries += int64(n*m - n*(n-1)/2)
	for t := 0; t < n; t++ {
		if e.e[t] != 0 {
			b := pair{e.d[t], e.e[t], e.d[t+1]}
			low, high := b.eigenvalues()
			for _, v := range [...]float64{low, high} {
				x, y := b.vector(v)
				w.count(doubt{k, t, v, x, y})
			}
			t++
			continue
		}
		if e.d[t] == 0 && out.ZeroRow < 0 {
			out.ZeroRow = int(out.order[e.rows[t]])
		}
		w.count(doubt{k, t, e.d[t], 1, 0})
	}
}

// count notes one eigenvalue of B.
func (w *ldlWork) count(d doubt) {
	f, v := w.out, d.value
	if f.small(v) {
		w.doubts = append(w.doubts, d)
	}
	switch {
	case v > 0:
		f.Inertia.Positive++
	case v < 0:
		f.Inertia.Negative++
	default:
		f.Inertia.Zero++
	}
	f.MinPivot = min(f.MinPivot, math.Abs(v))
	f.MaxPivot = max(f.MaxPivot, math.Abs(v))
}
