package inspect

// hull widens the interval r by [lo, hi] of a row; first says that r holds
// nothing yet.
func (r *Range) hull(first bool, row int, lo, hi float64) {
	if first || lo < r.Min {
		r.Min, r.MinRow = lo, row
	}
	if first || hi > r.Max {
		r.Max, r.MaxRow = hi, row
	}
}

// gather collects a Range value by value.
type gather struct {
	Range
	any bool
}

func (g *gather) add(row int, v float64) { g.span(row, v, v) }

func (g *gather) span(row int, lo, hi float64) {
	g.hull(!g.any, row, lo, hi)
	g.any = true
}
