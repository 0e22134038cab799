package report

import (
	"fmt"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"dwindle/engine/trace"
)

// bars is a picture of horizontal bars, each in two parts, with words above.
type bars struct {
	rows []barRow
	full float64 // the value that fills the width; larger ones are cut
}

type barRow struct {
	label       string
	first, rest float64
	role        uint8
}

// The shape of a bar with its label, in points.
const barHeight = 32

// timeBars are the own times of the trials that began, set-up first. A trial
// far longer than the others is cut, so that the others can be compared.
func timeBars(d Document) bars {
	var b bars
	for i, t := range d.Trials {
		if t.OwnTime <= 0 || len(t.Records) == 0 {
			continue
		}
		setup := t.SetupTime.Seconds()
		own := t.OwnTime.Seconds()
		b.rows = append(b.rows, barRow{fmt.Sprintf("%s  %s, set-up %s (%s)", barName(i, t), trace.Took(own), trace.Took(setup), ending(t)),
			setup, max(own-setup, 0), curveInk(i)})
	}
	return b.fit(6)
}

// memoryBars are what the trials hold: the preconditioner first, then the rest.
func memoryBars(d Document) bars {
	var b bars
	for i, t := range d.Trials {
		if t.MemoryBytes > 0 {
			m := float64(min(t.Notes.Bytes, t.MemoryBytes))
			b.rows = append(b.rows, barRow{fmt.Sprintf("%s  %s, M %s", barName(i, t), memory(t.MemoryBytes), memory(int64(m))),
				m, float64(t.MemoryBytes) - m, curveInk(i)})
		}
	}
	return b.fit(1e300)
}

func barName(i int, t trace.History) string {
	return string(digit(i)) + " " + clip(plain(t.Pairing), 30)
}

// fit lets the longest bar fill the width, unless it is more than times as
// long as half of the bars.
func (b bars) fit(times float64) bars {
	for _, r := range b.rows {
		longer := 0
		for _, q := range b.rows {
			if q.first+q.rest >= r.first+r.rest {
				longer++
			}
		}
		if size := r.first + r.rest; longer*2 >= len(b.rows) {
			b.full = max(b.full, size)
		}
	}
	top := 0.0
	for _, r := range b.rows {
		top = max(top, r.first+r.rest)
	}
	b.full = min(top, b.full*times)
	return b
}

// picture draws the bars, w points wide.
func (b bars) picture(w vg.Length) (picture, bool) {
	if len(b.rows) == 0 || b.full <= 0 {
		return picture{}, false
	}
	return picture{w, vg.Length(barHeight*len(b.rows) + 4), func(c draw.Canvas) {
		for i, r := range b.rows {
			b.draw(c, r, c.Max.Y-vg.Length(i*barHeight))
		}
	}}, true
}

func (b bars) draw(c draw.Canvas, r barRow, top vg.Length) {
	room := c.Max.X - c.Min.X - 18
	c.FillText(lettering(9.5, r.role, draw.XLeft, draw.YTop), vg.Point{X: c.Min.X, Y: top - 2}, clip(r.label, int(room/4.9)))
	at := func(x float64) vg.Length { return c.Min.X + room*vg.Length(min(x/b.full, 1)) }
	part := func(from, to float64, density uint8) {
		if x0, x1 := at(from), at(to); x1 > x0 {
			c.FillPolygon(ink{r.role, density}, []vg.Point{{X: x0, Y: top - 17}, {X: x1, Y: top - 17}, {X: x1, Y: top - 28}, {X: x0, Y: top - 28}})
		}
	}
	part(0, r.first, 255)
	part(r.first, r.first+r.rest, 120)
	if r.first+r.rest > b.full {
		c.FillText(lettering(11, r.role, draw.XLeft, draw.YCenter), vg.Point{X: at(b.full) + 2, Y: top - 22}, ">>")
	}
}
