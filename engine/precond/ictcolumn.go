package precond

import (
	"context"
	"math"

	"dwindle/engine/linear"
)

// ictWork factors A + α diag(A) = L D Lᵀ by columns (left-looking): column j
// takes what the columns k with l_jk ≠ 0 contribute, which are kept in a list
// for each row.
type ictWork struct {
	a      *linear.CSR
	l      *linear.CSR // row j holds column j of L below the diagonal
	tau    float64
	p      int
	pivots []float64 // D, length n
	head   []int32   // first column whose next row is i, −1 for none; length n
	link   []int32   // the column after k in its list; length n
	next   []int     // position of column k's next row in l; length n
	w      []float64 // the column under work, by row; length n
	at     []int32   // j+1 while row i belongs to column j; length n
	rows   []int32
	vals   []float64
	sizes  []float64
}

func newICTWork(a *linear.CSR, tau float64, p int) *ictWork {
	n := a.NRows
	return &ictWork{a: a, tau: tau, p: p, l: triangle(n, a.Entries()/2), pivots: linear.Bulk[float64](n),
		head: linear.Bulk[int32](n), link: linear.Bulk[int32](n), next: linear.Bulk[int](n),
		w: linear.Bulk[float64](n), at: linear.Bulk[int32](n)}
}

func (k *ictWork) pivot(i int) float64 { return k.pivots[i] }

// factor factors with shift alpha; see shiftable.
func (k *ictWork) factor(ctx context.Context, alpha float64, progress func(float64)) (broke int, err error) {
	n := k.a.NRows
	k.l.Col, k.l.Val = k.l.Col[:0], k.l.Val[:0]
	clear(k.at)
	for i := range k.head {
		k.head[i] = -1
	}
	for j := 0; j < n; j++ {
		if err := look(ctx, progress, j, n); err != nil {
			return -1, err
		}
		if !k.column(j, alpha) {
			return j, nil
		}
	}
	return -1, nil
}

// column computes column j and its pivot:
//
//	w_i = a_ij − Σ_k l_ik d_k l_jk,  d_j = a_jj − Σ_k d_k l_jk²,  l_ij = w_i/d_j
func (k *ictWork) column(j int, alpha float64) bool {
	cols, vals := k.a.Row(j)
	at, _ := diagonal(k.a, j)
	at -= k.a.Ptr[j]
	diag := vals[at] * (1 + alpha)
	k.rows = k.rows[:0]
	for p := at + 1; p < len(cols); p++ {
		k.w[cols[p]], k.at[cols[p]] = vals[p], int32(j+1)
		k.rows = append(k.rows, cols[p])
	}
	d := diag
	for c := k.head[j]; c >= 0; {
		after := k.link[c]
		d -= k.contribute(j, int(c))
		k.advance(int(c))
		c = after
	}
	k.pivots[j] = d
	if !(d > least*diag) || math.IsInf(d, 0) {
		return false
	}
	k.store(j, d, k.tau*norm2(vals), len(cols)-at-1+k.p)
	return true
}

// contribute subtracts what column c gives to column j and returns d_c l_jc².
func (k *ictWork) contribute(j, c int) float64 {
	at, end := k.next[c], k.l.Ptr[c+1]
	t := k.l.Val[at] * k.pivots[c]
	for q := at + 1; q < end; q++ {
		i, v := k.l.Col[q], t*k.l.Val[q]
		if k.at[i] == int32(j+1) {
			k.w[i] -= v
		} else {
			k.w[i], k.at[i] = -v, int32(j+1)
			k.rows = append(k.rows, i)
		}
	}
	return t * k.l.Val[at]
}

// advance puts column c on the list of its next row.
func (k *ictWork) advance(c int) {
	k.next[c]++
	k.enlist(c)
}

func (k *ictWork) enlist(c int) {
	if at := k.next[c]; at < k.l.Ptr[c+1] {
		i := k.l.Col[at]
		k.link[c], k.head[i] = k.head[i], int32(c)
	}
}

// store appends column j: what is larger than drop, at most so many entries.
func (k *ictWork) store(j int, d, drop float64, most int) {
	kept := k.rows[:0]
	k.vals = k.vals[:0]
	for _, i := range k.rows {
		if v := k.w[i]; math.Abs(v) > drop {
			kept, k.vals = append(kept, i), append(k.vals, v/d)
		}
	}
	var n int
	k.sizes, n = largest(kept, k.vals, most, k.sizes)
	sortRow(kept[:n], k.vals[:n])
	k.next[j] = len(k.l.Col)
	makeRoom(k.l, j, n)
	k.l.Col, k.l.Val = append(k.l.Col, kept[:n]...), append(k.l.Val, k.vals[:n]...)
	k.l.Ptr[j+1] = len(k.l.Col)
	k.enlist(j)
}
