package report

import (
	"fmt"
	"math"
	"strings"

	"dwindle/engine/trace"
)

// axis is the horizontal axis of the chart: own seconds, or iterations where
// the times are too short to compare. It is linear, or stretched near 0 as log(1+x/bend)
// when a short trial would vanish beside a long one.
type axis struct {
	seconds bool
	end     float64
	bend    float64 // 0: linear
}

// tooShort is the own time up to which the clock says more of the machine than
// of the method; iterations are drawn then.
const tooShort = 0.01 // seconds

// longShort is the ratio of the longest to the shortest trial from which the
// axis is stretched.
const longShort = 12

func newAxis(trials []trace.History) axis {
	a := axis{seconds: true}
	shortest := a.span(trials)
	if a.end < tooShort {
		a = axis{}
		shortest = a.span(trials)
	}
	if a.end > longShort*shortest {
		a.bend = shortest / 4
	}
	return a
}

// span sets the end of the axis and returns that of the shortest curve.
func (a *axis) span(trials []trace.History) float64 {
	shortest := math.Inf(1)
	for _, t := range trials {
		if r, ok := t.Last(); ok && a.of(r) > 0 {
			a.end = max(a.end, a.of(r))
			shortest = min(shortest, a.of(r))
		}
	}
	return shortest
}

// of returns where a record stands, in the units of the axis.
func (a axis) of(r trace.Record) float64 {
	if a.seconds {
		return r.Clock.Seconds()
	}
	return float64(r.Iter)
}

// share maps a value to 0..1.
func (a axis) share(x float64) float64 {
	switch {
	case a.end <= 0:
		return 0
	case a.bend > 0:
		x, end := math.Log1p(max(x, 0)/a.bend), math.Log1p(a.end/a.bend)
		return min(x/end, 1)
	}
	return min(max(x, 0)/a.end, 1)
}

// value is the inverse of share.
func (a axis) value(share float64) float64 {
	if a.bend > 0 {
		return a.bend * math.Expm1(share*math.Log1p(a.end/a.bend))
	}
	return share * a.end
}

// labels returns the two lines below the chart, for cols columns.
func (a axis) labels(cols int) (rule, text string) {
	const ticks = 5
	marks, words := []byte(strings.Repeat("-", cols)), []byte(strings.Repeat(" ", cols))
	for k := 0; k < ticks; k++ {
		at := k * (cols - 1) / (ticks - 1)
		marks[at] = '+'
		w := a.label(a.value(float64(k) / (ticks - 1)))
		copy(words[min(max(0, at-len(w)/2), cols-len(w)):], w)
	}
	return string(marks), string(words)
}

func (a axis) label(x float64) string {
	if a.seconds {
		return trace.Took(x)
	}
	return fmt.Sprintf("%.0f", x)
}

func (a axis) title() string {
	s := "iterations"
	if a.seconds {
		s = "own time with set-up"
	}
	if a.bend > 0 {
		s += " (stretched near 0)"
	}
	return s
}
