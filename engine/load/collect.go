package load

import (
	"fmt"

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
	pattern      bool // the file holds no values: each is 1
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
		src.Notes = append(src.Notes, fmt.Sprintf("Values too small for a double were read as 0: %d.", c.tiny))
	}
	a, merged, err := c.matrix(l.ctx)
	if err != nil {
		return linear.System{}, err
	}
	if k, i, j, found := c.overflow(a, merged); found {
		return linear.System{}, l.failAt(lineOf(k), "the entries (%d,%d) add up to more than a double holds", i+1, j+1)
	}
	c.t.pieces = nil
	shrink(a, merged)
	dups := c.stored(a, merged)
	if dups > 0 && c.pattern {
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
