package tui

import "strings"

// cell is one place of a canvas.
type cell struct {
	sign rune
	ink  ink
}

// canvas is a grid of cells, row 0 on top. Everything drawn outside is lost.
type canvas struct {
	w, h  int
	cells []cell // w*h, by rows
}

// newCanvas returns a blank canvas.
func newCanvas(w, h int) *canvas {
	c := &canvas{w: max(w, 0), h: max(h, 0)}
	c.cells = make([]cell, c.w*c.h)
	for i := range c.cells {
		c.cells[i].sign = ' '
	}
	return c
}

// holds says whether (x, y) lies on the canvas.
func (c *canvas) holds(x, y int) bool { return x >= 0 && x < c.w && y >= 0 && y < c.h }

// at returns the sign at (x, y), a blank outside.
func (c *canvas) at(x, y int) rune {
	if !c.holds(x, y) {
		return ' '
	}
	return c.cells[y*c.w+x].sign
}

// set puts a sign at (x, y).
func (c *canvas) set(x, y int, sign rune, i ink) {
	if c.holds(x, y) {
		c.cells[y*c.w+x] = cell{sign, i}
	}
}

// blankRow is a row that is blank from column x on: the uppermost, else the
// lowest, else the next one down; the uppermost where there is none.
func (c *canvas) blankRow(x int) int {
	rows := []int{0, c.h - 1}
	for y := 1; y < c.h-1; y++ {
		rows = append(rows, y)
	}
	for _, y := range rows {
		blank := true
		for k := x; k < c.w; k++ {
			blank = blank && c.at(k, y) == ' '
		}
		if blank {
			return y
		}
	}
	return 0
}

// write puts text at (x, y), one cell a rune.
func (c *canvas) write(x, y int, text string, i ink) {
	for _, r := range text {
		c.set(x, y, r, i)
		x++
	}
}

// line returns row y as text with one run of colour for each stretch of equal
// ink, trailing blanks left out.
func (c *canvas) line(y int, on brush) string {
	row := c.cells[y*c.w : (y+1)*c.w]
	end := len(row)
	for end > 0 && row[end-1].sign == ' ' {
		end--
	}
	var out, run strings.Builder
	var i ink
	for _, p := range row[:end] {
		if p.ink != i && p.sign != ' ' {
			out.WriteString(on.paint(i, run.String()))
			run.Reset()
			i = p.ink
		}
		run.WriteRune(p.sign)
	}
	out.WriteString(on.paint(i, run.String()))
	return out.String()
}
