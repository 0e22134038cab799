package tui

import (
	"fmt"
	"strings"
	"time"

	"dwindle/engine"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// header is the first line: the system on the left, its progress on the
// right. The name gives way when room is short.
func (m *model) header() string {
	if m.s == nil {
		return m.on.paint(strong, "dwindle") + "  why is a linear solve slow, and what to use instead"
	}
	right := m.progress()
	facts := m.systemWords()
	name := m.signs.clean(m.snap.System.Name)
	room := m.w - len("dwindle ") - width(right) - 2
	for len(facts) > 0 && room-width(strings.Join(facts, "  ")) < min(width(name), 16)+2 {
		facts = facts[:len(facts)-1]
	}
	text := strings.Join(append([]string{""}, facts...), "  ")
	name = clip(name, room-width(text))
	return m.on.paint(strong, "dwindle") + ends(" "+name+text, right, m.w-len("dwindle"))
}

// systemWords is what the header says of the system, most important first.
func (m *model) systemWords() []string {
	sys := m.snap.System
	if sys.Unknowns == 0 {
		return nil
	}
	words := []string{fmt.Sprintf("n %d", sys.Unknowns), "nnz " + compact(sys.Entries)}
	if f := m.snap.Facts; f != nil {
		switch f.Symmetric.Answer {
		case inspect.Yes:
			words = append(words, "sym")
		case inspect.No:
			words = append(words, "unsym")
		}
	}
	if t := m.snap.Settings.Tol; t > 0 {
		words = append(words, "tol "+power(t))
	}
	if sys.RHS != "" {
		words = append(words, "b "+m.signs.clean(sys.RHS))
	}
	return words
}

// progress is what goes on: a share of the work or the trials.
func (m *model) progress() string {
	share := ""
	if p := m.snap.Progress; p >= 0 && p <= 1 {
		share = fmt.Sprintf(" %3.0f %%", 100*p)
	}
	switch m.snap.Phase {
	case engine.Loading:
		return "reading" + share
	case engine.Inspecting:
		return "inspecting" + share
	case engine.Ready:
		return "ready: enter starts"
	case engine.Broken:
		return "not read"
	}
	going, held, done := 0, 0, 0
	for _, t := range m.snap.Trials {
		switch stop := t.History.Stop; {
		case stop.Ended():
			done++
		case stop == trace.Held:
			held++
		default:
			going++
		}
	}
	text := fmt.Sprintf("%d going %d done", going, done)
	if m.snap.Recorded && going+held == 0 {
		text = fmt.Sprintf("recorded %d done", done)
	}
	if held > 0 {
		text = fmt.Sprintf("%d held %s", held, text)
	}
	return fmt.Sprintf("%s %5s s", text, elapsed(m.elapsed))
}

// elapsed writes the time since the start: tenths at first, then seconds.
func elapsed(d time.Duration) string {
	if d < 100*time.Second {
		return fmt.Sprintf("%.1f", d.Truncate(100*time.Millisecond).Seconds())
	}
	return fmt.Sprintf("%d", int(d.Seconds()))
}
