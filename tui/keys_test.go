package tui

import (
	"errors"
	"math"
	"slices"
	"strconv"
	"strings"
	"testing"
	"time"

	"dwindle/engine/trace"
)

// No binding may use the letters that torn escape sequences hold, and the
// help of every screen lists every key of its bindings.
func TestBindings(t *testing.T) {
	m := screenOf(newFake(8, still(6)), 200, 60, "dot")
	for _, v := range []view{m.trials, m.system, m.finding, newChooser(nil), &addView{}, &triesView{}, &helpView{of: m.trials}} {
		for _, a := range v.keys(m) {
			if slices.Contains(a.Keys(), "[") || slices.Contains(a.Keys(), "O") {
				t.Errorf("%T binds %v", v, a.Keys())
			}
			if a.Help().Desc == "" {
				t.Errorf("%T does not explain %v", v, a.Keys())
			}
		}
	}
	press(m, "?")
	help := m.View()
	for _, a := range slices.Concat(m.trials.keys(m), common, everywhere) {
		if !strings.Contains(help, " "+allKeys(a)) {
			t.Errorf("help leaves out %v", a.Keys())
		}
	}
}

// The keys that command the session.
func TestCommands(t *testing.T) {
	for _, c := range []struct {
		keys []string
		want []string
	}{
		{[]string{"1", " ", " "}, []string{"hold 1", "resume 1"}},
		{[]string{"1", "s", "y"}, []string{"cancel 1"}},
		{[]string{"2", "d", "y"}, []string{"drop 2"}},
		{[]string{"3", "t", "t"}, []string{"today 3", "today 0"}},
		{[]string{"n", "j", "enter", "enter"}, []string{"add minres+ssor:1"}},
		{[]string{"n", "enter", "enter"}, []string{"add cg+ic:0"}},
		{[]string{"n", "enter", "G", "enter", "esc", "esc"}, nil}, // refused
		{[]string{"n", "enter", "p", "e", "2", "enter", "enter"}, []string{"add cg+ic:2"}},
		{[]string{"n", "enter", "p", "e", "x", "enter", "esc", "esc"}, nil}, // no number
		{[]string{"3", "p", "e", "1", "enter", "enter"}, []string{"add cg+ic:1"}},
		{[]string{"n", "/", "c", "g", "+", "i", "c", ":", "1", "enter"}, []string{"add cg+ic:1"}},
		{[]string{"n", "/", "s", "s", "o", "r", "enter", "enter"}, []string{"add minres+ssor:1"}},
		{[]string{"6", "enter", "2", "enter"}, []string{"add gmres:60+ilu:0"}},
		{[]string{"6", "enter", "enter"}, nil}, // trial 4 runs it already
		{[]string{"tab", "tab", "tab", "j", "enter", "enter"}, []string{"add gmres:60+ilu:0"}},
		{[]string{"2", " "}, nil}, // has ended
		{[]string{"4", "s", "n"}, nil},
	} {
		f := newFake(8, still(8))
		m := screenOf(f, 80, 24, "dot")
		for _, k := range c.keys { // the screen is seen between two keys
			press(m, k)
			sound(t, m, strings.Join(c.keys, " "))
		}
		if !slices.Equal(f.calls, c.want) {
			t.Errorf("%v did %v, want %v", c.keys, f.calls, c.want)
		}
	}
}

// What a command could not do is said, and stays until the next key.
func TestRefusedCommand(t *testing.T) {
	m := screenOf(newFake(8, still(8)), 80, 24, "dot")
	press(m, "n", "/")
	for _, r := range "nonsense+none" {
		press(m, string(r))
	}
	press(m, "enter")
	if !strings.Contains(m.View(), "no solver \"nonsense\"") {
		t.Errorf("the reason is not said:\n%s", m.View())
	}
	if m.top().entry() == nil || m.top().entry().text != "nonsense+none" {
		t.Error("what was typed is gone and cannot be mended")
	}
	press(m, "backspace")
	if strings.Contains(m.View(), "no solver") {
		t.Error("the reason stays")
	}
}

// A number of two digits is picked when they come quickly.
func TestTwoDigits(t *testing.T) {
	m := screenOf(newFake(12, still(8)), 120, 40, "dot")
	now := time.Unix(100, 0)
	m.now = func() time.Time { return now }
	press(m, "1")
	now = now.Add(200 * time.Millisecond)
	press(m, "2")
	if m.trials.picked != 12 {
		t.Errorf("1 and 2 at once pick %d", m.trials.picked)
	}
	press(m, "1")
	now = now.Add(time.Second)
	press(m, "2")
	if m.trials.picked != 2 {
		t.Errorf("1 and, later, 2 pick %d", m.trials.picked)
	}
	if chart := strings.Join(cutMargin(chartOf(m)), "\n"); !strings.Contains(strings.ReplaceAll(chart, "own residual by seconds", ""), "c") {
		t.Errorf("trial 12 has no tag:\n%s", chart)
	}
}

// A hidden curve leaves the chart; its name says so.
func TestHide(t *testing.T) {
	m := screenOf(newFake(8, still(12)), 80, 24, "dot")
	press(m, "6", "v")
	if strings.Contains(strings.Join(cutMargin(chartOf(m)), "\n"), "6") || !strings.Contains(m.View(), "(bicgstab+none)") {
		t.Errorf("not hidden:\n%s", m.View())
	}
	if m.trials.y.top > 1 {
		t.Errorf("the chart still reaches up to 1e%d", m.trials.y.top)
	}
	press(m, "v")
	if !strings.Contains(strings.Join(cutMargin(chartOf(m)), "\n"), "6") {
		t.Error("not shown again")
	}
}

// A false stop shows on the trial: in its row, in its note, on its curve.
func TestFalseStopShows(t *testing.T) {
	h := historyOf(trace.Running, 1, 1e-3, 1e-9, 1e-10)
	h.Events = []trace.Event{{Iter: 2, Kind: trace.FalseStop, Value: 2.6e-6, Scale: 9e-9}}
	h.Floor, h.BestTrue = 3e-7, 2.6e-6
	m := screenOf(sessionOf(h, historyOf(trace.Running, 1, 0.1)), 120, 40, "dot")
	v := m.View()
	for _, want := range []string{"~ running(!)", "met own test at i", "floor~3.0e-07"} {
		if !strings.Contains(v, want) {
			t.Errorf("no %q:\n%s", want, v)
		}
	}
	if !strings.Contains(strings.Join(cutMargin(chartOf(m)), "\n"), "!") {
		t.Errorf("the curve shows nothing:\n%s", v)
	}
}

// Before the line-up has started, enter starts it, and the screen says what
// is waited for.
func TestReady(t *testing.T) {
	f := newFake(3, still(0))
	f.ready = true
	m := screenOf(f, 80, 24, "dot")
	if v := m.View(); !strings.Contains(v, "needs about 90 s") || !strings.Contains(v, "enter starts") {
		t.Errorf("not said:\n%s", v)
	}
	if !quits(press(m, "q")) {
		t.Error("q asks although nothing runs")
	}
	press(m, "enter")
	if !slices.Equal(f.calls, []string{"start"}) {
		t.Errorf("enter did %v", f.calls)
	}
}

// A system that cannot be opened says why; from the chooser, enter goes back.
func TestChooserAndBroken(t *testing.T) {
	f := newFake(0, still(0))
	f.broken = errors.New("weir.mtx:17: row 0: indices start at 1")
	opened := ""
	m := newModel(Config{Glyphs: "dot", Samples: []SampleInfo{{"plate", "a plate", "shows"}, {"duct", "a duct", "shows"}},
		openNow: func(s string) session { opened = s; return f }}, nil)
	m.w, m.h = 80, 24
	press(m, "j", "enter")
	if opened != "sample:duct" || !strings.Contains(m.View(), "weir.mtx:17: row 0") {
		t.Errorf("opened %q:\n%s", opened, m.View())
	}
	press(m, "enter")
	if !strings.Contains(m.View(), "built-in systems") {
		t.Errorf("not back:\n%s", m.View())
	}
	press(m, "/", "x", "y", "enter")
	if opened != "xy" {
		t.Errorf("typed xy, opened %q", opened)
	}
}

// The reading cursor tells the picked trial's residual under it.
func TestReading(t *testing.T) {
	m := screenOf(newFake(8, still(12)), 80, 24, "dot")
	m.View()
	press(m, "2", "h", "h")
	if !strings.Contains(m.View(), "trial 2 at 9.72 seconds: no residual there") {
		t.Errorf("the cursor says:\n%s", m.View())
	}
	for range 30 {
		press(m, "left")
	}
	// Column 5 of 73 on an axis of 20 s is 1.389 s; the script falls 8.05
	// decades in 6200 iterations at 840 a second.
	_, text, _ := strings.Cut(m.View(), "trial 2 at 1.39 seconds: residual ")
	got, _ := strconv.ParseFloat(text, 64)
	if want := math.Pow(10, -8.05*(20*5/72.0-0.06)*840/6200); math.Abs(got/want-1) > 0.03 {
		t.Errorf("the cursor says %g, the script %g:\n%s", got, want, m.View())
	}
}

// The clock in the header stops with the last trial.
func TestHeaderClockStops(t *testing.T) {
	f := newFake(8, still(20))
	f.finish()
	f.done = false
	m := screenOf(f, 80, 24, "dot")
	before := m.View()
	f.now = still(500)
	m.Update(ticked{m.ticking})
	if m.View() != before {
		t.Errorf("the screen moved although nothing runs:\n%s", m.View())
	}
}

// A tick of an older id is dropped, so that a changed rate never doubles it.
func TestStaleTick(t *testing.T) {
	m := screenOf(newFake(8, still(6)), 80, 24, "dot")
	old := m.ticking
	press(m, "-")
	if m.rate != 2 || m.onTick(ticked{old}) != nil || m.onTick(ticked{m.ticking}) == nil {
		t.Errorf("rate %v: the old tick counts or the new one does not", m.rate)
	}
}

// While the terminal is busy the last frame stays; then the new one is drawn.
func TestBusyTerminal(t *testing.T) {
	m := screenOf(newFake(8, still(6)), 80, 24, "dot")
	before, asked, busy := m.View(), 0, true
	m.busy, m.wanted = func() bool { return busy }, func() { asked++ }
	press(m, "j")
	if m.View() != before || asked == 0 {
		t.Error("drawn although the terminal is busy, or nobody waits for it")
	}
	busy = false
	m.Update(drained{})
	if m.View() == before {
		t.Error("not drawn afterwards")
	}
}
