package precond

import (
	"errors"

	"dwindle/engine/linear"
)

// half is one of the two blocks of unknowns: its rows, ascending, and the place
// of each row of A among them, −1 where it is not one.
type half struct {
	rows  []int32
	place []int32
}

// halvesOf tells the blocks of a saddle system apart: as told, else the second
// one has the zeros of the diagonal.
func halvesOf(s linear.System, a *linear.CSR) (first, second half) {
	n := a.NRows
	first.place, second.place = make([]int32, n), make([]int32, n)
	for i := range n {
		h, other := &first, &second
		if s.Second != nil && s.Second[i] || s.Second == nil && a.At(i, i) == 0 {
			h, other = other, h
		}
		h.place[i], other.place[i] = int32(len(h.rows)), -1
		h.rows = append(h.rows, int32(i))
	}
	return first, second
}

// take gathers the half's part of x.
func (h half) take(dst, x []float64) {
	for k, i := range h.rows {
		dst[k] = x[i]
	}
}

// put writes the half's part of dst.
func (h half) put(dst, x []float64) {
	for k, i := range h.rows {
		dst[i] = x[k]
	}
}

// original names the row of A where a factorisation of the half broke down.
func (h half) original(err error) error {
	var b *Breakdown
	if !errors.As(err, &b) || b.Row < 0 {
		return err
	}
	return &Breakdown{Method: "schur", Row: int(h.rows[b.Row]), Pivot: b.Pivot, Why: b.Why}
}

// block returns the entries of A in the rows of r and the columns of c.
func block(a *linear.CSR, r, c half) *linear.CSR {
	b := &linear.CSR{NRows: len(r.rows), NCols: len(c.rows), Ptr: make([]int, len(r.rows)+1)}
	for k, i := range r.rows {
		cols, vals := a.Row(int(i))
		for p, j := range cols {
			if at := c.place[j]; at >= 0 {
				b.Col, b.Val = append(b.Col, at), append(b.Val, vals[p])
			}
		}
		b.Ptr[k+1] = len(b.Col)
	}
	return b
}

// complement returns T = C diag(F)⁻¹ B − D. A zero on the diagonal of F is a
// *Breakdown in that row of F.
func complement(f, b, c, d *linear.CSR) (*linear.CSR, error) {
	over := make([]float64, f.NRows)
	f.Diagonal(over)
	scaled := *b
	scaled.Val = make([]float64, len(b.Val))
	for i, v := range over {
		if v == 0 {
			return nil, &Breakdown{Method: "schur", Row: i, Why: "zero on the diagonal of the first block"}
		}
		for p := b.Ptr[i]; p < b.Ptr[i+1]; p++ {
			scaled.Val[p] = b.Val[p] / v
		}
	}
	t := linear.Multiply(c, &scaled)
	var e []linear.Entry
	for i := range t.NRows {
		cols, vals := t.Row(i)
		for p, j := range cols {
			e = append(e, linear.Entry{I: i, J: int(j), V: vals[p]})
		}
		cols, vals = d.Row(i)
		for p, j := range cols {
			e = append(e, linear.Entry{I: i, J: int(j), V: -vals[p]})
		}
	}
	return linear.FromEntries(t.NRows, t.NCols, e), nil
}
