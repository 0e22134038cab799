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
	permtol float64 // 0: columns stay where they are
	pos     []int32 // position of column j, length n; nil where columns stay
	col     []int32 // column at position k, length n; nil where columns stay
	w       []cell  // the row under work, by column; length n
	low     *places // positions left of the diagonal still to be eliminated
	fresh   []int32 // columns that an elimination has filled in
	lower   *lowerRows
	ucol    []int32 // columns met right of the diagonal, then those that stay
	uval    []float64
	sizes   []float64
}

// cell is one entry of the row under work.
type cell struct {
	v   float64 // 0 while the column does not belong to the row
	row int32   // i+1 once the column has been met in row i
}

// roomFor is how many entries of a factor room is taken for at once, for each
// entry of A: memory that is never touched costs nothing.
const roomFor = 4

func newILUTWork(a *linear.CSR, name string, tau float64, p int, permtol float64) *ilutWork {
	n := a.NRows
	room := min(capped(n, p), roomFor*a.Entries())
	k := &ilutWork{a: a, name: name, tau: tau, p: p, permtol: permtol,
		f: &factors{lower: triangle(n, room), upper: triangle(n, room), inverse: linear.Bulk[float64](n)},
		w: linear.Bulk[cell](n), low: newPlaces(n)}
	k.lower = &lowerRows{k: k, p: p, batch: &batch{}}
	if permtol > 0 {
		k.pos, k.col = linear.Bulk[int32](n), linear.Bulk[int32](n)
		for i := range k.pos {
			k.pos[i], k.col[i] = int32(i), int32(i)
		}
	}
	return k
}

// row eliminates row i with the rows above it and stores what is kept; it
// returns the pivot.
func (k *ilutWork) row(i int) (float64, error) {
	cols, vals := k.a.Row(i)
	drop := k.tau * norm2(vals)
	diag := int32(i)
	if k.moved() {
		diag = k.col[i]
	}
	k.meet(i, diag, cols, vals)
	k.eliminate(i, drop)
	d := k.w[diag].v
	k.w[diag].v = 0
	k.keep(drop)
	if k.moved() {
		d = k.exchange(i, d)
	}
	if unusable(d) {
		return d, &Breakdown{Method: k.name, Row: i, Pivot: d, Why: "the pivot has no inverse"}
	}
	inverse := 1 / d
	k.f.inverse[i] = inverse
	for p := range k.uval {
		k.uval[p] *= inverse
	}
	sortRow(k.ucol, k.uval)
	appendRow(k.f.upper, i, k.ucol, k.uval)
	k.lower.endRow()
	return d, nil
}

// moved says whether columns may be exchanged.
func (k *ilutWork) moved() bool { return k.col != nil }

// meet takes row i of A into the row under work.
func (k *ilutWork) meet(i int, diag int32, cols []int32, vals []float64) {
	k.ucol = k.ucol[:0]
	k.w[diag].row = int32(i + 1)
	for p, c := range cols {
		k.w[c].v = vals[p]
		if c != diag {
			k.w[c].row = int32(i + 1)
			k.ucol = k.place(i, c, k.ucol)
		}
	}
}

// place puts a column of row i among those to eliminate or, at the end of
// ucol, to keep.
func (k *ilutWork) place(i int, c int32, ucol []int32) []int32 {
	at := c
	if k.moved() {
		at = k.pos[c]
	}
	if int(at) > i {
		return append(ucol, c)
	}
	k.low.add(at)
	return ucol
}

// eliminate goes through the entries left of the diagonal, the least position
// first: each that is not small becomes an entry of L, times its pivot, and
// that many times its row of R is subtracted.
func (k *ilutWork) eliminate(i int, drop float64) {
	w, low, b, ucol := k.w, k.low, k.lower.batch, k.ucol
	lcol, lval, r := b.cols, b.vals, k.f.upper
	for c := low.pop(); c >= 0; c = low.pop() {
		j := c
		if k.moved() {
			j = k.col[c]
		}
		t := w[j].v
		w[j].v = 0
		if !(t > drop || t < -drop) {
			continue
		}
		lcol, lval = append(lcol, c), append(lval, t*k.f.inverse[c])
		start, end := r.Ptr[c], r.Ptr[c+1]
		if end-start > len(k.fresh) {
			k.fresh = make([]int32, 2*(end-start))
		}
		n := subtract(w, t, r.Col[start:end], r.Val[start:end], int32(i+1), k.fresh)
		for _, j := range k.fresh[:n] {
			ucol = k.place(i, j, ucol)
		}
	}
	b.cols, b.vals, k.ucol = lcol, lval, ucol
}

// subtract takes t times a row of R off the row under work; the columns that
// it fills in are put into fresh, and it returns how many they are. Inlined,
// its loop would run out of registers.
//
//go:noinline
func subtract(w []cell, t float64, cols []int32, vals []float64, row int32, fresh []int32) int {
	vals = vals[:len(cols)]
	n := 0
	for p, j := range cols {
		e := &w[uint32(j)]
		e.v -= float64(t * vals[p])
		fresh[n] = j
		if e.row != row {
			n++
		}
		e.row = row
	}
	return n
}

// keep leaves what is not small, and among the p largest, of the columns right
// of the diagonal.
func (k *ilutWork) keep(drop float64) {
	k.uval = slices.Grow(k.uval[:0], len(k.ucol))
	cols, vals, n := k.ucol, k.uval[:len(k.ucol)], 0
	for _, j := range cols {
		v := k.w[j].v
		k.w[j].v = 0
		cols[n], vals[n] = j, v
		if math.Abs(v) > drop {
			n++
		}
	}
	k.sizes, n = largest(cols[:n], vals[:n], k.p, k.sizes)
	k.ucol, k.uval = cols[:n], vals[:n]
}

// exchange moves the column of the largest entry to the diagonal where it
// outgrows the diagonal entry d by more than 1/permtol, and returns the entry
// that is on the diagonal then.
func (k *ilutWork) exchange(i int, d float64) float64 {
	best, at := math.Abs(d), -1
	for p, v := range k.uval {
		if math.Abs(v)*k.permtol > best {
			best, at = math.Abs(v)*k.permtol, p
		}
	}
	if at < 0 {
		return d
	}
	diag, j, pivot := k.col[i], k.ucol[at], k.uval[at]
	q := k.pos[j]
	k.col[i], k.col[q], k.pos[j], k.pos[diag] = j, diag, int32(i), q
	k.ucol[at], k.uval[at] = diag, d
	if d == 0 {
		k.ucol, k.uval = slices.Delete(k.ucol, at, at+1), slices.Delete(k.uval, at, at+1)
	}
	return pivot
}

// finish puts positions for columns in R.
func (k *ilutWork) finish() {
	k.lower.finish()
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
