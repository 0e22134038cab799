package tui

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"dwindle/engine/trace"
)

// margin is the width left of the plot: a label, a blank and the frame. Only
// an uncommon tolerance makes it wider than 1e-08 needs.
func (p plot) margin() int { return max(len("1e-08"), len(power(p.tol))) + 2 }

// plot is everything a chart shows.
type plot struct {
	curves []drawn // in the order of their numbers
	x      span
	y      decades // rows are set when drawn
	tol    float64
	floor  float64 // estimated accuracy floor of the picked trial; NaN if unknown
	marks  marking // whose curves tell where common stopping rules would have ended them
	bounds bool    // bounds of the picked trial's error in the energy norm
	out    int     // curves left out
	truth  bool    // audited true residuals instead of the methods' own
	name   string  // what is drawn, for the corner
	signs  glyphs
	on     brush
}

// drawn is one trial on the chart.
type drawn struct {
	id     int
	h      *trace.History
	picked bool
	leads  bool
}

// mark is the state at the curve's head: nothing while it goes on.
func (d drawn) mark() string {
	if !d.h.Stop.Ended() {
		return ""
	}
	return string(d.h.Stop.Mark())
}

// draw returns the chart as h lines of at most w cells: h-2 rows of plot, the
// axis and its labels.
func (p plot) draw(w, h int) []string {
	margin := p.margin()
	c := newCanvas(w-margin, h-2)
	p.y.rows = c.h
	p.rules(c)
	p.trials(c)
	f := frames[p.signs]
	labels := p.y.labels(p.tol)
	lines := make([]string, 0, h)
	for y := range c.h {
		lines = append(lines, left(labels[y], margin-2)+" "+string(f.side)+c.line(y, p.on))
	}
	return append(lines, p.base(c.w)...)
}

// rules draws the target and the floor of the picked trial.
func (p plot) rules(c *canvas) {
	f := frames[p.signs]
	if y, ok := p.rowOf(p.tol, c.h); ok {
		for x := 1; x < c.w; x += 3 {
			c.set(x, y, f.target, faint)
		}
	}
	if y, ok := p.rowOf(p.floor, c.h); ok {
		for x := 2; x < c.w; x += 4 {
			c.set(x, y, f.floor, care)
		}
		c.write(c.w-len(floorText(p.floor))-1, y, floorText(p.floor), care)
	}
}

// floorText is the label of the floor's line.
func floorText(v float64) string { return " floor~" + sci(v) + " " }

// rowOf is the row of a value on a canvas of h rows.
func (p plot) rowOf(v float64, h int) (int, bool) {
	l, ok := level(v)
	if !ok || v <= 0 {
		return 0, false
	}
	return cellRow(p.y.row(l), h)
}

// trials draws the curves, the picked one last so that it lies on top, then
// the tags: heads first.
func (p plot) trials(c *canvas) {
	order := p.order()
	curves := make([]curve, len(order))
	for k, d := range order {
		curves[k] = p.curve(c, d)
	}
	p.energy(c)
	t := newTags(c)
	if name := p.caption(); len(name) < c.w {
		t.put(c.w-len(name), c.blankRow(c.w-len(name)-1), name, plain)
	}
	for k := len(order) - 1; k >= 0; k-- { // the picked head gets its place first
		p.head(t, order[k], curves[k])
	}
	for k := len(order) - 1; k >= 0; k-- {
		p.falseStop(t, order[k])
		p.stops(t, order[k], curves[k])
		p.body(t, order[k], curves[k])
	}
}

// order is the drawing order: those that matter little lie below, the leader
// and today's on top of the others, the picked one on top of all.
func (p plot) order() []drawn {
	var first, out, lead, last []drawn
	for _, d := range p.curves {
		switch {
		case d.picked:
			last = append(last, d)
		case d.leads || d.h.Today:
			lead = append(lead, d)
		case aside(d.h):
			first = append(first, d)
		default:
			out = append(out, d)
		}
	}
	return slices.Concat(first, out, lead, last)
}

// ink is the colour of a curve and its tags.
func (d drawn) ink() ink {
	if aside(d.h) && !d.picked {
		return faint
	}
	return inkOf(d.id)
}

// curve draws one trial in the chosen glyphs and returns it reduced to one
// column a cell.
func (p plot) curve(c *canvas, d drawn) curve {
	i := d.ink()
	cells := reduce(d.h.Records, p.x.fix, p.truth, p.x.place, max(c.w, 1))
	switch p.signs {
	case dotGlyphs:
		fine := reduce(d.h.Records, p.x.fix, p.truth, p.x.place, max(2*c.w, 1))
		braille{c, p.y}.draw(fine, i, d.picked)
	case lineGlyphs:
		strokes(c, p.y, reduce(d.h.Records, p.x.fix, p.truth, p.x.place, c.w+1), i, d.picked)
	default:
		digits(c, p.y, cells, d.id, i, d.picked)
	}
	return cells
}

// head tags the last point with the trial's number and its state; "^" says
// that it lies above the chart.
func (p plot) head(t *tags, d drawn, c curve) {
	if c.head < 0 && !c.lost {
		return
	}
	text, x, y := trace.Tag(d.id)+d.mark(), max(c.head, 0), 0
	if c.head >= 0 {
		y = int(math.Round(math.Min(math.Max(p.y.row(c.mid[c.head]), -1), float64(t.on.h-1))))
	}
	if c.lost || y < 0 {
		text, y = trace.Tag(d.id)+"^"+d.mark(), 0
	}
	columns, rows := p.reach(d, t.on)
	t.within(x, y, text, d.ink(), columns, rows)
}

// many is how many curves may all have their head tagged at any distance.
const many = 10

// reach is how far the tag of a head may be pushed aside. Among many curves a
// tag far from its own would be taken for another's: those that do not matter
// most go without.
func (p plot) reach(d drawn, c *canvas) (columns, rows int) {
	switch {
	case len(p.curves) <= many || d.picked || d.leads || d.h.Today:
		return c.w, c.h
	case reached(d.h):
		return 8, 2
	}
	return 3, 1
}

// falseStop marks where the picked trial's own number met the target while
// the true residual had not.
func (p plot) falseStop(t *tags, d drawn) {
	e, ok := falseStop(d.h)
	if !ok || !d.picked {
		return
	}
	v := e.Scale
	if p.truth {
		v = e.Value
	}
	for _, r := range d.h.Records {
		if r.Iter >= e.Iter {
			if y, ok := p.rowOf(v, t.on.h); ok {
				t.near(columnOf(p.x.place(p.x.fix.of(r)), t.on.w), y, "!", bad)
			}
			return
		}
	}
}

// body tags the curve on its way.
func (p plot) body(t *tags, d drawn, c curve) {
	if p.signs == asciiGlyphs && len(trace.Tag(d.id)) == 1 || aside(d.h) && !d.picked {
		return
	}
	period := 24
	if !p.on {
		period = 12
	}
	t.along(d.id, period, d.ink(), func(x int) (int, bool) {
		if x < 0 || x >= len(c.mid) {
			return 0, false
		}
		return cellRow(p.y.row(c.mid[x]), t.on.h)
	})
}

// caption names what is drawn, and along what.
func (p plot) caption() string {
	name := p.name + " by " + p.x.fix.String()
	if p.x.log {
		name += ", log"
	}
	if p.out > 0 {
		name += fmt.Sprintf(", %d left out", p.out)
	}
	return name
}

// base draws the axis and the numbers below it.
func (p plot) base(w int) []string {
	f, margin := frames[p.signs], p.margin()
	axis := []rune(strings.Repeat(string(f.base), max(w, 0)))
	labels := newCanvas(w+margin, 1)
	free := 0
	for _, v := range p.x.ticks(w) {
		x := columnOf(p.x.place(v), w)
		text := short(v)
		at := max(min(margin+x-len(text)/2, w+margin-len(text)), 0)
		if at < free || x >= len(axis) {
			continue // a tick without its number would tell nothing
		}
		axis[x] = f.tick
		labels.write(at, 0, text, plain)
		free = at + len(text) + 1
	}
	return []string{blanks(margin-1) + string(f.corner) + string(axis), labels.line(0, p.on)}
}
