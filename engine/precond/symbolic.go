package precond

import (
	"context"

	"dwindle/engine/linear"
)

// fill finds the pattern of an incomplete factorisation by levels, row by row.
// An entry of A has level 0; eliminating a_ic with the entry (c,j) of the
// factor makes an entry (i,j) of level lev(i,c) + lev(c,j) + 1, of which the
// smallest counts; entries above level k are dropped (Saad 2003, section
// 10.3.3).
type fill struct {
	a    *linear.CSR
	k    int
	next []int32 // the columns of the row under work as a list; n is its start and its end; length n+1
	lev  []uint8 // their levels, by column; length n
	// The rows above the one under work, right of the diagonal.
	ptr []int // length n+1
	col []int32
	of  []uint8 // level of each
	low int     // entries left of the diagonal so far
}

func newFill(a *linear.CSR, k int) *fill {
	n := a.NRows
	return &fill{a: a, k: k, next: linear.Bulk[int32](n + 1), lev: make([]uint8, n), ptr: linear.Bulk[int](n + 1)}
}

// row finds the columns of row i of the factors, left in the list, and keeps
// those right of the diagonal.
func (f *fill) row(i int) {
	end := int32(f.a.NRows)
	cols, _ := f.a.Row(i)
	last := end
	for _, c := range cols {
		f.next[last], f.lev[c] = c, 0
		last = c
	}
	f.next[last] = end
	for c := f.next[end]; int(c) < i; c = f.next[c] {
		f.merge(c)
	}
	for c := f.next[end]; c != end; c = f.next[c] {
		if int(c) > i {
			f.col, f.of = append(f.col, c), append(f.of, f.lev[c])
		} else if int(c) < i {
			f.low++
		}
	}
	f.ptr[i+1] = len(f.col)
}

// merge adds to the list what eliminating column c fills in.
func (f *fill) merge(c int32) {
	base, at := int(f.lev[c])+1, c
	if base > f.k {
		return
	}
	for p := f.ptr[c]; p < f.ptr[c+1]; p++ {
		j, level := f.col[p], base+int(f.of[p])
		if level > f.k {
			continue
		}
		for f.next[at] < j {
			at = f.next[at]
		}
		if f.next[at] == j {
			f.lev[j] = min(f.lev[j], uint8(level))
		} else {
			f.next[j], f.next[at], f.lev[j] = f.next[at], j, uint8(level)
		}
		at = j
	}
}

// filled returns A with explicit zeros where factors of level k fill in; A
// itself for level 0.
func filled(ctx context.Context, a *linear.CSR, k int) (*linear.CSR, error) {
	if k == 0 {
		return a, nil
	}
	f := newFill(a, k)
	out := triangle(a.NRows, a.Entries())
	end, low := int32(a.NRows), 0
	for i := 0; i < a.NRows; i++ {
		if err := look(ctx, nil, i, a.NRows); err != nil {
			return nil, err
		}
		f.row(i)
		cols, vals := a.Row(i)
		makeRoom(out, i, f.low-low+f.ptr[i+1]-f.ptr[i]+1)
		low = f.low
		for c := f.next[end]; c != end; c = f.next[c] {
			v := 0.0
			if len(cols) > 0 && cols[0] == c {
				v, cols, vals = vals[0], cols[1:], vals[1:]
			}
			out.Col, out.Val = append(out.Col, c), append(out.Val, v)
		}
		out.Ptr[i+1] = len(out.Col)
	}
	return out, nil
}

// countLimit is how many entries of a pattern are found to predict memory;
// where there are more, the rest of the rows is taken to be like those done.
const countLimit = 1 << 27

// fillCounts predicts the entries of the factors of level k left and right of
// the diagonal, and whether the prediction is exact.
func fillCounts(a *linear.CSR, k int) (lower, upper int, exact bool) {
	if k == 0 {
		lower, upper = halves(a)
		return lower, upper, true
	}
	f := newFill(a, k)
	for i := 0; i < a.NRows; i++ {
		f.row(i)
		if len(f.col)+f.low > countLimit {
			scale := float64(a.NRows) / float64(i+1)
			return int(float64(f.low) * scale), int(float64(len(f.col)) * scale), false
		}
	}
	return f.low, len(f.col), true
}
