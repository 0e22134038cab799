package tui

import (
	"fmt"
	"math"
	"slices"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// stretch is how many values lie between two; both ends are one for a single
// value.
type stretch struct{ from, to, n float64 }

// single counts each value once.
func single(list []complex128) []stretch {
	out := make([]stretch, len(list))
	for i, z := range list {
		out[i] = stretch{real(z), real(z), 1}
	}
	return out
}

// binned are the bins that hold any.
func binned(bins []inspect.Bin) []stretch {
	var out []stretch
	for _, b := range bins {
		if b.Count >= 0.5 {
			out = append(out, stretch{b.From, b.To, b.Count})
		}
	}
	return out
}

// outermost are the known ends of a spectrum.
func outermost(x *inspect.Spectrum) []stretch {
	var out []stretch
	for _, v := range slices.Concat(x.Low, x.High) {
		out = append(out, stretch{v, v, 1})
	}
	return out
}

func largestSd(bins []inspect.Bin) float64 {
	most := 0.0
	for _, b := range bins {
		if finite(b.Sd) {
			most = math.Max(most, b.Sd)
		}
	}
	return most
}

func allReal(list []complex128) bool {
	for _, z := range list {
		if math.Abs(imag(z)) > 1e-10*(math.Abs(real(z))+1e-300) {
			return false
		}
	}
	return true
}

// pictureMargin is the width of the labels left of a picture.
const pictureMargin = 8

// densityPicture draws how many values lie where, h lines high: single values
// by column, bins each as high as what they hold. Where there is any there is
// at least one cell.
func densityPicture(list []stretch, w, h int, g glyphs) []string {
	var ends []float64
	for _, v := range list {
		ends = append(ends, v.from, v.to)
	}
	r, ok := rulerOf(ends)
	if !ok {
		return nil
	}
	width, rows := max(w-pictureMargin-1, 1), max(h-3, 2)
	heights := make([]float64, width)
	for _, v := range list {
		if !finite(v.from) || !finite(v.to) {
			continue
		}
		a, b := columnOf(r.place(v.from), width), columnOf(r.place(v.to), width)
		if v.from == v.to {
			heights[a] += v.n
			continue
		}
		for x := a; x < max(b, a+1); x++ {
			heights[x] = math.Max(heights[x], v.n)
		}
	}
	most := math.Max(slices.Max(heights), 1)
	c := newCanvas(width, rows)
	for x, n := range heights {
		if n > 0 {
			for y := range max(int(math.Round(n/most*float64(rows))), 1) {
				c.set(x, rows-1-y, fullCell(g), plain)
			}
		}
	}
	return framedPicture(c, g, fmt.Sprintf("%.0f", most), "1", r)
}

// fullCell is the sign of a full cell.
func fullCell(g glyphs) rune {
	if g == dotGlyphs {
		return '⣿'
	}
	return '#'
}

// framedPicture puts labels at the top and the bottom row, the frame and the
// axis round a canvas.
func framedPicture(c *canvas, g glyphs, top, bottom string, r ruler) []string {
	var lines []string
	for y := range c.h {
		label := ""
		switch y {
		case 0:
			label = top
		case c.h - 1:
			label = bottom
		}
		lines = append(lines, right(label, pictureMargin-2)+" "+string(frames[g].side)+c.line(y, false))
	}
	return append(lines, r.base(c.w, pictureMargin, g)...)
}

// lockPicture draws each Ritz value that locked, over the iteration where it
// did: time runs downwards.
func (m *model) lockPicture(id int, h *trace.History, w, tall int) []string {
	var values []float64
	for _, l := range h.Locks {
		values = append(values, l.Value)
	}
	for _, v := range []float64{h.Condition.Smallest, h.Condition.Largest} {
		if v != 0 {
			values = append(values, v)
		}
	}
	r, ok := rulerOf(values)
	if !ok {
		return nil
	}
	c := newCanvas(max(w-pictureMargin-1, 1), max(tall-3, 2))
	for _, l := range h.Locks {
		y := columnOf(float64(l.Iter)/float64(max(h.Iterations, 1)), c.h)
		sign := 'o'
		if l.Copies > 1 {
			sign = rune('0' + min(l.Copies, 9))
		}
		c.set(columnOf(r.place(l.Value), c.w), y, sign, plain)
	}
	title := fmt.Sprintf("Ritz values of trial %s %s, when each locked (digit: copies)", trace.Tag(id), m.signs.clean(h.Pairing))
	lines := []string{m.on.paint(faint, clip(title, w))}
	return append(lines, framedPicture(c, m.signs, "it 0", fmt.Sprintf("%d", h.Iterations), r)...)
}

// planePicture draws values in the complex plane: real part across, imaginary
// part up; the number of values in a cell by its sign.
func planePicture(list []complex128, w, h int, g glyphs) []string {
	var re []float64
	top := 0.0
	for _, z := range list {
		re = append(re, real(z))
		if finite(imag(z)) {
			top = math.Max(top, math.Abs(imag(z)))
		}
	}
	r, ok := rulerOf(append(re, 0)) // zero is what convergence is held against
	if !ok {
		return nil
	}
	r.log = false
	rows := max(h-3, 3) | 1 // odd: the real axis has a row
	c := newCanvas(max(w-pictureMargin-1, 1), rows)
	counts := make([]int, c.w*c.h)
	for x := range c.w {
		c.set(x, rows/2, frames[g].target, faint)
	}
	for _, z := range list {
		if finite(real(z)) && finite(imag(z)) {
			y := rows / 2
			if top > 0 {
				y = columnOf((1-imag(z)/top)/2, rows)
			}
			counts[y*c.w+columnOf(r.place(real(z)), c.w)]++
		}
	}
	for k, n := range counts {
		if n > 0 {
			c.set(k%c.w, k/c.w, crowd(n), plain)
		}
	}
	x := columnOf(r.place(0), c.w)
	if counts[rows/2*c.w+x] == 0 {
		c.set(x, rows/2, '0', plain)
	}
	return framedPicture(c, g, fmt.Sprintf("%.0e", top), fmt.Sprintf("%.0e", -top), r)
}

// crowd is the sign for so many values in a cell.
func crowd(n int) rune {
	switch {
	case n == 1:
		return '.'
	case n <= 5:
		return ':'
	case n <= 13:
		return '+'
	}
	return '#'
}
