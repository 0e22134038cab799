package tui

import "math"

// digits draws c, reduced to one column a cell, with the last digit of the
// trial's number.
func digits(on *canvas, d decades, c curve, id int, i ink, full bool) {
	sign := rune('0' + id%10)
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
