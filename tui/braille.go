package tui

import "math"

// brailleBits is the bit of each dot of a braille cell, by column and row.
var brailleBits = [2][4]rune{{0x01, 0x02, 0x04, 0x40}, {0x08, 0x10, 0x20, 0x80}}

// braille draws c, reduced to two columns a cell, with four dots a row.
// Where two curves share a cell the dots add up and the later ink wins.
type braille struct {
	on *canvas
	d  decades
}

// dotRow returns the dot row of a level, four for each row of cells.
func (b braille) dotRow(level float64) int {
	return int(math.Round((b.d.row(level)+0.5)*4 - 0.5))
}

// dot sets the dot at (x, y), two dots a cell across and four down.
func (b braille) dot(x, y int, i ink) {
	if x < 0 || y < 0 || !b.on.holds(x/2, y/4) {
		return
	}
	sign := b.on.at(x/2, y/4)
	if sign < 0x2800 || sign > 0x28ff {
		sign = 0x2800
	}
	b.on.set(x/2, y/4, sign|brailleBits[x%2][y%4], i)
}

// draw draws the curve; full adds the span between the extremes of every
// column.
func (b braille) draw(c curve, i ink, full bool) {
	before := 0
	joined := false
	for x, y := range c.mid {
		if math.IsNaN(y) {
			joined = false
			continue
		}
		at := b.clampDot(y)
		if joined {
			b.join(x, before, at, i)
		}
		b.dot(x, at, i)
		if full && c.lo[x] <= c.hi[x] {
			for y := b.clampDot(c.hi[x]); y <= b.clampDot(c.lo[x]); y++ {
				b.dot(x, y, i)
			}
		}
		before, joined = at, true
	}
}

// clampDot keeps dot rows within one row of the canvas, so that an outlier
// costs no time and leaves the chart straight up or down.
func (b braille) clampDot(level float64) int {
	return min(max(b.dotRow(level), -4), b.on.h*4+3)
}

// join draws the way from dot row from in the column before x to dot row to
// in x, each half in its own column.
func (b braille) join(x, from, to int, i ink) {
	step := 1
	if to < from {
		step = -1
	}
	half := (from + to) / 2
	for y := from; y != to; y += step {
		at := x
		if (y-half)*step < 0 && x > 0 {
			at = x - 1
		}
		b.dot(at, y, i)
	}
	b.dot(x, to, i)
}
