package tui

import (
	"math"
	"strings"

	"github.com/guptarohit/asciigraph"
)

// strokes draws c, reduced to one column a cell plus one, with box-drawing
// strokes. asciigraph shapes the line; the canvas keeps frame, order and
// colour.
func strokes(on *canvas, d decades, c curve, i ink, full bool) {
	if full {
		spans(on, d, c, '│', i)
	}
	for y, line := range strings.Split(stroked(d, c), "\n") {
		_, line, ok := strings.Cut(line, axisEnd(line))
		if !ok {
			continue
		}
		x := 0
		for _, r := range line {
			if r != ' ' {
				on.set(x, y, r, i)
			}
			x++
		}
	}
}

// axisEnd returns the sign that ends the axis of a plotted line.
func axisEnd(line string) string {
	if at := strings.IndexAny(line, "┤┼"); at >= 0 && strings.HasPrefix(line[at:], "┼") {
		return "┼"
	}
	return "┤"
}

// stroked returns the plot of c as d.rows lines, or "" when there is nothing
// to draw. Rows are shifted to 0..rows-1, which keeps the height stable;
// levels outside become gaps, and asciigraph never sees an infinity.
func stroked(d decades, c curve) string {
	rows, any := make([]float64, len(c.mid)), false
	for x, y := range c.mid {
		rows[x] = float64(d.rows-1) - d.row(y)
		if !(rows[x] > -0.5 && rows[x] < float64(d.rows)-0.5) {
			rows[x] = math.NaN()
			continue
		}
		any = true
	}
	if !any || d.rows < 2 {
		return ""
	}
	return asciigraph.Plot(rows, asciigraph.Height(d.rows-1),
		asciigraph.LowerBound(0), asciigraph.UpperBound(float64(d.rows-1)),
		asciigraph.YAxisValueFormatter(func(float64) string { return "" }))
}

// spans draws the extremes of every column as a vertical stroke.
func spans(on *canvas, d decades, c curve, sign rune, i ink) {
	for x := range c.lo {
		if c.lo[x] > c.hi[x] {
			continue
		}
		top := int(math.Round(math.Max(d.row(c.hi[x]), -1)))
		end := int(math.Round(math.Min(d.row(c.lo[x]), float64(d.rows))))
		for y := top; y <= end; y++ {
			on.set(x, y, sign, i)
		}
	}
}
