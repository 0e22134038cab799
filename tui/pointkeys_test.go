package tui

import (
	"slices"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"
)

// Point 9: several keys of one read, pasted text, the escape key.
func TestPoint09Keys(t *testing.T) {
	m := screenOf(newFake(8, still(12.3)), 80, 24, "dot")
	press(m, "jjj")
	if m.trials.picked != 4 {
		t.Errorf("jjj picks %d, want 4", m.trials.picked)
	}
	m.Update(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune("qyd"), Paste: true})
	if m.question != nil {
		t.Error("pasted text asked a question")
	}
	press(m, "n", "/")
	m.Update(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune("cg+x"), Paste: true})
	if p := m.top().entry(); p == nil || p.text != "cg+x" {
		t.Error("pasted text did not reach the line being typed")
	}
	if quits(press(m, "esc", "esc", "esc", "esc")) || m.over != nil {
		t.Error("esc quit, or did not close")
	}
}

// Point 9: torn escape sequences, in every way a read can tear them.
func TestPoint09Torn(t *testing.T) {
	runes := func(s string) tea.KeyMsg { return tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(s)} }
	esc := tea.KeyMsg{Type: tea.KeyEsc}
	for name, msgs := range map[string][]tea.KeyMsg{
		"esc, [B":    {esc, runes("[B")},
		"esc, [, B":  {esc, runes("["), runes("B")},
		"esc [, B":   {{Type: tea.KeyRunes, Runes: []rune("["), Alt: true}, runes("B")},
		"esc, OB":    {esc, runes("OB")},
		"esc, [1;5B": {esc, runes("[1;5B")},
		"esc, [Bx":   {esc, runes("[Bx")},
	} {
		m := screenOf(newFake(8, still(12.3)), 80, 24, "dot")
		press(m, "?")
		m.View()
		for _, k := range msgs {
			m.Update(k)
		}
		if _, open := m.over.(*helpView); !open {
			t.Errorf("%s closed the help", name)
		}
		if name != "esc, [1;5B" && m.over.(*helpView).first != 1 {
			t.Errorf("%s did not move down", name)
		}
		m.Update(escaped{m.esc.id})
		if m.over == nil {
			t.Errorf("%s closed the help later", name)
		}
	}
}

// Point 17: a stop, a drop or an end without a question; a try before enter.
func TestPoint17Asks(t *testing.T) {
	f := newFake(8, still(6))
	m := screenOf(f, 80, 24, "dot")
	press(m, "4", "s")
	if m.question == nil || len(f.calls) > 0 || !strings.Contains(m.View(), "stop trial 4") {
		t.Fatal("s did not ask")
	}
	press(m, "j", "enter", " ")
	if len(f.calls) > 0 {
		t.Fatal("another key answered the question")
	}
	press(m, "n")
	press(m, "d", "esc")
	if quits(press(m, "q")) || len(f.calls) > 0 {
		t.Fatalf("not asked: %v", f.calls)
	}
	press(m, "n", "a", "down")
	if len(f.calls) > 0 {
		t.Fatal("a try started before enter")
	}
	press(m, "enter")
	if want := []string{"add gmres:60+ilu:0"}; !slices.Equal(f.calls, want) {
		t.Fatalf("enter did %v, want %v", f.calls, want)
	}
	if m.trials.picked != 9 {
		t.Error("the new trial is not picked")
	}
	press(m, "4", "s", "y", "5", "d", "y")
	if want := []string{"add gmres:60+ilu:0", "cancel 4", "drop 5"}; !slices.Equal(f.calls, want) {
		t.Fatalf("yes did %v, want %v", f.calls, want)
	}
	if !quits(press(m, "q", "y")) {
		t.Error("q and y do not quit")
	}
}
