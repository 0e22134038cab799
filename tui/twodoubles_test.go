package tui

import (
	"strings"
	"testing"

	"dwindle/engine/choose"
	"dwindle/engine/trace"
)

// Whoever sees that a trial converged sees that its x is in two doubles: in the
// list, in its details, and where it is recommended; the answer in one double
// tells how far it is off.
func TestTwoDoublesOnTheScreens(t *testing.T) {
	one, two := historyOf(trace.FalselyConverged, 1, 1e-4, 1e-9), historyOf(trace.Converged, 1, 1e-4, 1e-9)
	one.Pairing, one.Near = "richardson:1+lu", &trace.Nearness{Of: "richardson:1,2+lu", Error: 2.9e-10, Worst: 1.9e-8}
	two.Pairing, two.TwoDoubles, two.Direct = "richardson:1,2+lu", true, true
	two.Reason = "x is kept in two doubles, and rounded to one it leaves 0.0114"
	s := sessionOf(one, two)
	s.snap.Choice = choose.Choice{Pairing: two.Pairing}
	m := screenOf(s, 160, 40, "ascii")
	if got := stateText(&two); got != "+ converged 2-double" || len(got) > stateCells-2 {
		t.Errorf("the state is %q", got)
	}
	if got := stateText(&one); strings.Contains(got, "2-double") {
		t.Errorf("the state in one double is %q", got)
	}
	for what, lines := range map[string][]string{"choice": m.choiceText(100), "details": m.infoLines(2, &two, 100), "lead": m.leadChoice()} {
		if text := strings.Join(lines, "\n"); !strings.Contains(text, "in two doubles") {
			t.Errorf("%s:\n%s", what, text)
		}
	}
	if text := strings.Join(strings.Fields(strings.Join(m.infoLines(1, &one, 100), " ")), " "); !strings.Contains(text, "error of x 2.9e-10, in its worst entry 1.9e-08, against x in two doubles by richardson:1,2+lu") {
		t.Errorf("details in one double: %s", text)
	}
}
