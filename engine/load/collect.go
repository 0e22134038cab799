package load

import (
	"context"
	"fmt"
	"slices"

	"dwindle/engine/linear"
)

// symmetry is what one stored entry (i,j) says about (j,i).
type symmetry uint8

const (
	general   symmetry = iota // nothing
	symmetric                 // the same value
	skew                      // the negative value
)

// collector gathers the stored entries of a square matrix of order n.
type collector struct {
	n            int
	sym          symmetry
	digits       digitCount
	t            triplets
	lower, upper int // stored entries below and above the diagonal
	zeros        int
	tiny         int // nonzero values too small for a double, read as 0
}

// add takes the stored entry at zero-based (i, j); expect as in triplets.
func (c *collector) add(i, j int32, v float64, expect int) {
	if v == 0 {
		c.zeros++
	}
	switch {
	case i > j:
		c.lower++
	case i < j:
		c.upper++
	}
	c.t.add(i, j, v, expect)
}

// system makes the system of what was gathered. lineOf gives the line of a
// stored entry, counted from 0.
func (c *collector) system(l *lines, format string, lineOf func(k int) int) (linear.System, error) {
	src := linear.Source{Format: format, Symmetric: c.sym == symmetric, Stored: c.t.n, ExplicitZeros: c.zeros}
	if c.sym != general && c.upper > 0 {
		if k, i, j, found := c.bothSides(); found {
			return linear.System{}, l.failAt(lineOf(k), "(%d,%d) is stored, and so is (%d,%d); "+
				"a file declared symmetric holds each pair once", i+1, j+1, j+1, i+1)
		}
		src.Notes = append(src.Notes, c.sideNote())
	}
	if c.tiny > 0 {
		src.Notes = append(src.Notes, fmt.Sprintf("%d values are too small for a double and were read as 0.", c.tiny))
	}
	a, dups, err := c.matrix(l.ctx)
	if err != nil {
		return linear.System{}, err
	}
	if dups > 0 && c.t.bare {
		src.Notes = append(src.Notes, "Entries of the pattern that stand twice were summed, so that their value is 2 or more.")
	}
	src.Duplicates = dups
	return linear.System{A: a, Digits: c.digits.result(), Source: src}, nil
}

func (c *collector) sideNote() string {
	if c.lower == 0 {
		return "The file stores the upper triangle; it was mirrored."
	}
	return "The file stores entries on both sides of the diagonal, each pair once; they were mirrored."
}

// bothSides finds the first stored entry, in file order, whose mirror image
// is stored before it.
func (c *collector) bothSides() (at int, row, col int32, found bool) {
	if c.lower == 0 || c.upper == 0 {
		return 0, 0, 0, false
	}
	below := make([]uint64, 0, c.lower)
	c.t.each(func(_ int, i, j int32, _ float64) bool {
		if i > j {
			below = append(below, pairKey(i, j))
		}
		return true
	})
	slices.Sort(below)
	var pair uint64
	c.t.each(func(_ int, i, j int32, _ float64) bool {
		if i < j {
			pair = pairKey(j, i)
			_, found = slices.BinarySearch(below, pair)
		}
		return !found
	})
	if !found {
		return 0, 0, 0, false
	}
	first, seen := int32(-1), false
	c.t.each(func(k int, i, j int32, _ float64) bool {
		if i == j || pairKey(max(i, j), min(i, j)) != pair {
			return true
		}
		if seen && i != first {
			at, row, col = k, i, j
			return false
		}
		first, seen = i, true
		return true
	})
	return at, row, col, true
}

func pairKey(i, j int32) uint64 { return uint64(i)<<32 | uint64(j) }

// matrix expands the entries into compressed rows and gives their memory
// back. dups counts the stored entries that were summed into another one.
func (c *collector) matrix(ctx context.Context) (a *linear.CSR, dups int, err error) {
	a = &linear.CSR{NRows: c.n, NCols: c.n}
	total := c.t.n
	if c.sym != general {
		total += c.lower + c.upper
	}
	ptr := c.rowStarts()
	a.Col, a.Val = make([]int32, total), make([]float64, total)
	for k := range c.t.pieces {
		if err := ctx.Err(); err != nil {
			return nil, 0, err
		}
		c.place(a, ptr, c.t.pieces[k])
		c.t.pieces[k] = piece{}
	}
	a.Ptr = ptr[:c.n+1]
	merged := a.Compact()
	shrink(a, merged)
	return a, c.stored(a, merged), nil
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
