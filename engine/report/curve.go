package report

import (
	"math"

	"dwindle/engine/trace"
)

// The decades a chart can hold; an exact zero is drawn at the lowest.
const (
	lowestDecade  = -20.0
	highestDecade = 40.0
)

// curve is one trial reduced to the columns of the chart: from column first
// on, one value (log10 of the relative residual) each, without gaps.
type curve struct {
	trial int
	first int
	vals  []float64
}

// decades is log10 of a residual, kept where it can be drawn; NaN where the
// residual is unknown.
func decades(x float64) float64 {
	if math.IsNaN(x) {
		return x
	}
	return min(max(math.Log10(math.Abs(x)), lowestDecade), highestDecade)
}

// reduce takes the mean of the logarithms in each column, and the last record
// as it is; columns between two records lie on the straight line.
func reduce(t trace.History, a axis, cols int) curve {
	sum, count := make([]float64, cols), make([]int, cols)
	first, last := cols, -1
	final := math.NaN()
	for _, r := range t.Records {
		y := decades(r.Residual)
		if math.IsNaN(y) {
			continue
		}
		c := int(a.share(a.of(r))*float64(cols-1) + 0.5)
		sum[c] += y
		count[c]++
		first, last, final = min(first, c), max(last, c), y
	}
	if last < 0 {
		return curve{}
	}
	vals := make([]float64, last-first+1)
	known := 0
	for k := range vals {
		if n := count[first+k]; n > 0 {
			vals[k] = sum[first+k] / float64(n)
			bridge(vals[known : k+1])
			known = k
		}
	}
	vals[len(vals)-1] = final
	return curve{first: first, vals: vals}
}

// bridge fills v between its two ends.
func bridge(v []float64) {
	n := len(v) - 1
	for k := 1; k < n; k++ {
		v[k] = v[0] + (v[n]-v[0])*float64(k)/float64(n)
	}
}

// scale is the vertical axis: row 0 is decade top, each decade takes rate
// rows.
type scale struct{ top, rate float64 }

// rates are the rows a decade may take, so that decades stay even.
var rates = []float64{4, 3, 2, 1.5, 1, 2. / 3, 1. / 2, 1. / 3, 1. / 4}

// fit chooses the scale for rows+1 rows. A curve that grows is shown up to
// two decades above the highest start, one that falls to two decades below
// the tolerance.
func fit(curves []curve, tol float64, rows int) scale {
	start, high, low := lowestDecade, lowestDecade, highestDecade
	for _, c := range curves {
		start = max(start, c.vals[0])
		for _, v := range c.vals {
			high, low = max(high, v), min(low, v)
		}
	}
	if goal := decades(tol); tol > 0 && finite(goal) {
		low = max(min(low, goal), goal-2)
	}
	top := math.Ceil(min(high, start+2)-1e-9) + 0 // never -0
	span := max(top-math.Floor(low+1e-9), 1)
	for _, r := range rates {
		if span*r <= float64(rows)+1e-9 {
			return scale{top, r}
		}
	}
	return scale{top, rates[len(rates)-1]}
}

// height turns a decade into rows above the lowest one, kept in 0..rows.
func (s scale) height(decade float64, rows int) float64 {
	return min(max(float64(rows)-(s.top-decade)*s.rate, 0), float64(rows))
}
