package report

import (
	"math"
	"slices"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"dwindle/engine/inspect"
)

// densityPicture draws how many eigenvalues lie where, each bar with its
// standard error.
func densityPicture(bins []inspect.Bin, w, h vg.Length) (picture, bool) {
	var edges []float64
	top := 0.0
	for _, b := range bins {
		if finite(b.Count) && b.To > b.From {
			edges = append(edges, b.From, b.To)
			top = max(top, b.Count+max(finiteOr(b.Sd, 0), 0))
		}
	}
	if len(edges) == 0 || top <= 0 {
		return picture{}, false
	}
	r, ok := newReach(edges)
	if !ok {
		return picture{}, false
	}
	if even(bins) {
		r = reach{low: slices.Min(edges), high: slices.Max(edges)}
	}
	return picture{w, h, func(c draw.Canvas) {
		p := newFrame(r.ticks(int(w/60)), roundTicks(0, top, 4))
		p.X.Min, p.X.Max, p.X.Scale = r.low, r.high, r
		p.Y.Min, p.Y.Max = 0, top*1.05
		p.Add(painter(func(c draw.Canvas, p *plot.Plot) {
			for _, b := range bins {
				bar(c, p, b)
			}
		}))
		p.Draw(room(c))
	}}, true
}

// even says whether all bins are of one width: their axis is linear then.
func even(bins []inspect.Bin) bool {
	first := bins[0].To - bins[0].From
	for _, b := range bins {
		if math.Abs((b.To-b.From)-first) > 1e-6*first {
			return false
		}
	}
	return true
}

func bar(c draw.Canvas, p *plot.Plot, b inspect.Bin) {
	if !finite(b.Count) || !(b.To > b.From) {
		return
	}
	at := func(x, y float64) vg.Point { return place(c, p, point{x, max(y, 0)}) }
	count := max(b.Count, 0)
	c.FillPolygon(ink{inkCurves, 130}, []vg.Point{at(b.From, 0), at(b.To, 0), at(b.To, count), at(b.From, count)})
	if b.Sd > 0 && finite(b.Sd) {
		low, high := at(b.From, count-b.Sd), at(b.To, count+b.Sd)
		x := (low.X + high.X) / 2
		c.StrokeLine2(stroke(solid(inkText), 0.8, nil), x, low.Y, x, high.Y)
	}
}

// finiteOr is x, or instead of it another number where x is none.
func finiteOr(x, instead float64) float64 {
	if finite(x) {
		return x
	}
	return instead
}
