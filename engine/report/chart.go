package report

import (
	"fmt"
	"math"
	"strings"

	"github.com/guptarohit/asciigraph"

	"dwindle/engine/trace"
)

// The chart's shape, constant for every document.
const (
	chartRows = 16 // rows of the plot
	axisCols  = 7  // "1e-08 |"
	plotCols  = Width - axisCols - 2
)

// Chart draws the residuals of all trials that have any: each curve is made
// of its trial's digit, and ends in the mark of the trial's state at the
// height of its true residual. The choice's curve lies on top. It returns no
// line where there is nothing to draw, and otherwise a constant number.
func Chart(d Document) []string {
	a := newAxis(d.Trials)
	var curves []curve
	for i, t := range d.Trials {
		if c := reduce(t, a, plotCols); len(c.vals) > 0 {
			c.trial = i
			curves = append(curves, c)
		}
	}
	if len(curves) == 0 {
		return nil
	}
	s := fit(curves, d.Settings.Tol, chartRows-1)
	canvas := newCanvas(s, d.Settings.Tol)
	for _, picked := range []bool{false, true} {
		for _, c := range curves {
			if picked == (d.Trials[c.trial].Pairing == d.Choice.Pairing) {
				canvas.draw(c, s)
			}
		}
	}
	for _, c := range curves {
		canvas.finish(c, s, d.Trials[c.trial])
	}
	rule, words := a.labels(plotCols)
	lines := []string{"residual over b, own norm, against " + a.title()}
	for k, row := range canvas {
		lines = append(lines, strings.TrimRight(rowLabel(s, k, d.Settings.Tol)+string(row), " "))
	}
	pad := strings.Repeat(" ", axisCols-1)
	return append(lines, pad+"+"+rule, strings.TrimRight(pad+" "+words, " "),
		"digit: trial; mark: its true residual at the end (+ converged, = stagnated,",
		"! diverged or falsely converged, x broke down or failed, # limit)")
}

// canvas is the plot, row by row.
type canvas [][]byte

// newCanvas is empty but for the line of the tolerance.
func newCanvas(s scale, tol float64) canvas {
	c := make(canvas, chartRows)
	goal := goalRow(s, tol)
	for k := range c {
		c[k] = []byte(strings.Repeat(" ", plotCols+2))
		for i := 0; k == goal && i < plotCols; i += 3 {
			c[k][i] = '-'
		}
	}
	return c
}

// goalRow is the row of the tolerance, -1 where it is off the chart.
func goalRow(s scale, tol float64) int {
	k := math.Round((s.top - decades(tol)) * s.rate)
	if tol > 0 && k >= 0 && k < chartRows {
		return int(k)
	}
	return -1
}

// draw lets asciigraph draw the strokes of one curve and copies them: it gets
// heights within fixed bounds, no gap, no infinity and one more value than
// there are columns, so that its shape is known.
func (c canvas) draw(v curve, s scale) {
	heights := make([]float64, 0, len(v.vals)+1)
	for _, y := range v.vals {
		heights = append(heights, s.height(y, chartRows-1))
	}
	heights = append(heights, heights[len(heights)-1])
	text := asciigraph.Plot(heights, asciigraph.Height(chartRows-1),
		asciigraph.LowerBound(0), asciigraph.UpperBound(chartRows-1),
		asciigraph.SeriesChars(asciigraph.CreateCharSet(string(digit(v.trial)))),
		asciigraph.YAxisValueFormatter(func(float64) string { return "" }))
	const frame = 3 // runes of asciigraph's own axis
	for k, line := range strings.Split(text, "\n") {
		for i, r := range []rune(line) {
			if i >= frame && r != ' ' && k < chartRows {
				c[k][v.first+i-frame] = byte(r)
			}
		}
	}
}

// finish marks how a trial ended, beside its last column.
func (c canvas) finish(v curve, s scale, t trace.History) {
	if !t.Stop.Ended() {
		return
	}
	y := decades(t.TrueResidual)
	if math.IsNaN(y) {
		y = v.vals[len(v.vals)-1]
	}
	k := chartRows - 1 - int(math.Round(s.height(y, chartRows-1)))
	c[k][v.first+len(v.vals)] = t.Stop.Mark()
}

// rowLabel is the scale beside row k: whole decades with a free row between,
// and always the tolerance.
func rowLabel(s scale, k int, tol float64) string {
	goal := goalRow(s, tol)
	if k == goal {
		return fmt.Sprintf("%5s |", fmt.Sprintf("%.0e", tol))
	}
	decade := s.top - float64(k)/s.rate
	whole := math.Abs(decade-math.Round(decade)) < 1e-9
	free := s.rate >= 2 || k%2 == 0
	if whole && free && (goal < 0 || k != goal-1 && k != goal+1) {
		return fmt.Sprintf("%5s |", fmt.Sprintf("1e%+03.0f", decade))
	}
	return "      |"
}
