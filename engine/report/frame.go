package report

import (
	"math"
	"slices"
	"strconv"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// painter is a layer of a plot.
type painter func(c draw.Canvas, p *plot.Plot)

// Plot draws the layer.
func (f painter) Plot(c draw.Canvas, p *plot.Plot) { f(c, p) }

// newFrame is an empty plot in the page's inks, with a grid at the ticks.
func newFrame(x, y []plot.Tick) *plot.Plot {
	p := plot.New()
	p.BackgroundColor = nil
	for _, a := range []struct {
		axis  *plot.Axis
		ticks []plot.Tick
	}{{&p.X, x}, {&p.Y, y}} {
		a.axis.Padding = 0
		a.axis.LineStyle = stroke(solid(inkFaint), 0.75, nil)
		a.axis.Tick.LineStyle = stroke(solid(inkFaint), 0.75, nil)
		a.axis.Tick.Length = 4
		a.axis.Tick.Marker = plot.ConstantTicks(a.ticks)
	}
	p.X.Tick.Label = lettering(10, inkText, draw.XCenter, draw.YTop)
	p.Y.Tick.Label = lettering(10, inkText, draw.XRight, draw.YCenter)
	p.Add(painter(func(c draw.Canvas, p *plot.Plot) { grid(c, p, x, y) }))
	return p
}

// grid draws faint lines at the ticks.
func grid(c draw.Canvas, p *plot.Plot, x, y []plot.Tick) {
	line := stroke(ink{inkFaint, 110}, 0.5, nil)
	for _, t := range x {
		if at := c.X(p.X.Norm(t.Value)); c.ContainsX(at) {
			c.StrokeLine2(line, at, c.Min.Y, at, c.Max.Y)
		}
	}
	for _, t := range y {
		if at := c.Y(p.Y.Norm(t.Value)); c.ContainsY(at) {
			c.StrokeLine2(line, c.Min.X, at, c.Max.X, at)
		}
	}
}

// decadeTicks are whole decades from low to high, at most most of them.
func decadeTicks(low, high float64, most int) []plot.Tick {
	step := 1.0
	for _, s := range []float64{1, 2, 5, 10, 20, 50, 100, 200} {
		if step = s; (high-low)/s <= float64(most) {
			break
		}
	}
	var out []plot.Tick
	for d := math.Ceil(low/step) * step; d <= high; d += step {
		out = append(out, plot.Tick{Value: d, Label: decadeLabel(d)})
	}
	return out
}

func decadeLabel(d float64) string {
	switch d {
	case 0:
		return "1"
	case 1:
		return "10"
	}
	return "1e" + strconv.Itoa(int(d))
}

// roundTicks are round numbers from low to high, at most most of them.
func roundTicks(low, high float64, most int) []plot.Tick {
	span := high - low
	if !(span > 0) || math.IsInf(span, 0) {
		return nil
	}
	unit := math.Pow(10, math.Floor(math.Log10(span/float64(most))))
	step := unit
	for _, s := range []float64{1, 2, 5, 10, 20} {
		if step = s * unit; span/step <= float64(most) {
			break
		}
	}
	var out []plot.Tick
	for k := math.Ceil(low/step - 1e-9); k*step <= high+1e-9*step; k++ {
		x := k*step + 0 // never -0
		out = append(out, plot.Tick{Value: x, Label: strconv.FormatFloat(x, 'g', 6, 64)})
	}
	return out
}

// spread are round numbers of an axis, also a stretched one, at least apart
// from each other as a share of its length.
func (a axis) spread(apart float64) []plot.Tick {
	var at []float64
	far := func(x float64) bool {
		return !slices.ContainsFunc(at, func(y float64) bool { return math.Abs(a.share(x)-a.share(y)) < apart })
	}
	at = append(at, 0)
	if a.bend == 0 {
		for _, t := range roundTicks(0, a.end, int(1/apart)) {
			if far(t.Value) && (a.seconds || t.Value == math.Trunc(t.Value)) {
				at = append(at, t.Value)
			}
		}
	} else {
		top := math.Floor(math.Log10(a.end))
		for _, lead := range []float64{1, 3, 5, 2} {
			for k := top; k > top-12; k-- {
				if x := lead * math.Pow(10, k); x <= a.end && far(x) && (a.seconds || x >= 1) {
					at = append(at, x)
				}
			}
		}
	}
	slices.Sort(at)
	var out []plot.Tick
	for _, x := range at {
		out = append(out, plot.Tick{Value: x, Label: a.label(x)})
	}
	return out
}

// Normalize makes the axis one of a plot from 0 to its end.
func (a axis) Normalize(_, _, x float64) float64 { return a.share(x) }

// polyline draws points that need not lie within the plot.
func polyline(c draw.Canvas, s draw.LineStyle, points []vg.Point) {
	if len(points) > 1 {
		c.StrokeLines(s, c.ClipLinesXY(points)...)
	}
}
