package tui

import (
	"math"

	"dwindle/engine/trace"
)

// digits draws c, reduced to one column a cell, with the tag of the trial.
func digits(on *canvas, d decades, c curve, id int, i ink, full bool) {
	sign := '*' // where there are more trials than signs
	if tag := trace.Tag(id); len(tag) == 1 {
		sign = rune(tag[0])
	}
	if full {
		spans(on, d, c, sign, i)
	}
	for x, y := range c.mid {
		if math.IsNaN(y) {
			continue
		}
		on.set(x, int(math.Round(math.Min(math.Max(d.row(y), -1), float64(d.rows)))), sign, i)
	}
}
