package tui

import (
	"math"

	"dwindle/engine/trace"
)

// tags places texts on a canvas so that two of them never touch: one free
// cell lies between, or "1" and "5=" would read as a number.
type tags struct {
	on    *canvas
	taken []bool // cells of the canvas that hold a tag
}

// newTags returns tags for a canvas.
func newTags(on *canvas) *tags { return &tags{on: on, taken: make([]bool, len(on.cells))} }

// free says whether n cells at (x, y), and one on either side, hold no tag.
func (t *tags) free(x, y, n int) bool {
	if x < 0 || x+n > t.on.w || y < 0 || y >= t.on.h {
		return false
	}
	for i := max(x-1, 0); i < min(x+n+1, t.on.w); i++ {
		if t.taken[y*t.on.w+i] {
			return false
		}
	}
	return true
}

// put writes a tag.
func (t *tags) put(x, y int, text string, i ink) {
	t.on.write(x, y, text, i)
	for k := range len(text) {
		t.taken[y*t.on.w+x+k] = true
	}
}

// near puts text as close to (x, y) as it can: sideways along its own row
// first, since a tag pushed upwards would tell another residual, then in the
// rows around. It says whether there was room.
func (t *tags) near(x, y int, text string, i ink) bool {
	return t.within(x, y, text, i, t.on.w, t.on.h)
}

// within is near that goes no farther than so many columns and rows.
func (t *tags) within(x, y int, text string, i ink, columns, rows int) bool {
	for dy := range min(rows, t.on.h) {
		for _, row := range []int{y - dy, y + dy} {
			for dx := range min(columns, t.on.w) {
				for _, col := range []int{x + dx, x - dx} {
					if t.free(col, row, len(text)) {
						t.put(col, row, text, i)
						return true
					}
				}
			}
		}
	}
	return false
}

// along puts the trial's number on its own curve every period columns, each
// trial starting elsewhere. rowAt gives the curve's row in a column, false
// where it has none.
func (t *tags) along(id, period int, i ink, rowAt func(x int) (int, bool)) {
	text := trace.Tag(id)
	for x := 2 + id*7%period; x < t.on.w; x += period {
		for _, dx := range []int{0, 1, -1, 2, -2, 3, -3} {
			y, ok := rowAt(x + dx)
			if ok && t.free(x+dx, y, len(text)) {
				t.put(x+dx, y, text, i)
				break
			}
		}
	}
}

// cellRow rounds a row and says whether it lies on a canvas of h rows.
func cellRow(row float64, h int) (int, bool) {
	if math.IsNaN(row) {
		return 0, false
	}
	y := math.Round(math.Max(math.Min(row, 1e6), -1e6))
	return int(y), y >= 0 && y < float64(h)
}
