package report

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"
	"time"

	"dwindle/engine/trace"
)

// TestChartShape: one height for every document that has a curve, none for
// one that has not.
func TestChartShape(t *testing.T) {
	if got := Chart(Document{}); got != nil {
		t.Errorf("a chart of nothing: %q", got)
	}
	nan := []trace.Record{{Residual: math.NaN()}}
	if got := Chart(Document{Trials: []trace.History{{Records: nan}}}); got != nil {
		t.Errorf("a chart of NaN: %q", got)
	}
	height := len(Chart(typical()))
	r := rand.New(rand.NewPCG(3, 4))
	drawn := 0
	for range 400 {
		if got := Chart(wild(r)); got != nil {
			drawn++
			if len(got) != height {
				t.Fatalf("%d lines, not %d:\n%s", len(got), height, strings.Join(got, "\n"))
			}
		}
	}
	if drawn < 100 {
		t.Errorf("only %d charts", drawn)
	}
}

// TestChartContent: every trial that ran shows its digit and its mark, the
// tolerance its label, and rows of decades are even.
func TestChartContent(t *testing.T) {
	lines := Chart(typical())
	text := strings.Join(lines[1:1+chartRows], "\n")
	for _, want := range []string{"1+", "2+", "33333=", "1e-08 |", "1e+00 |"} {
		if !strings.Contains(text, want) {
			t.Errorf("no %q in\n%s", want, text)
		}
	}
	if strings.Contains(text, "4") && strings.Count(text, "4") > strings.Count(text, "1e-04") {
		t.Errorf("the refused trial has a curve:\n%s", text)
	}
}

// TestReduce: a straight line stays one, gaps are bridged, the last record is
// kept, and a spike of one record still moves its column.
func TestReduce(t *testing.T) {
	a := axis{end: 30}
	h := trace.History{Records: []trace.Record{{Iter: 0, Residual: 1}, {Iter: 30, Residual: 1e-6}}}
	c := reduce(h, a, 31)
	for k, y := range c.vals {
		if want := -6 * float64(k) / 30; math.Abs(y-want) > 1e-12 {
			t.Errorf("column %d: %g, want %g", k, y, want)
		}
	}
	h.Records = []trace.Record{{Residual: math.Inf(1)}, {Iter: 3, Residual: 0}, {Iter: 3, Residual: math.NaN()}}
	c = reduce(h, a, 31)
	if len(c.vals) != 4 || c.vals[0] != highestDecade || c.vals[3] != lowestDecade {
		t.Errorf("extremes: %v", c.vals)
	}
	h.Records = nil
	for i := range 300 {
		h.Records = append(h.Records, trace.Record{Iter: uint32(i), Residual: 1})
	}
	h.Records[150].Residual = 1e5
	c = reduce(h, axis{end: 299}, 30)
	high := 0.0
	for _, v := range c.vals {
		high = max(high, v)
	}
	if high < 0.4 {
		t.Errorf("a spike of five decades left %g", high)
	}
}

// TestAxis: a trial of 12 ms beside one of 20 s keeps room, by a stretched
// axis whose labels are its inverse.
func TestAxis(t *testing.T) {
	trial := func(d time.Duration) trace.History {
		return trace.History{Records: []trace.Record{{Clock: d, Residual: 1}}}
	}
	a := newAxis([]trace.History{trial(12 * time.Millisecond), trial(20 * time.Second)})
	if s := a.share(0.012); s < 0.1 || s > 0.5 {
		t.Errorf("the short trial ends at %g", s)
	}
	for _, s := range []float64{0, 0.25, 0.5, 1} {
		if got := a.share(a.value(s)); math.Abs(got-s) > 1e-12 {
			t.Errorf("share(value(%g)) = %g", s, got)
		}
	}
	if a = newAxis([]trace.History{trial(time.Second), trial(2 * time.Second)}); a.bend != 0 || a.share(1) != 0.5 {
		t.Errorf("close trials: %+v", a)
	}
	if a = newAxis([]trace.History{{Records: []trace.Record{{Iter: 7}}}}); a.seconds || a.end != 7 {
		t.Errorf("no clock: %+v", a)
	}
}

// TestFit: decades take whole or even parts of rows, growth is cut at two
// decades above the start, depth at two below the tolerance.
func TestFit(t *testing.T) {
	curves := []curve{{vals: []float64{0, 9, -30}}, {vals: []float64{-1, -3}}}
	s := fit(curves, 1e-8, 15)
	if s.top != 2 || s.rate != 1 {
		t.Errorf("%+v", s)
	}
	if got := goalRow(s, 1e-8); got != 10 {
		t.Errorf("tolerance in row %d", got)
	}
	if s = fit(curves[1:], 1e-3, 15); s.top != -1 || s.rate != 4 {
		t.Errorf("%+v", s)
	}
}
