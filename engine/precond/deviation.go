package precond

import (
	"math"

	"dwindle/engine/linear"
)

// Bounds of the work of a deviation, in additions: for each entry of the factors
// and of A, and in all, which is a fraction of a second.
const (
	cheapEach = 64
	cheapAll  = 50_000_000
)

// Deviation returns ‖A − M‖_F/‖A‖_F, what the factors M = L D R leave out of
// the n×n matrix a, or put in its place; false where that would take long, or
// the triangles are not stored by rows in double precision. It is exact but for rounding: row i of
// M is Σ_k l_ik d_k (e_k + r_k) over the entries of row i of L and its
// diagonal.
func (f *factors) Deviation(a *linear.CSR) (float64, bool) { return f.deviation(a, nil) }

// Deviation is that of factors whose column k belongs to column col[k] of A.
func (m *permuted) Deviation(a *linear.CSR) (float64, bool) { return m.f.deviation(a, m.col) }

func (f *factors) deviation(a *linear.CSR, col []int32) (float64, bool) {
	if f.lower == nil || f.upper == nil || f.work() > min(cheapEach*(f.entries+a.Entries()), cheapAll) {
		return 0, false
	}
	row := deviant{col: col, w: make([]float64, a.NRows), at: make([]int, a.NRows)}
	sum := 0.0
	for i := range a.NRows {
		row.begin(i)
		cols, vals := a.Row(i)
		for p, c := range cols {
			row.add(c, -vals[p])
		}
		cols, vals = f.lower.Row(i)
		for p, k := range cols {
			row.addProduct(f, int(k), vals[p])
		}
		row.addProduct(f, i, 1)
		sum = math.Hypot(sum, row.norm())
	}
	share := sum / linear.Norm2(a.Val)
	return share, !math.IsNaN(share) && !math.IsInf(share, 0)
}

// work is how many additions the product of the factors takes.
func (f *factors) work() int {
	work := f.entries
	for _, k := range f.lower.Col {
		work += f.upper.Ptr[k+1] - f.upper.Ptr[k]
	}
	return work
}

// deviant is one row of M − A, gathered by columns of A.
type deviant struct {
	col  []int32 // of A for each of M; nil where they are the same
	w    []float64
	at   []int // i+1 while a column belongs to row i
	mark int
	held []int32   // columns that belong to the row
	vals []float64 // its values, for the norm
}

func (r *deviant) begin(i int) { r.mark, r.held = i+1, r.held[:0] }

func (r *deviant) add(c int32, v float64) {
	if r.at[c] != r.mark {
		r.at[c], r.w[c] = r.mark, 0
		r.held = append(r.held, c)
	}
	r.w[c] += v
}

// addProduct adds l d_k (e_k + r_k).
func (r *deviant) addProduct(f *factors, k int, l float64) {
	t := l / f.inverse[k]
	r.add(r.column(int32(k)), t)
	cols, vals := f.upper.Row(k)
	for p, c := range cols {
		r.add(r.column(c), t*vals[p])
	}
}

func (r *deviant) column(k int32) int32 {
	if r.col == nil {
		return k
	}
	return r.col[k]
}

// norm is the 2-norm of the row.
func (r *deviant) norm() float64 {
	r.vals = r.vals[:0]
	for _, c := range r.held {
		r.vals = append(r.vals, r.w[c])
	}
	return linear.Norm2(r.vals)
}
