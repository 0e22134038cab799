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
	fresh   []int32   // columns that an elimination has filled in
	ucol    []int32   // columns met right of the diagonal
	sizes   []float64
}

// roomFor is how many entries of a factor room is taken for at once, for each
// entry of A: memory that is never touched costs nothing.
const roomFor = 4

func newILUTWork(a *linear.CSR, name string, tau float64, p int, permtol float64) *ilutWork {
	n := a.NRows
	room := min(capped(n, p), roomFor*a.Entries())
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
	l := k.f.lower
	start := len(l.Col)
	k.low, k.ucol = k.low[:0], k.ucol[:0]
	k.meet(i, k.col[i])
	for p, c := range cols {
		if k.at[c] != int32(i+1) {
			k.meet(i, c)
		}
		k.w[c] = vals[p]
	}
	for len(k.low) > 0 {
		c := k.low.pop()
		if t := k.w[k.col[c]]; math.Abs(t) > drop {
			k.eliminate(i, c, t)
			makeRoom(l, i, 1)
			l.Col, l.Val = append(l.Col, c), append(l.Val, t*k.f.inverse[c])
		}
	}
	end := start + k.largest(l.Col[start:], l.Val[start:])
	l.Col, l.Val, l.Ptr[i+1] = l.Col[:end], l.Val[:end], end
	return k.finishUpper(i, drop)
}

// finishUpper stores row i of R and returns the pivot.
func (k *ilutWork) finishUpper(i int, drop float64) (float64, error) {
	cols, vals := k.keep(i, drop)
	if k.permtol > 0 {
		cols, vals = k.exchange(i, cols, vals)
	}
	d := k.w[k.col[i]]
	if unusable(d) {
		return d, &Breakdown{Method: k.name, Row: i, Pivot: d, Why: "the pivot has no inverse"}
	}
	sortRow(cols, vals)
	k.f.inverse[i] = 1 / d
	for p := range vals {
		vals[p] *= k.f.inverse[i]
	}
	r := k.f.upper
	end := r.Ptr[i] + len(cols)
	r.Col, r.Val, r.Ptr[i+1] = r.Col[:end], r.Val[:end], end
	return d, nil
}

// meet takes column c into row i.
func (k *ilutWork) meet(i int, c int32) {
	k.at[c], k.w[c] = int32(i+1), 0
	k.place(i, c)
}

// place puts a column of row i among those to eliminate or to keep.
func (k *ilutWork) place(i int, c int32) {
	if q := k.pos[c]; int(q) < i {
		k.low.push(q)
	} else if int(q) > i {
		k.ucol = append(k.ucol, c)
	}
}

// eliminate subtracts t times row c of R; the columns that it fills in are
// gone through afterwards, so that the loop calls nothing.
func (k *ilutWork) eliminate(i int, c int32, t float64) {
	rc, rv := k.f.upper.Row(int(c))
	rv = rv[:len(rc)]
	k.fresh = slices.Grow(k.fresh[:0], len(rc))
	at, w, fresh, n := k.at, k.w, k.fresh[:len(rc)], 0
	w = w[:len(at)]
	for p, j := range rc {
		v := t * rv[p]
		if at[j] == int32(i+1) {
			w[j] -= v
			continue
		}
		at[j], w[j] = int32(i+1), -v
		fresh[n] = j
		n++
	}
	for _, j := range fresh[:n] {
		k.place(i, j)
	}
}

// keep puts what is not small, and among the p largest, at the end of R and
// returns it.
func (k *ilutWork) keep(i int, drop float64) (cols []int32, vals []float64) {
	r := k.f.upper
	makeRoom(r, i, len(k.ucol))
	start := len(r.Col)
	cols, vals = r.Col[start:start+len(k.ucol)], r.Val[start:start+len(k.ucol)]
	n := 0
	for _, j := range k.ucol {
		if v := k.w[j]; math.Abs(v) > drop {
			cols[n], vals[n] = j, v
			n++
		}
	}
	n = k.largest(cols[:n], vals[:n])
	return cols[:n], vals[:n]
}

// exchange moves the column of the largest entry to the diagonal where it
// outgrows the diagonal entry by more than 1/permtol, and returns the rest.
func (k *ilutWork) exchange(i int, cols []int32, vals []float64) ([]int32, []float64) {
	diag := k.col[i]
	best, at := math.Abs(k.w[diag]), -1
	for p, v := range vals {
		if math.Abs(v)*k.permtol > best {
			best, at = math.Abs(v)*k.permtol, p
		}
	}
	if at < 0 {
		return cols, vals
	}
	j := cols[at]
	q := k.pos[j]
	k.col[i], k.col[q], k.pos[j], k.pos[diag] = j, diag, int32(i), q
	cols[at], vals[at] = diag, k.w[diag]
	if k.w[diag] == 0 {
		return slices.Delete(cols, at, at+1), slices.Delete(vals, at, at+1)
	}
	return cols, vals
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
