package tui

import (
	"math"
	"slices"
	"strings"
	"testing"

	"dwindle/engine/trace"
)

// race is a race of 20 trials: most outpaced, trial 7 and 16 converged, trial
// 12 is today's, the leader is 16.
func race() fixed {
	var list []trace.History
	for i := range 20 {
		h := historyOf(trace.Outpaced, 1, 0.5, math.Pow(10, -float64(i%5)))
		h.Pairing, h.TrueResidual = "gmres:"+string(rune('a'+i))+"+none", 0.1
		switch i + 1 {
		case 7, 16:
			h.Stop, h.OwnTime, h.TrueResidual = trace.Converged, span1(float64(20-i)), 1e-9
		case 12:
			h.Stop, h.Today = trace.Running, true
		case 3, 18:
			h.Stop = trace.Running
		}
		list = append(list, h)
	}
	s := sessionOf(list...)
	s.snap.Choice.Pairing = list[15].Pairing
	return s
}

// The leader, today's pairing and every converged trial stay in sight whatever
// is picked, and so does the picked one.
func TestRaceOfTwentyStaysReadable(t *testing.T) {
	for _, size := range [][2]int{{80, 24}, {40, 12}, {120, 40}} {
		m := screenOf(race(), size[0], size[1], "ascii")
		for range 21 {
			sound(t, m, "race")
			frame := m.View()
			for _, name := range []string{"gmres:g+none", "gmres:l+none", "gmres:p+none"} {
				if !strings.Contains(frame, name) {
					t.Errorf("%v: %s is out of sight with trial %d picked:\n%s", size, name, m.trials.picked, frame)
				}
			}
			if lines := strings.Split(frame, "\n"); !slices.ContainsFunc(lines, func(l string) bool { return strings.HasPrefix(l, ">") }) {
				t.Errorf("%v: trial %d is picked and out of sight:\n%s", size, m.trials.picked, frame)
			}
			press(m, "j")
		}
	}
}

// Before anything converged, the trials that matter little give way to live
// ones.
func TestOutpacedGiveWay(t *testing.T) {
	s := race()
	s.snap.Choice.Pairing = ""
	m := screenOf(s, 80, 24, "ascii")
	for _, name := range []string{" 3 gmres:c+none", " c gmres:l+none", " i gmres:r+none"} {
		press(m, "3")
		if frame := m.View(); !strings.Contains(frame, name) {
			t.Errorf("%q is out of sight:\n%s", name, frame)
		}
	}
}
