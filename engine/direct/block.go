package direct

import (
	"context"
	"sync"
	"sync/atomic"

	"dwindle/engine/linear"
)

// panelRows is how many rows are worked on together, so that the rows they
// are multiplied with stay in the cache.
const panelRows = 8 * tile

// parallelWork is how many operations are worth starting threads for.
const parallelWork = 2e6

// block is the dense trapezoid of a supernode: rows of cols numbers each, the
// first cols of them a lower triangle.
type block struct {
	val        []float64
	cols, rows int
}

func (b block) row(i int) []float64 { return b.val[i*b.cols : i*b.cols+b.cols] }

// wide is how many columns are finished before the rows below are, in
// parallel.
const wide = 8 * panelRows

// cholesky overwrites the block by its part of L. It returns the row whose
// pivot fails, or −1; what lies above and left of that pivot is then complete.
func (b block) cholesky(ctx context.Context, least float64) (broken int, err error) {
	from := make([]float64, b.cols) // diagonal entries
	for i := range from {
		from[i] = b.val[i*b.cols+i]
	}
	for q := 0; q < b.cols; q += wide {
		end := min(q+wide, b.cols)
		for p := q; p < end; p += panelRows {
			if r := b.panel(p, min(p+panelRows, end), q, end, from, least); r >= 0 {
				return r, nil
			}
		}
		panels := (b.rows - end + panelRows - 1) / panelRows
		work := 2 * float64(b.rows-end) * float64(end-q) * float64(end)
		err := inParallel(ctx, panels, work, func(k int) {
			p := end + k*panelRows
			b.panel(p, min(p+panelRows, b.rows), q, end, from, least)
		})
		if err != nil {
			return -1, err
		}
	}
	return -1, nil
}

// panel computes columns j to right of the rows p to end of L, tile by tile,
// each from all to its left. It returns the row whose pivot fails, or −1.
func (b block) panel(p, end, j, right int, from []float64, least float64) (broken int) {
	for ; j < min(right, end); j += tile {
		for i := max(p, j); i < end; i += tile {
			if r := b.tile(i, j, end, from, least); r >= 0 {
				return r
			}
		}
	}
	return -1
}

// tile computes the tile of L at (i, j), rows before end, and returns the row
// whose pivot fails, or −1.
func (b block) tile(i, j, end int, from []float64, least float64) int {
	b.subtract(i, j, end)
	for r := i; r < min(i+tile, end); r++ {
		row := b.row(r)
		for c := j; c < min(j+tile, b.cols, r+1); c++ {
			left := b.row(c)
			s := row[c]
			for k := j; k < c; k++ {
				s -= row[k] * left[k]
			}
			if c < r {
				row[c] = s / left[c]
				continue
			}
			var ok bool
			if row[c], ok = sqrtPivot(s, from[c], least); !ok {
				return r
			}
		}
	}
	return -1
}

// subtract takes from the tile at (i, j) the products of the columns before j.
func (b block) subtract(i, j, end int) {
	if j == 0 {
		return
	}
	if i+tile > end || j+tile > b.cols {
		for r := i; r < min(i+tile, end); r++ {
			row := b.row(r)
			for c := j; c < min(j+tile, b.cols); c++ {
				if c <= r {
					row[c] -= product(row[:j], b.row(c)[:j])
				}
			}
		}
		return
	}
	a0, a1, a2, a3 := b.row(i), b.row(i+1), b.row(i+2), b.row(i+3)
	for c := j; c < j+tile; c += 2 {
		s := dots(a0[:j], a1[:j], a2[:j], a3[:j], b.row(c)[:j], b.row(c + 1)[:j])
		a0[c] -= s[0]
		a0[c+1] -= s[1]
		a1[c] -= s[2]
		a1[c+1] -= s[3]
		a2[c] -= s[4]
		a2[c+1] -= s[5]
		a3[c] -= s[6]
		a3[c+1] -= s[7]
	}
}

// product returns the dot product of two short rows.
func product(x, y []float64) float64 {
	y = y[:len(x)]
	s := 0.0
	for k, v := range x {
		s += v * y[k]
	}
	return s
}

// schur takes L₂ L₂ᵀ from the packed lower triangle u, L₂ being the rows below
// the triangle of the block.
func (b block) schur(ctx context.Context, u []float64) error {
	low := block{b.val[b.cols*b.cols:], b.cols, b.rows - b.cols}
	work := float64(low.rows) * float64(low.rows) * float64(low.cols)
	return inParallel(ctx, (low.rows+panelRows-1)/panelRows, work, func(k int) {
		low.products(low, k*panelRows, u)
	})
}

// products takes b·cᵀ from the rows p to p+panelRows of the packed lower
// triangle u.
func (b block) products(c block, p int, u []float64) {
	end := min(p+panelRows, b.rows)
	for j := 0; j < end; j += 2 {
		i := max(p, j&^(tile-1))
		for ; i+tile <= end && i <= j+1; i++ { // near the diagonal
			b.few(c, i, j, u)
		}
		for ; i+tile <= end; i += tile {
			s := dots(b.row(i), b.row(i+1), b.row(i+2), b.row(i+3), c.row(j), c.row(j+1))
			for r := range tile {
				q := (i + r) * (i + r + 1) / 2
				u[q+j] -= s[2*r]
				u[q+j+1] -= s[2*r+1]
			}
		}
		for ; i < end; i++ {
			b.few(c, i, j, u)
		}
	}
}

// few takes at most two products from row i of u, at columns j and j+1.
func (b block) few(c block, i, j int, u []float64) {
	q := i * (i + 1) / 2
	for k := j; k <= min(j+1, i); k++ {
		u[q+k] -= product(b.row(i), c.row(k))
	}
}

// inParallel calls f(0) to f(parts−1), on all threads where the work is worth
// it. The calls must not depend on one another.
func inParallel(ctx context.Context, parts int, work float64, f func(k int)) error {
	threads := min(linear.Threads(), parts)
	if work < parallelWork || threads < 2 {
		for k := 0; k < parts && ctx.Err() == nil; k++ {
			f(k)
		}
		return ctx.Err()
	}
	var next atomic.Int64
	var all sync.WaitGroup
	for range threads {
		all.Go(func() {
			for k := int(next.Add(1)) - 1; k < parts && ctx.Err() == nil; k = int(next.Add(1)) - 1 {
				f(k)
			}
		})
	}
	all.Wait()
	return ctx.Err()
}
