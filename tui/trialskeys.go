package tui

import tea "github.com/charmbracelet/bubbletea"

// nextMeasure walks through what runs along the axis.
func (v *trialsView) nextMeasure(m *model) tea.Cmd {
	v.by, v.reading = v.by.next(), -1
	return nil
}

func (v *trialsView) turnLog(m *model) tea.Cmd {
	v.log, v.reading = !v.log, -1
	return nil
}

func (v *trialsView) turnTruth(m *model) tea.Cmd {
	v.truth = !v.truth
	v.y = decades{}
	v.widen(m.snap)
	return nil
}

// turnMarks walks through whose curves carry the marks of common stopping
// rules.
func (v *trialsView) turnMarks(m *model) tea.Cmd {
	v.marks = (v.marks + 1) % marking(len(markingWords))
	m.say(markingWords[v.marks])
	return nil
}

// turnBounds draws the bounds of the error in the energy norm, or leaves them
// out.
func (v *trialsView) turnBounds(m *model) tea.Cmd {
	v.bounds = !v.bounds
	switch t := m.trial(v.picked); {
	case !v.bounds:
		m.say("error bounds are left out")
	case t == nil || len(t.History.EnergyErrors) == 0:
		m.say("the picked trial gives no bounds of the energy norm of its error")
	default:
		m.say(energyWords(&t.History))
	}
	return nil
}

// hide hides the picked curve, or shows it again.
func (v *trialsView) hide(m *model) tea.Cmd {
	v.hidden[v.picked] = !v.hidden[v.picked]
	v.y = decades{}
	v.widen(m.snap)
	return nil
}
