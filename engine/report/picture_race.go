package report

import (
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"dwindle/engine/trace"
)

// point is a place in a plot: x in the units of its axis, y in decades.
type point struct{ x, y float64 }

// racePicture draws the residuals of all trials against time, w points wide:
// the own number as a line that ends in the trial's digit, and the true
// residual where it was measured last as a ring. It says whether there is
// anything to draw.
func racePicture(d Document, w, h vg.Length) (picture, bool) {
	a := newAxis(d.Trials)
	low, high := math.Inf(1), math.Inf(-1)
	for _, t := range d.Trials {
		low, high = bounds(ownCurve(t, a, 10), low, high)
	}
	if low > high {
		return picture{}, false
	}
	low, high = window(low, high, startOf(d.Trials), d.Settings.Tol)
	return picture{w, h, func(c draw.Canvas) {
		p := newFrame(a.spread(60/w.Points()), decadeTicks(low, high, 8))
		p.X.Min, p.X.Max, p.X.Scale = 0, max(a.end, 1e-9), a
		p.Y.Min, p.Y.Max = low, high
		p.Add(painter(func(c draw.Canvas, p *plot.Plot) {
			goalLine(c, p, d.Settings.Tol)
			for i, t := range d.Trials {
				drawOwn(c, p, a, i, t, int(w/2), t.Pairing == d.Choice.Pairing)
			}
			spots := tagSpots{within: c.Rectangle}
			for i, t := range d.Trials {
				finish(c, p, a, i, t, &spots)
			}
		}))
		p.Draw(room(c))
	}}, true
}

// room leaves a margin for the last label of an axis.
func room(c draw.Canvas) draw.Canvas { return draw.Crop(c, 2, -14, 2, -8) }

// startOf is what a plot must show the top of, in decades: the highest first
// residual, or last one of a trial that has not come to grief.
func startOf(ts []trace.History) float64 {
	start := 0.0
	for _, t := range ts {
		n := len(t.Records)
		if n == 0 {
			continue
		}
		if y := decades(t.Records[0].Residual); !math.IsNaN(y) {
			start = max(start, y)
		}
		if y := decades(t.Records[n-1].Residual); !math.IsNaN(y) && t.Stop != trace.Diverged && t.Stop != trace.BrokeDown {
			start = max(start, min(y-1, start+2))
		}
	}
	return start
}

// window is what a plot shows of curves between two decades: no more than two
// above the highest start, no more than four below the tolerance.
func window(low, high, start, tol float64) (float64, float64) {
	if goal := decades(tol); tol > 0 && finite(goal) {
		low = max(min(low, goal-0.5), goal-4)
	}
	high = min(high, start+2)
	return math.Floor(low*2) / 2, math.Max(math.Ceil(high*2)/2, math.Floor(low*2)/2+1)
}

func bounds(points []point, low, high float64) (float64, float64) {
	for _, q := range points {
		low, high = min(low, q.y), max(high, q.y)
	}
	return low, high
}

// ownCurve is a trial's own number, thinned to the extremes of each of cols
// columns: no peak is lost.
func ownCurve(t trace.History, a axis, cols int) []point {
	var out []point
	var least, most, last point
	count, at := 0, -1
	flush := func() {
		switch {
		case count == 0:
		case count == 1:
			out = append(out, last)
		case least.x < most.x:
			out = append(out, least, most)
		default:
			out = append(out, most, least)
		}
		count = 0
	}
	for _, r := range t.Records {
		q := point{a.of(r), decades(r.Residual)}
		if math.IsNaN(q.y) {
			continue
		}
		if col := int(a.share(q.x) * float64(cols)); col != at {
			flush()
			at = col
		}
		if count == 0 || q.y < least.y {
			least = q
		}
		if count == 0 || q.y > most.y {
			most = q
		}
		last = q
		count++
	}
	end := last
	flush()
	if n := len(out); n > 0 && out[n-1] != end {
		out = append(out, end)
	}
	return out
}

func place(c draw.Canvas, p *plot.Plot, q point) vg.Point {
	return vg.Point{X: c.X(p.X.Norm(q.x)), Y: c.Y(p.Y.Norm(q.y))}
}

func places(c draw.Canvas, p *plot.Plot, points []point) []vg.Point {
	out := make([]vg.Point, len(points))
	for i, q := range points {
		out[i] = place(c, p, q)
	}
	return out
}

func drawOwn(c draw.Canvas, p *plot.Plot, a axis, i int, t trace.History, cols int, chosen bool) {
	width := vg.Length(1.1)
	if chosen {
		width = 2.2
	}
	polyline(c, stroke(solid(curveInk(i)), width, dashes(i)), places(c, p, ownCurve(t, a, cols)))
}

// finish puts the trial's digit at the end of its curve, on the page's ground
// so that it can be read, and a ring at its last true residual.
func finish(c draw.Canvas, p *plot.Plot, a axis, i int, t trace.History, spots *tagSpots) {
	curve := ownCurve(t, a, 10)
	if len(curve) == 0 {
		return
	}
	end := curve[len(curve)-1]
	end.y = min(max(end.y, p.Y.Min), p.Y.Max)
	at := place(c, p, end)
	if y := decades(t.TrueResidual); y >= p.Y.Min && y <= p.Y.Max {
		ring(c, place(c, p, point{end.x, y}), 2.6, curveInk(i))
	}
	label := string(digit(i))
	tag := spots.place(vg.Point{X: at.X + 7, Y: at.Y})
	c.FillPolygon(ink{inkGround, 200}, box(tag.X, tag.Y, 4, 6))
	c.FillText(lettering(11, curveInk(i), draw.XCenter, draw.YCenter), tag, label)
}

// goalLine is the tolerance.
func goalLine(c draw.Canvas, p *plot.Plot, tol float64) {
	y := decades(tol)
	if !(tol > 0) || !finite(tol) || y < p.Y.Min || y > p.Y.Max {
		return
	}
	at := c.Y(p.Y.Norm(y))
	c.StrokeLine2(stroke(solid(inkGoal), 1, []vg.Length{5, 3}), c.Min.X, at, c.Max.X, at)
	c.FillText(lettering(9.5, inkGoal, draw.XLeft, draw.YBottom), vg.Point{X: c.Min.X + 3, Y: at + 1}, "tol "+exact(tol))
}

// ring is a small circle, open.
func ring(c draw.Canvas, at vg.Point, radius vg.Length, role uint8) {
	c.SetLineStyle(stroke(solid(role), 1.2, nil))
	c.Stroke(circle(at, radius))
}

// dot is a small circle, filled.
func dot(c draw.Canvas, at vg.Point, radius vg.Length, k ink) {
	c.SetColor(k)
	c.Fill(circle(at, radius))
}

func circle(at vg.Point, radius vg.Length) vg.Path {
	var p vg.Path
	p.Move(vg.Point{X: at.X + radius, Y: at.Y})
	p.Arc(at, radius, 0, 2*math.Pi)
	p.Close()
	return p
}

// box is a rectangle about a point, w and h to each side.
func box(x, y, w, h vg.Length) []vg.Point {
	return []vg.Point{{X: x - w, Y: y - h}, {X: x + w, Y: y - h}, {X: x + w, Y: y + h}, {X: x - w, Y: y + h}}
}
