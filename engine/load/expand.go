package load

import (
	"context"
	"slices"

	"dwindle/engine/linear"
)

// matrix expands the entries into compressed rows. merged counts the entries
// of the expanded matrix that were summed into another one.
func (c *collector) matrix(ctx context.Context) (a *linear.CSR, merged int, err error) {
	a = &linear.CSR{NRows: c.n, NCols: c.n}
	total := c.t.n
	if c.sym != general {
		total += c.lower + c.upper
	}
	ptr := c.rowStarts()
	a.Col, a.Val = make([]int32, total), make([]float64, total)
	for _, p := range c.t.pieces {
		if err := ctx.Err(); err != nil {
			return nil, 0, err
		}
		c.place(a, ptr, p)
	}
	a.Ptr = ptr[:c.n+1]
	return a, a.Compact(), nil
}

// rowStarts returns, at r+1, where row r starts, with one place more behind:
// filling a row moves its entry on to where the row ends, which is Ptr.
func (c *collector) rowStarts() []int {
	ptr := make([]int, c.n+2)
	for _, p := range c.t.pieces {
		for k, i := range p.row {
			ptr[i+2]++
			if j := p.col[k]; c.sym != general && i != j {
				ptr[j+2]++
			}
		}
	}
	for r := 2; r < len(ptr); r++ {
		ptr[r] += ptr[r-1]
	}
	return ptr
}

// place puts the entries of one piece, and their mirror images, where ptr
// says.
func (c *collector) place(a *linear.CSR, ptr []int, p piece) {
	mirror := 1.0
	if c.sym == skew {
		mirror = -1
	}
	for k, i := range p.row {
		j, v := p.col[k], 1.0
		if p.val != nil {
			v = p.val[k]
		}
		at := ptr[i+1]
		a.Col[at], a.Val[at] = j, v
		ptr[i+1]++
		if c.sym != general && i != j {
			at := ptr[j+1]
			a.Col[at], a.Val[at] = i, mirror*v
			ptr[j+1]++
		}
	}
}

// stored turns the number of merged entries of the expanded matrix into that
// of the file, where an entry off the diagonal stands once.
func (c *collector) stored(a *linear.CSR, merged int) int {
	if c.sym == general || merged == 0 {
		return merged
	}
	diagonal := c.t.n - c.lower - c.upper
	for i := range c.n {
		cols, _ := a.Row(i)
		if _, found := slices.BinarySearch(cols, int32(i)); found {
			diagonal--
		}
	}
	return diagonal + (merged-diagonal)/2
}

// shrink gives back the memory of merged entries where it is worth a copy.
func shrink(a *linear.CSR, merged int) {
	if merged > len(a.Col)/8 {
		a.Col, a.Val = slices.Clone(a.Col), slices.Clone(a.Val)
	}
}
