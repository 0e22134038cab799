package tui

// patternLines draws the pattern of A, at most h lines, beside the facts; nil
// where there is no room or nothing to draw.
func patternLines(m *model, w, h int) []string {
	p := m.snap.Facts.Pattern
	side := min((w-56)/2*2, 32, 2*h)
	if len(p) == 0 || side < 12 {
		return nil
	}
	c := newCanvas(side, (side+1)/2)
	if m.signs == asciiGlyphs {
		shade(c, p)
	} else {
		dots(c, p)
	}
	lines := make([]string, c.h)
	for y := range lines {
		lines[y] = string(frames[m.signs].side) + left(c.line(y, false), side)
	}
	return lines
}

// dots sets a braille dot for every square of the matrix that is not empty.
func dots(c *canvas, p [][]float64) {
	b := braille{on: c}
	nx, ny := min(2*c.w, len(p[0])), min(4*c.h, len(p))
	for y := range ny {
		for x := range nx {
			if densest(p, x, nx, y, ny) > 0 {
				b.dot(x, y, plain)
			}
		}
	}
}

// shade sets a sign for the density of every square of the matrix.
func shade(c *canvas, p [][]float64) {
	for y := range c.h {
		for x := range c.w {
			if d := densest(p, x, c.w, y, c.h); d > 0 {
				c.set(x, y, rune(".:+#"[min(int(d*4), 3)]), plain)
			}
		}
	}
}

// densest is the largest density in part x of nx, y of ny of the picture.
func densest(p [][]float64, x, nx, y, ny int) float64 {
	most := 0.0
	for i := y * len(p) / ny; i < max((y+1)*len(p)/ny, y*len(p)/ny+1) && i < len(p); i++ {
		row := p[i]
		for j := x * len(row) / nx; j < max((x+1)*len(row)/nx, x*len(row)/nx+1) && j < len(row); j++ {
			most = max(most, row[j])
		}
	}
	return most
}
