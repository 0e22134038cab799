package direct

import (
	"context"
	"math"
	"slices"

	"dwindle/engine/linear"
)

// PivotError says that a factorisation cannot go on.
type PivotError struct {
	Row   int     // original row, from 0
	Pivot float64 // its value, in the units of the scaled matrix where it is scaled
	Why   string
}

// Error names the row counted from 1, as files do, and the cause.
func (e *PivotError) Error() string { return e.Why }

// Cholesky is P A Pᵀ = L Lᵀ, as dense blocks of supernodes.
type Cholesky struct {
	l    *layout
	val  []float64 // block k: rows of width(k) numbers
	work []float64 // length n
}

// noise is the share of its diagonal entry that a pivot must keep; less is
// rounding, not a pivot.
const noise = 16 * unit

// FactorCholesky computes the factor of the symmetric matrix a by the
// multifrontal method (Duff and Reid, ACM Trans. Math. Softw. 9 (1983)
// 302–325): each supernode assembles the updates of those below it, is
// factorised as a dense block, and leaves one update. sym must come from
// Analyse(a, …). The factor is the same for every number of threads. A pivot
// that is not positive beyond rounding ends it with a *PivotError; a cancelled
// context with its error. progress may be nil.
func FactorCholesky(ctx context.Context, a *linear.CSR, sym *Symbolic, progress func(float64)) (*Cholesky, error) {
	f := newFactoring(sym.lay(patternOf(a)), symmetricEntries{a: a}, noise)
	j, err := f.run(ctx, progress)
	if err != nil {
		return nil, err
	}
	if j >= 0 {
		return nil, &PivotError{Row: int(sym.Order[j]), Pivot: f.pivot, Why: "the pivot is not positive beyond rounding"}
	}
	return &Cholesky{l: f.l, val: f.val, work: make([]float64, sym.N)}, nil
}

// symmetricEntries gives the entries of a symmetric matrix, scaled by powers
// of two and shifted.
type symmetricEntries struct {
	a     *linear.CSR
	s     *scaled // nil: as it is
	shift float64 // taken from the diagonal
}

func (e symmetricEntries) at(i, j int, v float64) float64 {
	if e.s != nil {
		v = e.s.at(i, j, v)
	}
	if i == j {
		v -= e.shift
	}
	return v
}

// factoring is a factorisation under way.
type factoring struct {
	l     *layout
	a     symmetricEntries
	least float64 // share of its diagonal entry that a pivot must exceed
	val   []float64
	place linear.Permutation
	local []int32   // index of a row in the block under work
	stack []float64 // updates that wait, the last on top
	top   int
	wait  []int // where the update of each supernode lies
	pivot float64
}

func newFactoring(l *layout, a symmetricEntries, least float64) *factoring {
	return &factoring{l: l, a: a, least: least, place: l.Order.Inverse(), val: make([]float64, l.stored),
		local: make([]int32, l.N), stack: make([]float64, l.Stack/8), wait: make([]int, len(l.up))}
}

// restart prepares another factorisation, with a shift of the diagonal.
func (f *factoring) restart(shift float64) {
	f.a.shift = shift
	f.top = 0
	clear(f.val)
}

// run factorises all supernodes and returns the column whose pivot fails, or −1.
func (f *factoring) run(ctx context.Context, progress func(float64)) (broken int, err error) {
	done, told := 0.0, 0.0
	for k := range f.l.up {
		if err := ctx.Err(); err != nil {
			return -1, err
		}
		j, err := f.supernode(ctx, k)
		if j >= 0 || err != nil {
			return j, err
		}
		for h, w := f.l.height[k], f.l.width(k); w > 0; w-- {
			done += float64(h) * float64(h)
			h--
		}
		if share := done / f.l.Work; progress != nil && share > told+0.01 && share < 1 {
			told = share
			progress(share)
		}
	}
	return -1, nil
}

// supernode assembles and factorises block k.
func (f *factoring) supernode(ctx context.Context, k int) (broken int, err error) {
	rows, w := f.l.rowsOf(k), f.l.width(k)
	b := block{f.val[f.l.valAt[k]:f.l.valAt[k+1]], w, len(rows)}
	for i, r := range rows {
		f.local[r] = int32(i)
	}
	f.enter(k, b)
	below := len(rows) - w
	update := f.stack[f.top : f.top+int(packed(below))]
	clear(update)
	bottom := f.top
	for _, c := range f.l.below[k] {
		f.extend(int(c), b, update)
		bottom = min(bottom, f.wait[c])
	}
	if r, err := b.cholesky(ctx, f.least); r >= 0 || err != nil {
		if r >= 0 {
			f.pivot = b.val[r*w+r]
			return int(f.l.start[k]) + r, nil
		}
		return -1, err
	}
	if err := b.schur(ctx, update); err != nil {
		return -1, err
	}
	f.wait[k] = bottom
	f.top = bottom + copy(f.stack[bottom:], update)
	return -1, nil
}

// enter writes the entries of A in the columns of block k.
func (f *factoring) enter(k int, b block) {
	first := f.l.start[k]
	for c := range b.cols {
		j := int(f.l.Order[int(first)+c])
		cols, vals := f.a.a.Row(j)
		own := false
		for p, i := range cols {
			if q := f.place[i]; vals[p] != 0 && q >= first+int32(c) {
				b.val[int(f.local[q])*b.cols+c] = f.a.at(int(i), j, vals[p])
				own = own || int(i) == j
			}
		}
		if !own {
			b.val[c*b.cols+c] = -f.a.shift
		}
	}
}

// extend adds the waiting update of supernode c to block b and to the update
// that b will leave.
func (f *factoring) extend(c int, b block, update []float64) {
	rows := f.l.rowsOf(c)[f.l.width(c):]
	from := f.stack[f.wait[c]:]
	at := make([]int, len(rows))
	for i, r := range rows {
		at[i] = int(f.local[r])
	}
	inner, _ := slices.BinarySearch(at, b.cols) // the rest goes to the update
	p := 0
	for i, li := range at {
		row := b.val[li*b.cols : li*b.cols+b.cols]
		m := min(i+1, inner)
		for t, v := range from[p : p+m] {
			row[at[t]] += v
		}
		if i >= inner {
			q := li - b.cols
			down := update[q*(q+1)/2:]
			for t := inner; t <= i; t++ {
				down[at[t]-b.cols] += from[p+t]
			}
		}
		p += i + 1
	}
}

// sqrtPivot is the square root of a pivot that exceeds the share least of the
// diagonal entry it came from.
func sqrtPivot(d, from, least float64) (float64, bool) {
	if !(d > 0) || !(d > least*math.Abs(from)) || math.IsInf(d, 0) {
		return d, false
	}
	return math.Sqrt(d), true
}
