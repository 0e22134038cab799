package tui

import tea "github.com/charmbracelet/bubbletea"

// question is asked before something is lost; it stands in the bottom line.
type question struct {
	text string
	yes  func(*model) tea.Cmd
}

// ask puts a question.
func (m *model) ask(text string, yes func(*model) tea.Cmd) tea.Cmd {
	m.question, m.stale = &question{text, yes}, true
	return nil
}

// questionKeys answer a question; every other key leaves it standing.
var questionKeys = []action{
	bind("yes", (*model).answerYes, "y"),
	bind("no", (*model).answerNo, "n", "esc", "q"),
}

// answerYes does what was asked about.
func (m *model) answerYes() tea.Cmd {
	q := m.question
	m.question = nil
	return q.yes(m)
}

// answerNo leaves everything as it is.
func (m *model) answerNo() tea.Cmd {
	m.question = nil
	return nil
}
