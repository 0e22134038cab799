package precond

import (
	"math"
	"slices"
	"sort"

	"dwindle/engine/linear"
)

// ilutWork is the state of a row-oriented factorisation A P = L D R by
// threshold. Columns are named as in A; pos tells where they stand.
type ilutWork struct {
	a       *linear.CSR
	f       *factors // its upper factor holds columns of A until finish
	name    string
	tau     float64
	p       int
	permtol float64   // 0: columns stay where they are
	pos     []int32   // position of column j, length n
	col     []int32   // column at position k, length n
	w       []float64 // the row under work, by column; length n
	at      []int32   // i+1 while column j belongs to row i; length n
	low     intHeap   // positions left of the diagonal still to be eliminated
	lcol    []int32   // positions kept for L
	lval    []float64
	ucol    []int32 // columns met right of the diagonal
	uval    []float64
	sizes   []float64
}

func newILUTWork(a *linear.CSR, name string, tau float64, p int, permtol float64) *ilutWork {
	n := a.NRows
	room := min(n*min(p, n)/2, a.Entries())
	k := &ilutWork{a: a, name: name, tau: tau, p: p, permtol: permtol,
		f:   &factors{lower: triangle(n, room), upper: triangle(n, room), inverse: linear.Bulk[float64](n)},
		pos: linear.Bulk[int32](n), col: linear.Bulk[int32](n), w: linear.Bulk[float64](n), at: linear.Bulk[int32](n)}
	for i := range k.pos {
		k.pos[i], k.col[i] = int32(i), int32(i)
	}
	return k
}

// row eliminates row i with the rows above it and stores what is kept; it
// returns the pivot.
func (k *ilutWork) row(i int) (float64, error) {
	cols, vals := k.a.Row(i)
	drop := k.tau * norm2(vals)
	k.low, k.lcol, k.lval, k.ucol = k.low[:0], k.lcol[:0], k.lval[:0], k.ucol[:0]
	k.meet(i, k.col[i], 0)
	for p, c := range cols {
		if k.at[c] != int32(i+1) {
			k.meet(i, c, 0)
		}
		k.w[c] = vals[p]
	}
	for len(k.low) > 0 {
		c := k.low.pop()
		if t := k.w[k.col[c]]; math.Abs(t) > drop {
			k.eliminate(i, c, t)
			k.lcol, k.lval = append(k.lcol, c), append(k.lval, t*k.f.inverse[c])
		}
	}
	k.choose(i, drop)
	if k.permtol > 0 {
		k.exchange(i)
	}
	d := k.w[k.col[i]]
	if unusable(d) {
		return d, &Breakdown{Method: k.name, Row: i, Pivot: d, Why: "the pivot has no inverse"}
	}
	k.store(i, 1/d)
	return d, nil
}

// meet takes column c into row i with value v.
func (k *ilutWork) meet(i int, c int32, v float64) {
	k.at[c], k.w[c] = int32(i+1), v
	if q := k.pos[c]; int(q) < i {
		k.low.push(q)
	} else if int(q) > i {
		k.ucol = append(k.ucol, c)
	}
}

// eliminate subtracts t times row c of R.
func (k *ilutWork) eliminate(i int, c int32, t float64) {
	rc, rv := k.f.upper.Row(int(c))
	rv = rv[:len(rc)]
	for p, j := range rc {
		if k.at[j] == int32(i+1) {
			k.w[j] -= t * rv[p]
		} else {
			k.meet(i, j, -t*rv[p])
		}
	}
}

// choose drops what is small or not among the p largest.
func (k *ilutWork) choose(i int, drop float64) {
	k.uval = k.uval[:0]
	kept := k.ucol[:0]
	for _, j := range k.ucol {
		if v := k.w[j]; math.Abs(v) > drop {
			kept, k.uval = append(kept, j), append(k.uval, v)
		}
	}
	nl := k.largest(k.lcol, k.lval)
	nu := k.largest(kept, k.uval)
	k.lcol, k.lval, k.ucol, k.uval = k.lcol[:nl], k.lval[:nl], kept[:nu], k.uval[:nu]
}

// exchange moves the column of the largest entry to the diagonal where it
// outgrows the diagonal entry by more than 1/permtol.
func (k *ilutWork) exchange(i int) {
	diag := k.col[i]
	best, at := math.Abs(k.w[diag]), -1
	for p, v := range k.uval {
		if math.Abs(v)*k.permtol > best {
			best, at = math.Abs(v)*k.permtol, p
		}
	}
	if at < 0 {
		return
	}
	j := k.ucol[at]
	q := k.pos[j]
	k.col[i], k.col[q], k.pos[j], k.pos[diag] = j, diag, int32(i), q
	k.ucol[at], k.uval[at] = diag, k.w[diag]
	if k.w[diag] == 0 {
		k.ucol, k.uval = slices.Delete(k.ucol, at, at+1), slices.Delete(k.uval, at, at+1)
	}
}

// store appends row i of L and of R.
func (k *ilutWork) store(i int, inverse float64) {
	l, r := k.f.lower, k.f.upper
	makeRoom(l, i, len(k.lcol))
	makeRoom(r, i, len(k.ucol))
	l.Col, l.Val = append(l.Col, k.lcol...), append(l.Val, k.lval...)
	sortRow(k.ucol, k.uval)
	for p, j := range k.ucol {
		r.Col, r.Val = append(r.Col, j), append(r.Val, k.uval[p]*inverse)
	}
	l.Ptr[i+1], r.Ptr[i+1] = len(l.Col), len(r.Col)
	k.f.inverse[i] = inverse
}

// finish puts positions for columns in R.
func (k *ilutWork) finish() {
	if k.permtol == 0 {
		return
	}
	r := k.f.upper
	for i := 0; i < r.NRows; i++ {
		cols, vals := r.Row(i)
		for p, j := range cols {
			cols[p] = k.pos[j]
		}
		sortRow(cols, vals)
	}
}

// largest moves the p entries of largest size to the front, in their present
// order (the first of equals), and returns how many there are.
func (k *ilutWork) largest(cols []int32, vals []float64) int {
	var n int
	k.sizes, n = largest(cols, vals, k.p, k.sizes)
	return n
}

// sortRow sorts a row by column.
func sortRow(cols []int32, vals []float64) {
	if len(cols) > 40 {
		sort.Sort(&byColumn{cols, vals})
		return
	}
	for i := 1; i < len(cols); i++ {
		c, v, j := cols[i], vals[i], i
		for ; j > 0 && cols[j-1] > c; j-- {
			cols[j], vals[j] = cols[j-1], vals[j-1]
		}
		cols[j], vals[j] = c, v
	}
}

type byColumn struct {
	cols []int32
	vals []float64
}

func (r *byColumn) Len() int           { return len(r.cols) }
func (r *byColumn) Less(i, j int) bool { return r.cols[i] < r.cols[j] }
func (r *byColumn) Swap(i, j int) {
	r.cols[i], r.cols[j] = r.cols[j], r.cols[i]
	r.vals[i], r.vals[j] = r.vals[j], r.vals[i]
}
