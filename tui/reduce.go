package tui

import (
	"math"

	"dwindle/engine/trace"
)

// measure is what runs along the chart's horizontal axis.
type measure int

const (
	bySeconds measure = iota
	byIterations
	byProducts
)

// measureNames is the one table of measures, in the order the key walks.
var measureNames = [...]string{bySeconds: "seconds", byIterations: "iterations", byProducts: "products"}

// String returns the name on the axis.
func (m measure) String() string { return measureNames[m] }

// next returns the measure after m.
func (m measure) next() measure { return (m + 1) % measure(len(measureNames)) }

// of returns the place of a record along m.
func (m measure) of(r trace.Record) float64 {
	switch m {
	case byIterations:
		return float64(r.Iter)
	case byProducts:
		return float64(r.MatVecs)
	}
	return r.Clock.Seconds()
}

// vanished is the logarithm that stands for a residual of exactly zero.
const vanished = -20

// level returns log10 of a residual; false if it is not a number to draw.
func level(v float64) (float64, bool) {
	switch {
	case math.IsNaN(v) || math.IsInf(v, 0) || v < 0:
		return 0, false
	case v == 0:
		return vanished, true
	}
	return max(math.Log10(v), vanished*2), true
}

// curve is one trial reduced to the columns of a chart. Levels are log10 of
// the residual; a column without one holds NaN.
type curve struct {
	mid    []float64 // mean of the column's levels; the last level at the head
	lo, hi []float64 // the column's extremes
	head   int       // column of the last level, -1 if there is none
	lost   bool      // the last number was not finite
}

// residual returns the number of a record that is drawn: the method's own, or
// the audited true one.
func residual(r trace.Record, truth bool) float64 {
	if truth {
		return r.Audit
	}
	return r.Residual
}

// reduce brings a history to n columns. place maps a record's measure to 0..1
// along the axis. Columns between two records get the straight segment, so
// that a few slow iterations still make a curve; a number that is not finite
// makes a gap.
func reduce(records []trace.Record, m measure, truth bool, place func(float64) float64, n int) curve {
	c := newCurve(n)
	sum, seen := make([]float64, n), make([]int, n)
	before := -1 // column of the record before, -1 after a gap
	from := 0.0  // its level
	for _, r := range records {
		if truth && !r.Audited() {
			continue
		}
		y, ok := level(residual(r, truth))
		if c.lost = !ok; !ok {
			before = -1
			continue
		}
		col := columnOf(place(m.of(r)), n)
		sum[col] += y
		seen[col]++
		c.lo[col], c.hi[col] = math.Min(c.lo[col], y), math.Max(c.hi[col], y)
		if before >= 0 {
			c.bridge(before, from, col, y)
		}
		before, from = col, y
		c.head = col
	}
	for col, k := range seen {
		if k > 0 {
			c.mid[col] = sum[col] / float64(k)
		}
	}
	if c.head >= 0 && before >= 0 {
		c.mid[c.head] = from
	}
	return c
}

// newCurve returns a curve of n empty columns.
func newCurve(n int) curve {
	c := curve{mid: make([]float64, n), lo: make([]float64, n), hi: make([]float64, n), head: -1}
	for i := range c.mid {
		c.mid[i], c.lo[i], c.hi[i] = math.NaN(), math.Inf(1), math.Inf(-1)
	}
	return c
}

// bridge fills the columns strictly between two records.
func (c *curve) bridge(a int, ya float64, b int, yb float64) {
	for col := a + 1; col < b; col++ {
		t := float64(col-a) / float64(b-a)
		c.mid[col] = ya + t*(yb-ya)
	}
}

// columnOf maps 0..1 to a column of n.
func columnOf(u float64, n int) int {
	if !(u > 0) {
		return 0
	}
	return int(math.Min(u, 1)*float64(n-1) + 0.5)
}
