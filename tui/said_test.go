package tui

import (
	"strings"
	"testing"
	"time"

	"dwindle/engine"
	"dwindle/engine/choose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// A message gives the key line back when there was time to read it, and not
// before.
func TestMessagesPass(t *testing.T) {
	m := screenOf(newFake(8, still(8)), 80, 24, "ascii")
	now := time.Unix(100, 0)
	m.now = func() time.Time { return now }
	press(m, "u")
	for _, c := range []struct {
		after time.Duration
		there bool
	}{{3 * time.Second, true}, {30 * time.Second, false}} {
		now = time.Unix(100, 0).Add(c.after)
		m.Update(ticked{m.ticking})
		if got := strings.Contains(m.View(), "glyphs: "); got != c.there {
			t.Errorf("after %v the message is there: %v", c.after, got)
		}
	}
	if !strings.Contains(m.View(), "trials | ? help") {
		t.Errorf("no key line:\n%s", m.View())
	}
}

// Help cuts none of its own texts, whatever the size; what is below is
// scrolled to.
func TestHelpIsWhole(t *testing.T) {
	for _, size := range [][2]int{{80, 24}, {120, 40}, {200, 60}, {48, 12}} {
		m := screenOf(newFake(8, still(8)), size[0], size[1], "ascii")
		press(m, "?")
		seen := ""
		for range 120 {
			frame := m.View()
			for _, line := range strings.Split(frame, "\n")[1 : size[1]-1] { // header and key line aside
				if strings.Contains(line, "~") && !strings.HasPrefix(strings.TrimSpace(line), "~ running") && !strings.Contains(line, "floor~") {
					t.Fatalf("%v: cut: %q", size, line)
				}
			}
			seen += strings.Join(strings.Fields(frame), " ") + " "
			press(m, "j")
		}
		for _, want := range []string{"hold, or resume the picked trial", "quit, asks while trials run", "can no longer be as quick"} {
			if !strings.Contains(seen, want) {
				t.Errorf("%v: %q is not to be seen", size, want)
			}
		}
	}
}

// A system that could not be opened offers only keys that do something.
func TestBrokenOffersWhatWorks(t *testing.T) {
	s := sessionOf()
	s.snap.Phase, s.snap.Trials = engine.Broken, nil
	m := screenOf(s, 80, 24, "ascii")
	lines := strings.Split(m.View(), "\n")
	keys := lines[len(lines)-1]
	if !strings.Contains(keys, "q quit") || strings.Contains(keys, "n new") || strings.Contains(keys, "find") || strings.Contains(keys, "enter") {
		t.Errorf("keys: %q", keys)
	}
	press(m, "n", "W", "a")
	if m.over != nil || m.message != "" {
		t.Errorf("a key that is not offered does something: %q", m.message)
	}
}

// Over an axis of counts the reading cursor tells a count.
func TestReadingCursorCounts(t *testing.T) {
	m := screenOf(newFake(8, still(8)), 80, 24, "ascii")
	press(m, "x")
	if m.trials.by == bySeconds {
		t.Fatal("the axis is still seconds")
	}
	for range 9 {
		press(m, "l")
		if _, at, _ := strings.Cut(m.message, " at "); strings.Contains(strings.Split(at, " ")[0], ".") && !strings.Contains(at, "e+") {
			t.Errorf("no count: %s", m.message)
		}
	}
}

// Every tick of the axis has its number.
func TestTicksHaveNumbers(t *testing.T) {
	for _, w := range []int{60, 80, 100, 120, 200} {
		m := screenOf(newFake(8, still(8)), w, 24, "ascii")
		lines, found := strings.Split(m.View(), "\n"), false
		for k, line := range lines {
			if strings.HasPrefix(strings.TrimSpace(line), "++") {
				found = true
				ticks, numbers := strings.Count(line, "+")-1, len(strings.Fields(lines[k+1]))
				if ticks != numbers || ticks < 3 {
					t.Errorf("width %d: %d ticks, %d numbers:\n%s\n%s", w, ticks, numbers, line, lines[k+1])
				}
			}
		}
		if !found {
			t.Errorf("width %d: no axis", w)
		}
	}
}

// A direct solve, whose residual is at rounding at once, takes no more than a
// decade below the target from the others.
func TestDirectDoesNotSqueeze(t *testing.T) {
	direct := historyOf(trace.Converged, 1, 1e-16)
	direct.Direct = true
	m := screenOf(sessionOf(historyOf(trace.Converged, 1, 0.1, 1e-9), direct), 80, 24, "ascii")
	if m.trials.y.low < -10 {
		t.Errorf("drawn down to 1e%d", m.trials.y.low)
	}
	m = screenOf(sessionOf(historyOf(trace.Converged, 1, 0.1, 1e-12), direct), 80, 24, "ascii")
	if m.trials.y.low != -13 {
		t.Errorf("an iteration that gets to 1e-12 is drawn down to 1e%d", m.trials.y.low)
	}
}

// The list of new pairings begins with what suits the system.
func TestListBeginsWithWhatSuits(t *testing.T) {
	f := &inspect.Facts{}
	f.Symmetric.Answer, f.PositiveDefinite.Answer = inspect.Yes, inspect.No
	all := []choose.Candidate{
		{Pairing: "sd+none", Baseline: true},
		{Pairing: "cg+none", Symmetric: true, Definite: true},
		{Pairing: "cg+lu", Symmetric: true, Refused: "no room"},
		{Pairing: "minres+none", Symmetric: true},
		{Pairing: "minres+ic:0", Symmetric: true, DefiniteA: true},
		{Pairing: "gmres:30+none"},
	}
	var got []string
	for _, c := range bestFirst(all, f) {
		got = append(got, c.Pairing)
	}
	if want := "minres+none gmres:30+none sd+none cg+none minres+ic:0 cg+lu"; strings.Join(got, " ") != want {
		t.Errorf("%v, want %s", got, want)
	}
	f.PositiveDefinite.Answer = inspect.Unknown
	if fitnessOf(all[1], f) != mayDo {
		t.Error("what is not known is taken for settled")
	}
}
