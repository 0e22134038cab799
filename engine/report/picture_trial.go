package report

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"dwindle/engine/trace"
)

// trialPicture draws what one trial left behind against its iterations: own
// number, audits, tolerance, accuracy floor, where common rules would have
// stopped, the energy norm of the error, and where Ritz values locked. It
// says whether there is anything to draw.
func trialPicture(d Document, i int, w, h vg.Length) (picture, bool) {
	t := d.Trials[i]
	r, ok := t.Last()
	a := axis{end: float64(r.Iter)}
	curve := ownCurve(t, a, int(w/2))
	if !ok || len(curve) == 0 {
		return picture{}, false
	}
	low, high := bounds(curve, math.Inf(1), math.Inf(-1))
	low, high = bounds(audits(t), low, high)
	if floor := t.Attainable(); floor > 0 {
		low = min(low, decades(floor)-0.3)
	}
	for _, e := range t.EnergyErrors {
		if y := decades(e.Lower); e.Lower > 0 {
			low, high = min(low, y), max(high, y)
		}
	}
	low, high = window(low, high, startOf(d.Trials[i:i+1]), d.Settings.Tol)
	return picture{w, h, func(c draw.Canvas) {
		p := newFrame(a.spread(0.18), decadeTicks(low, high, 6))
		p.X.Min, p.X.Max, p.X.Scale = 0, max(a.end, 1), a
		p.Y.Min, p.Y.Max = low, high
		p.Add(painter(func(c draw.Canvas, p *plot.Plot) {
			energyBand(c, p, t)
			goalLine(c, p, d.Settings.Tol)
			floorLine(c, p, t, curveInk(i))
			polyline(c, stroke(solid(curveInk(i)), 1.4, nil), places(c, p, curve))
			drawAudits(c, p, t)
			drawStops(c, p, t)
			drawLocks(c, p, t)
		}))
		p.Draw(room(c))
	}}, true
}

// audits are the true residuals that were measured, in decades.
func audits(t trace.History) []point {
	var out []point
	for _, r := range t.Records {
		if y := decades(r.Audit); r.Audited() && finite(y) {
			out = append(out, point{float64(r.Iter), y})
		}
	}
	return out
}

func drawAudits(c draw.Canvas, p *plot.Plot, t trace.History) {
	points := audits(t)
	polyline(c, stroke(ink{inkText, 150}, 0.6, []vg.Length{2, 2}), places(c, p, points))
	for _, q := range points {
		if q.y >= p.Y.Min && q.y <= p.Y.Max {
			dot(c, place(c, p, q), 1.5, solid(inkText))
		}
	}
}

// floorLine is the best true residual that rounding is expected to allow.
func floorLine(c draw.Canvas, p *plot.Plot, t trace.History, role uint8) {
	floor := t.Attainable()
	y := decades(floor)
	if !(floor > 0) || y < p.Y.Min || y > p.Y.Max {
		return
	}
	at := c.Y(p.Y.Norm(y))
	c.StrokeLine2(stroke(solid(role), 0.8, []vg.Length{1, 2}), c.Min.X, at, c.Max.X, at)
	c.FillText(lettering(9.5, role, draw.XRight, draw.YBottom), vg.Point{X: c.Max.X - 3, Y: at + 1}, "floor "+sci(floor))
}

// energyBand lies between the lower and the upper estimate of the energy norm
// of the error; without an upper one there is a line.
func energyBand(c draw.Canvas, p *plot.Plot, t trace.History) {
	var lower, upper []point
	for _, e := range t.EnergyErrors {
		x := float64(e.Iter)
		if e.Lower > 0 && finite(e.Lower) {
			lower = append(lower, point{x, decades(e.Lower)})
		}
		if e.Upper > 0 && finite(e.Upper) {
			upper = append(upper, point{x, decades(e.Upper)})
		}
	}
	lower, upper = few(lower, 200), few(upper, 200)
	if len(upper) > 1 && len(lower) > 1 {
		around := append([]point{}, lower...)
		for k := len(upper) - 1; k >= 0; k-- {
			around = append(around, upper[k])
		}
		c.FillPolygon(ink{inkGoal, 60}, c.ClipPolygonXY(places(c, p, around)))
	}
	line := stroke(solid(inkGoal), 0.8, nil)
	polyline(c, line, places(c, p, lower))
	polyline(c, line, places(c, p, upper))
}

// few keeps every k-th point and the last, so that most remain.
func few(points []point, most int) []point {
	if len(points) <= most {
		return points
	}
	var out []point
	for k := range most {
		out = append(out, points[k*(len(points)-1)/(most-1)])
	}
	return out
}

// stopLetters stand for the common stopping rules.
var stopLetters = []struct{ rule, letter, meaning string }{
	{"rhs", "b", "relative to b"},
	{"initial", "r", "relative to the first residual"},
	{"preconditioned", "m", "of the preconditioned residual"},
	{"backward", "w", "of the backward error"},
	{"energy", "e", "of the estimated energy norm"},
}

// stop is where one or more common rules would have stopped.
type stop struct {
	at      point
	letters string
}

// stops are the places where a code with each common rule would have stopped,
// at the true residual it would have had there.
func stops(t trace.History) []stop {
	var out []stop
	for _, s := range stopLetters {
		for _, m := range t.WouldStop {
			q := point{float64(m.Iter), decades(m.True)}
			if m.Rule != s.rule || m.Iter < 0 || !finite(q.y) {
				continue
			}
			if k := slices.IndexFunc(out, func(o stop) bool { return o.at == q }); k >= 0 {
				out[k].letters += s.letter
			} else {
				out = append(out, stop{q, s.letter})
			}
		}
	}
	return out
}

// drawStops marks the stops: below the line of the tolerance is well, above it
// is not.
func drawStops(c draw.Canvas, p *plot.Plot, t trace.History) {
	for _, s := range stops(t) {
		s.at.y = min(max(s.at.y, p.Y.Min), p.Y.Max)
		at := place(c, p, s.at)
		ring(c, at, 3, inkText)
		c.FillText(lettering(9.5, inkText, draw.XCenter, draw.YBottom), vg.Point{X: at.X, Y: at.Y + 4}, s.letters)
	}
}

// drawLocks puts a tick at the top where a Ritz value locked, a thicker one
// where it is a copy.
func drawLocks(c draw.Canvas, p *plot.Plot, t trace.History) {
	for _, l := range t.Locks {
		x := c.X(p.X.Norm(float64(l.Iter)))
		if c.ContainsX(x) {
			width := vg.Length(0.7)
			if l.Copies > 1 {
				width = 1.6
			}
			c.StrokeLine2(stroke(solid(inkText), width, nil), x, c.Max.Y, x, c.Max.Y-7)
		}
	}
}

// trialCaption says in words what the picture of a trial shows.
func trialCaption(t trace.History) string {
	s := Outcome(t)
	if len(t.Locks) > 0 {
		s += fmt.Sprintf("; %s locked", plural(len(t.Locks), "Ritz value", "Ritz values"))
	}
	if t.Delay > 0 {
		s += fmt.Sprintf("; about %s lost to rounding", plural(t.Delay, "iteration", "iterations"))
	}
	return s
}
