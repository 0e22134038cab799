package load

import (
	"context"
	"slices"

	"dwindle/engine/linear"
)

// matrix expands the entries into compressed rows. merged counts the entries
// of the expanded matrix that were summed into another one.
//
// It is a counting sort by rows on all threads: every thread has a group of
// entries that follow one another in the file, and knows where each row's part
// of its group begins. So every row is filled in file order, however many
// threads there are.
func (c *collector) matrix(ctx context.Context) (a *linear.CSR, merged int, err error) {
	groups := c.groups(linear.Threads())
	next := make([][]int, len(groups))
	linear.Parallel(len(groups), func(g int) { next[g] = c.countRows(groups[g]) })
	a = &linear.CSR{NRows: c.n, NCols: c.n, Ptr: rowStarts(next, c.n)}
	a.Col, a.Val = linear.Bulk[int32](a.Ptr[c.n]), linear.Bulk[float64](a.Ptr[c.n])
	linear.Parallel(len(groups), func(g int) {
		for _, p := range groups[g] {
			if ctx.Err() == nil {
				c.place(a, next[g], p)
			}
		}
	})
	if err := ctx.Err(); err != nil {
		return nil, 0, err
	}
	return a, sortRows(a), nil
}

// groups cuts the entries into runs of about equal length, at most as many as
// there are threads. Each takes 8 bytes a row. With k entries a row (6+k)/4 of
// them, 28 bytes an entry and 8 a row for the entries and the matrix come to
// 2.5 times the matrix: more groups there are not.
func (c *collector) groups(threads int) (groups [][]piece) {
	most := min(threads, (6+c.t.n/c.n)/4)
	taken, start := 0, 0
	for k, p := range c.t.pieces {
		taken += len(p)
		if taken*most >= c.t.n*(len(groups)+1) {
			groups = append(groups, c.t.pieces[start:k+1])
			start = k + 1
		}
	}
	return groups
}

// countRows counts what each row takes of a group.
func (c *collector) countRows(group []piece) []int {
	rows := linear.Bulk[int](c.n)
	for _, p := range group {
		for _, e := range p {
			rows[e.row]++
			if c.sym != general && e.row != e.col {
				rows[e.col]++
			}
		}
	}
	return rows
}

// rowStarts turns the counts of the groups into the places where each begins
// to fill a row, and returns where the rows start.
func rowStarts(next [][]int, n int) (ptr []int) {
	ptr = linear.Bulk[int](n + 1)
	at := 0
	for r := range n {
		for _, rows := range next {
			at, rows[r] = at+rows[r], at
		}
		ptr[r+1] = at
	}
	return ptr
}

// place puts the entries of one piece, and their mirror images, where next
// says.
func (c *collector) place(a *linear.CSR, next []int, p piece) {
	mirror := 1.0
	if c.sym == skew {
		mirror = -1
	}
	for _, e := range p {
		i, j, v := e.row, e.col, e.val
		at := next[i]
		a.Col[at], a.Val[at] = j, v
		next[i] = at + 1
		if c.sym != general && i != j {
			at := next[j]
			a.Col[at], a.Val[at] = i, mirror*v
			next[j] = at + 1
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
