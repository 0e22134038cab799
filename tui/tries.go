package tui

import (
	"fmt"

	tea "github.com/charmbracelet/bubbletea"

	"dwindle/engine/diagnose"
	"dwindle/engine/trace"
)

// triesView lies over a screen and offers what a finding would try. Nothing
// starts before enter.
type triesView struct {
	finding diagnose.Finding
	at      int
}

func (v *triesView) name() string   { return "tries" }
func (v *triesView) entry() *prompt { return nil }

// tryLeading offers the tries of the leading finding.
func (m *model) tryLeading() tea.Cmd {
	if f := m.leading(); f != nil {
		return m.openTries(*f)
	}
	m.say("there is no finding")
	return nil
}

// tryFor offers the tries of the first finding on a trial that has any; if
// there is none, those of the leading finding.
func (m *model) tryFor(id int) tea.Cmd {
	if t := m.trial(id); t != nil {
		for _, f := range m.snap.Findings {
			if f.Of(t.History.Pairing) && len(f.Try) > 0 {
				return m.openTries(f)
			}
		}
	}
	return m.tryLeading()
}

// openTries offers the tries of a finding.
func (m *model) openTries(f diagnose.Finding) tea.Cmd {
	if len(f.Try) == 0 {
		m.say("this finding offers nothing to start: " + f.Advice)
		return nil
	}
	m.over = &triesView{finding: f}
	return nil
}

// keys are the bindings of the list.
func (v *triesView) keys(m *model) []action {
	list := []action{
		bind("start it", v.enter, "enter"),
		bind("take back", (*model).closeOver, "esc", "q"),
		bindKey("pick", v.pickDigit, "1", "2", "3", "4", "5", "6", "7", "8", "9").named("1-9"),
	}
	return append(list, moves(v.move)...)
}

// closeOver takes away what lies over the screen.
func (m *model) closeOver() tea.Cmd {
	m.over = nil
	return nil
}

func (v *triesView) move(m *model, step int) {
	v.at = max(min(v.at+step, len(v.finding.Try)-1), 0)
}

func (v *triesView) pickDigit(m *model, pressed string) tea.Cmd {
	if k := int(pressed[0] - '1'); k < len(v.finding.Try) {
		v.at = k
	}
	return nil
}

// enter starts the picked try, or picks the trial that runs it already.
func (v *triesView) enter(m *model) tea.Cmd {
	m.over = nil
	pairing := v.finding.Try[v.at]
	if id := m.numberOf(pairing); id > 0 {
		m.trials.picked = id
		m.show(m.trials)
		m.say(fmt.Sprintf("trial %s runs it already", trace.Tag(id)))
		return nil
	}
	return m.add(pairing)
}

// draw draws the finding and its tries.
func (v *triesView) draw(m *model, w, h int) []string {
	list := []string{"", "try instead; nothing starts before enter"}
	for i, pairing := range v.finding.Try {
		mark := "  "
		if i == v.at {
			mark = "> "
		}
		note := ""
		if id := m.numberOf(pairing); id > 0 {
			note = fmt.Sprintf("  trial %s runs it already", trace.Tag(id))
		}
		list = append(list, clip(fmt.Sprintf("%s%d  %s%s", mark, i+1, m.signs.clean(pairing), note), w))
	}
	text := m.findingText(v.finding, w)
	text = text[:len(text)-1] // the list says it
	if room := max(h-len(list), 1); len(text) > room {
		text = text[:room]
	}
	return append(text, list...)
}
