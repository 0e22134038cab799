package tui

import (
	"math"
	"strings"
	"testing"

	"dwindle/engine"
	"dwindle/engine/trace"
)

// marked is two straight curves of eight decades in eighty iterations, each
// with the energy rule met in its middle and the backward rule at a quarter.
func marked() fixed {
	var residuals []float64
	for k := range 81 {
		residuals = append(residuals, math.Pow(10, -float64(k)/10))
	}
	var list []trace.History
	for range 2 {
		h := historyOf(trace.Converged, residuals...)
		h.WouldStop = []trace.StopMark{{Rule: "energy", Iter: 40, True: 1e-4}, {Rule: "backward", Iter: 20, True: 1e-2}, {Rule: "initial", Iter: -1}}
		h.EnergyErrors = []trace.EnergyError{{Iter: 0, Lower: 1e-3, Upper: 10}, {Iter: 80, Lower: 1e-5, Upper: 1}}
		list = append(list, h)
	}
	return sessionOf(list...)
}

// places returns the rows and columns of a sign in the chart.
func places(m *model, sign string) (out [][2]int) {
	for y, line := range strings.Split(m.View(), "\n")[1:13] {
		if len(line) < 8 {
			continue
		}
		for x, r := range line[7:] {
			if string(r) == sign {
				out = append(out, [2]int{x, y})
			}
		}
	}
	return out
}

// The marks stand on the curve where the rule first held: on the picked one,
// on all, on none.
func TestMarksOfStoppingRules(t *testing.T) {
	m := screenOf(marked(), 80, 24, "ascii")
	m.trials.by = byIterations // 0 to 100
	for _, want := range []int{1, 2, 0} {
		e := places(m, "E")
		if len(e) != want {
			t.Fatalf("%d marks, want %d:\n%s", len(e), want, m.View())
		}
		for _, at := range e {
			if x := at[0] * 100 / 72; x < 36 || x > 46 { // iteration 40; the other curve's mark stands beside
				t.Errorf("mark at iteration %d, want 40:\n%s", x, m.View())
			}
		}
		press(m, "m")
	}
}

// Bounds of the error are drawn for the picked trial when they are asked for,
// the upper one above the lower one.
func TestEnergyBounds(t *testing.T) {
	s := marked()
	s.snap.Phase = engine.Ended
	m := screenOf(s, 80, 24, "ascii")
	m.trials.by = byIterations
	if n := len(places(m, "'")); n > 0 {
		t.Fatalf("%d points of a bound nobody asked for", n)
	}
	press(m, "e")
	upper, lower := places(m, "'"), places(m, ".")
	if len(upper) < 20 || len(lower) < 20 {
		t.Fatalf("%d and %d points of the bounds:\n%s", len(upper), len(lower), m.View())
	}
	rows := map[int]int{}
	for _, p := range lower {
		rows[p[0]] = p[1]
	}
	for _, p := range upper {
		if y, ok := rows[p[0]]; ok && y <= p[1] {
			t.Errorf("column %d: the upper bound lies below the lower one", p[0])
		}
	}
}
