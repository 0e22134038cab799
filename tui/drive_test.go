package tui

import (
	"math"
	"strings"
	"testing"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"dwindle/engine"
	"dwindle/engine/trace"
)

// screenOf returns a model of w x h cells on a session, having looked once.
func screenOf(s session, w, h int, glyphs string) *model {
	m := newModel(Config{Glyphs: glyphs}, s)
	m.now = func() time.Time { return time.Unix(0, 0) }
	m.Update(tea.WindowSizeMsg{Width: w, Height: h})
	m.look()
	return m
}

// special are the keys that are not runes.
var special = map[string]tea.KeyType{"enter": tea.KeyEnter, "esc": tea.KeyEsc, "tab": tea.KeyTab, "shift+tab": tea.KeyShiftTab,
	"up": tea.KeyUp, "down": tea.KeyDown, "left": tea.KeyLeft, "right": tea.KeyRight, "ctrl+c": tea.KeyCtrlC,
	"ctrl+z": tea.KeyCtrlZ, "pgdown": tea.KeyPgDown, "backspace": tea.KeyBackspace, " ": tea.KeySpace}

// press presses keys one after the other and lets what they start finish. It
// returns the messages that came of it.
func press(m *model, keys ...string) (out []tea.Msg) {
	for _, k := range keys {
		msg := tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(k)}
		if t, ok := special[k]; ok {
			msg = tea.KeyMsg{Type: t}
			if k == " " {
				msg.Runes = []rune{' '}
			}
		}
		_, cmd := m.Update(msg)
		if k == "esc" { // its timer is over at once
			_, cmd = m.Update(escaped{m.esc.id})
		}
		out = append(out, settle(m, cmd)...)
	}
	return out
}

// settle runs a command and what follows from it; timers are left running.
func settle(m *model, cmd tea.Cmd) []tea.Msg {
	if cmd == nil {
		return nil
	}
	got := make(chan tea.Msg, 1)
	go func() { got <- cmd() }()
	var msg tea.Msg
	select {
	case msg = <-got:
	case <-time.After(300 * time.Millisecond):
		return nil
	}
	if all, ok := msg.(tea.BatchMsg); ok {
		var out []tea.Msg
		for _, c := range all {
			out = append(out, settle(m, c)...)
		}
		return out
	}
	if msg == nil {
		return nil
	}
	_, next := m.Update(msg)
	return append([]tea.Msg{msg}, settle(m, next)...)
}

// quits says whether a message ends the program.
func quits(msgs []tea.Msg) bool {
	for _, m := range msgs {
		if _, ok := m.(tea.QuitMsg); ok {
			return true
		}
	}
	return false
}

// sound fails unless the frame obeys the screen: no line too wide, none too
// many, the header first, and the signs that are allowed.
func sound(t *testing.T, m *model, what string) {
	t.Helper()
	frame := m.View()
	lines := strings.Split(frame, "\n")
	if len(lines) > m.h {
		t.Fatalf("%s: %d lines on %d rows", what, len(lines), m.h)
	}
	for i, line := range lines {
		if width(line) > m.w {
			t.Fatalf("%s: line %d has %d cells of %d: %q", what, i, width(line), m.w, line)
		}
		if m.signs == asciiGlyphs {
			for _, r := range line {
				if r > 126 || r < 32 && r != 27 {
					t.Fatalf("%s: line %d holds %q in ASCII glyphs: %q", what, i, r, line)
				}
			}
		}
	}
	if !bool(m.on) && strings.Contains(frame, "\x1b") {
		t.Fatalf("%s: an escape without colours: %q", what, frame)
	}
	if m.w >= minWidth && m.h >= minHeight && !strings.Contains(lines[0], "dwindle") {
		t.Fatalf("%s: the header is gone: %q", what, lines[0])
	}
}

// fixed is a session that stands still.
type fixed struct {
	session
	snap engine.Snapshot
}

func (f fixed) Snapshot() engine.Snapshot { return f.snap }

// sessionOf returns a session with these histories as trials 1, 2, ...
func sessionOf(histories ...trace.History) fixed {
	f := newFake(0, still(0))
	s := f.Snapshot()
	for i, h := range histories {
		s.Trials = append(s.Trials, engine.Trial{ID: i + 1, History: h})
	}
	s.Version = 7
	return fixed{f, s}
}

// historyOf makes a history whose own residuals are these, a second and a
// product an iteration; every third one is audited.
func historyOf(stop trace.Stop, residuals ...float64) trace.History {
	h := scripts[1].at(0)
	h.Stop, h.Pairing = stop, "cg+jacobi"
	for i, v := range residuals {
		r := trace.Record{Iter: uint32(i), MatVecs: uint32(i), Clock: span1(float64(i)), Residual: v, Audit: math.NaN()}
		if i%3 == 0 {
			r.Audit = v
		}
		h.Records = append(h.Records, r)
	}
	return h
}
