package tui

import (
	"slices"

	tea "github.com/charmbracelet/bubbletea"

	"dwindle/engine"
)

// formView lies over a screen and edits the parameters of a pairing, one row
// each; what it makes is always a canonical pairing.
type formView struct {
	pairing   string
	knobs     []engine.Knob
	at, first int
	line      *prompt // the value being typed
	from      view    // what esc goes back to
}

func (v *formView) name() string   { return "parameters" }
func (v *formView) entry() *prompt { return v.line }

// openForm opens the form of a pairing.
func (m *model) openForm(pairing string, from view) tea.Cmd {
	knobs, err := engine.Knobs(pairing)
	switch {
	case err != nil:
		m.say(err.Error())
	case len(knobs) == 0:
		m.say(pairing + " has no parameters")
	default:
		m.over = &formView{pairing: pairing, knobs: knobs, from: from}
	}
	return nil
}

// editTrial opens the form of the picked trial's pairing: what comes of it is a
// new trial.
func (m *model) editTrial() tea.Cmd {
	t := m.trial(m.trials.picked)
	switch {
	case t == nil:
		m.say("there is no trial")
		return nil
	case m.snap.ReadOnly != "":
		m.say("read-only: " + m.snap.ReadOnly)
		return nil
	}
	return m.openForm(t.History.Pairing, nil)
}

// keys are the bindings of the form, or of the line being typed.
func (v *formView) keys(m *model) []action {
	if v.line != nil {
		return []action{
			bind("keep; empty is the default", v.keep, "enter"),
			bind("take back", func(m *model) tea.Cmd { v.line = nil; return nil }, "esc"),
		}
	}
	list := []action{
		bind("start it", v.start, "enter"),
		bind("edit", v.edit, "e", "/"),
		bind("next word", v.turnBy(1), "right", "l"),
		bind("word before", v.turnBy(-1), "left", "h"),
		bind("default", func(m *model) tea.Cmd { v.set(m, ""); return nil }, "backspace"),
		bind("back", v.back, "esc", "q"),
	}
	return append(list, moves(v.move)...)
}

func (v *formView) move(m *model, step int) { v.at = max(min(v.at+step, len(v.knobs)-1), 0) }

func (v *formView) back(m *model) tea.Cmd {
	m.over = v.from
	return nil
}

// edit opens the line for the value of the picked row.
func (v *formView) edit(m *model) tea.Cmd {
	v.line = &prompt{label: v.knobs[v.at].Name}
	return nil
}

// keep takes the typed value, if it is one.
func (v *formView) keep(m *model) tea.Cmd {
	if v.set(m, v.line.text) {
		v.line = nil
	}
	return nil
}

// turnBy steps through the words that are admitted.
func (v *formView) turnBy(step int) func(*model) tea.Cmd {
	return func(m *model) tea.Cmd {
		k := v.knobs[v.at]
		if n := len(k.Choices); n > 0 {
			v.set(m, k.Choices[(slices.Index(k.Choices, k.Value)+step+n)%n])
		} else {
			m.say("e edits the value: " + k.Range)
		}
		return nil
	}
}

// set gives the picked parameter a value; a wrong one is told and changes
// nothing.
func (v *formView) set(m *model, value string) bool {
	pairing, err := engine.Turn(v.pairing, v.at, value)
	if err == nil {
		v.pairing = pairing
		v.knobs, err = engine.Knobs(pairing)
	}
	if err != nil {
		m.say(err.Error())
	}
	return err == nil
}

// start adds what the form shows.
func (v *formView) start(m *model) tea.Cmd {
	m.over = nil
	if id := m.numberOf(v.pairing); id > 0 {
		m.trials.picked = id
		m.show(m.trials)
		m.say("it is a trial already")
		return nil
	}
	return m.add(v.pairing)
}

// draw draws a row a parameter, the picked one's meaning below, and what comes
// of it.
func (v *formView) draw(m *model, w, h int) []string {
	title := m.on.paint(faint, clip("   "+left("parameter", 24)+left("value", 12)+left("default", 12)+"range", w))
	if v.line != nil {
		title = v.line.line(m.signs, w)
	}
	foot := append([]string{""}, hanging(m.signs.clean(v.knobs[v.at].Meaning), w)...)
	foot = append(foot, "", m.on.paint(strong, clip("makes "+m.signs.clean(v.pairing), w)))
	rows := max(h-1-len(foot), 1)
	v.first = scroll(v.first, v.at, len(v.knobs), rows)
	lines := []string{title}
	for i := v.first; i < min(v.first+rows, len(v.knobs)); i++ {
		k := v.knobs[i]
		mark := "   "
		if i == v.at {
			mark = ">  "
		}
		text := mark + left(m.signs.clean(k.Method)+" "+k.Name, 24) + left(m.signs.clean(k.Value), 12) + left(k.Default, 12) + k.Range
		lines = append(lines, clip(text, w))
	}
	return append(lines, foot...)
}
