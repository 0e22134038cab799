package direct

import (
	"context"
	"math"
)

// elimination takes pivots from the complete columns of a front, which it
// reorders.
type elimination struct {
	*front
	d, e []float64 // B, length full
	done int       // pivots taken
}

// run takes pivots until none is stable enough.
func (e *elimination) run(ctx context.Context) error {
	failed := 0 // candidates in a row that failed
	p := 0
	for e.done < e.full && failed < e.full-e.done {
		if e.done%64 == 0 && ctx.Err() != nil {
			return ctx.Err()
		}
		if p < e.done || p >= e.full {
			p = e.done
		}
		if e.try(p) {
			failed = 0
		} else {
			failed++
			p++
		}
	}
	return nil
}

// try takes column p as a pivot, alone or with the one it is joined to most
// strongly, if that is stable.
func (e *elimination) try(p int) bool {
	d := e.column(p)[p]
	partner, inner, all := e.largest(p, -1)
	switch {
	case max(math.Abs(d), all) <= noise: // of a matrix with entries near 1
		e.swap(e.done, p)
		e.vanish()
		return true
	case math.Abs(d) >= threshold*all && math.Abs(d) > noise:
		e.swap(e.done, p)
		e.one()
		return true
	case partner < 0 || inner <= noise:
		return false
	}
	_, _, x := e.largest(p, partner)
	_, _, y := e.largest(partner, p)
	b := pair{d, e.column(p)[partner], e.column(partner)[partner]}
	if !b.bounded(x, y, 1/threshold) {
		return false
	}
	e.swap(e.done, p)
	if partner == e.done { // it was moved to where p came from
		partner = p
	}
	e.swap(e.done+1, partner)
	e.two(b)
	return true
}

// largest returns the largest size in column p beside the diagonal, of the
// complete columns with its place, and of all rows. Row without is left out.
func (e *elimination) largest(p, without int) (at int, inner, all float64) {
	col := e.column(p)
	at = -1
	for i := e.done; i < len(col); i++ {
		if i == p || i == without {
			continue
		}
		v := math.Abs(col[i])
		if v > all {
			all = v
		}
		if i < e.full && v > inner {
			at, inner = i, v
		}
	}
	return at, inner, all
}

// swap exchanges two complete columns with their rows.
func (e *elimination) swap(p, q int) {
	if p == q {
		return
	}
	x, y := e.column(p), e.column(q)
	for i := range x {
		x[i], y[i] = y[i], x[i]
	}
	for c := range e.full {
		col := e.column(c)
		col[p], col[q] = col[q], col[p]
	}
	e.rows[p], e.rows[q] = e.rows[q], e.rows[p]
}

// vanish takes a pivot that is zero to rounding, as is its column.
func (e *elimination) vanish() {
	t := e.done
	clear(e.column(t)[t:])
	for j := t + 1; j < e.full; j++ {
		e.column(j)[t] = 0
	}
	e.done++
}

// one eliminates with a pivot of order 1: column j loses l_j times the pivot's
// column, which becomes l.
func (e *elimination) one() {
	t := e.done
	col := e.column(t)
	d := col[t]
	for j := t + 1; j < e.full; j++ {
		takeFrom(e.column(j)[t+1:], col[j]/d, col[t+1:])
	}
	for i := t + 1; i < len(col); i++ {
		col[i] /= d
	}
	e.d[t] = d
	e.done++
}

// two eliminates with a pivot of order 2.
func (e *elimination) two(b pair) {
	t := e.done
	x, y := e.column(t), e.column(t+1)
	for j := t + 2; j < e.full; j++ {
		u, v := b.solve(x[j], y[j])
		takeBoth(e.column(j)[t+2:], u, x[t+2:], v, y[t+2:])
	}
	for i := t + 2; i < len(x); i++ {
		x[i], y[i] = b.solve(x[i], y[i])
	}
	e.d[t], e.e[t], e.d[t+1] = b.a, b.b, b.c
	x[t+1] = 0
	e.done += 2
}

// takeBoth computes z ← z − a x − b y.
func takeBoth(z []float64, a float64, x []float64, b float64, y []float64) {
	x, y = x[:len(z)], y[:len(z)]
	for k := range z {
		z[k] -= a*x[k] + b*y[k]
	}
}

// update returns what the front leaves: the columns it did not eliminate, and
// low − L B Lᵀ, packed together.
func (e *elimination) update(ctx context.Context) ([]float64, error) {
	late, below := e.full-e.done, len(e.rows)-e.full
	left, right := e.multipliers()
	work := float64(below) * float64(below) * float64(e.done)
	err := inParallel(ctx, (below+panelRows-1)/panelRows, work, func(k int) { left.products(right, k*panelRows, e.low) })
	if err != nil || late == 0 {
		return e.low, err
	}
	out := make([]float64, 0, packed(late+below))
	for i := range late + below {
		for t := range min(i+1, late) {
			out = append(out, e.column(e.done + t)[e.done+i])
		}
		if i >= late {
			q := i - late
			out = append(out, e.low[q*(q+1)/2:q*(q+1)/2+q+1]...)
		}
	}
	return out, nil
}

// multipliers returns the rows below the complete columns of L and of L B,
// row by row.
func (e *elimination) multipliers() (left, right block) {
	n, below := e.done, len(e.rows)-e.full
	left = block{make([]float64, n*below), n, below}
	right = block{make([]float64, n*below), n, below}
	for t := range n {
		for i, v := range e.column(t)[e.full:] {
			left.val[i*n+t] = v
			right.val[i*n+t] += e.d[t] * v
			if e.e[t] != 0 {
				right.val[i*n+t+1] += e.e[t] * v
			}
			if t > 0 && e.e[t-1] != 0 {
				right.val[i*n+t-1] += e.e[t-1] * v
			}
		}
	}
	return left, right
}
