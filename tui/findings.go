package tui

import (
	"fmt"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// findingsView is the screen of the findings and of the choice: a list, and
// the picked one in full.
type findingsView struct {
	at, first int // of the list; the choice comes after the findings
	below     int // first visible line of the text
	lines     int // of the text when last drawn
}

func (v *findingsView) name() string   { return "findings" }
func (v *findingsView) entry() *prompt { return nil }

// keys are the bindings of the screen.
func (v *findingsView) keys(m *model) []action {
	list := []action{
		bind("tries; what the finding offers", v.enter, "enter"),
		bind("read on; the text below", v.readBy(4), "pgdown", "right", "l", " "),
		bind("read back; the text below", v.readBy(-4), "pgup", "left", "h"),
		bindKey("pick; a finding", v.pickDigit, "1", "2", "3", "4", "5", "6", "7", "8", "9").named("1-9"),
	}
	return append(list, steps(v.move)...)
}

// enter shows what the picked finding offers to try.
func (v *findingsView) enter(m *model) tea.Cmd {
	if f := v.picked(m); f != nil {
		return m.openTries(*f)
	}
	return nil
}

func (v *findingsView) readBy(step int) func(*model) tea.Cmd {
	return func(m *model) tea.Cmd {
		v.below = max(min(v.below+step, v.lines-1), 0)
		return nil
	}
}

func (v *findingsView) pickDigit(m *model, pressed string) tea.Cmd {
	if k := int(pressed[0] - '1'); k < v.items(m) {
		v.at, v.below = k, 0
	}
	return nil
}

// move picks another finding.
func (v *findingsView) move(m *model, step int) {
	v.at, v.below = max(min(v.at+step, v.items(m)-1), 0), 0
}

// items is the number of lines of the list: the findings and the choice.
func (v *findingsView) items(m *model) int { return len(m.findings()) + 1 }

// picked is the picked finding, nil for the choice.
func (v *findingsView) picked(m *model) *diagnose.Finding {
	if list := m.findings(); v.at < len(list) {
		return &list[v.at]
	}
	return nil
}

// draw draws the list and, below it, the picked finding in full.
func (v *findingsView) draw(m *model, w, h int) []string {
	n := v.items(m)
	v.at = min(v.at, n-1)
	rows := min(n, max(h/3, 1))
	v.first = scroll(v.first, v.at, n, rows)
	lines := []string{m.on.paint(faint, ends("findings and choice", v.where(n, rows), w))}
	for i := v.first; i < v.first+rows; i++ {
		lines = append(lines, v.row(m, i, w))
	}
	text := v.text(m, w)
	v.lines = len(text)
	room := h - len(lines) - 1
	v.below = max(min(v.below, len(text)-room), 0)
	lines = append(lines, "")
	lines = append(lines, some(text, v.below, room)...)
	if v.below+room < len(text) && room > 0 {
		lines[len(lines)-1] = m.on.paint(faint, fmt.Sprintf("  %d more lines: pgdown", len(text)-v.below-room+1))
	}
	return lines
}

// where says which part of the list is seen.
func (v *findingsView) where(n, rows int) string {
	if n <= rows {
		return ""
	}
	return fmt.Sprintf("%d-%d of %d", v.first+1, v.first+rows, n)
}

// row is one line of the list.
func (v *findingsView) row(m *model, i, w int) string {
	mark := "  "
	if i == v.at {
		mark = "> "
	}
	list := m.findings()
	if i == len(list) {
		name := "none yet"
		if m.snap.Choice.Pairing != "" {
			name = m.choiceName()
		}
		return clip(mark+"+ choice: "+name, w)
	}
	f := list[i]
	front := mark + m.findingMark(f) + " " + left(m.subject(f), min(w/4, 30))
	return m.on.paint(inkOfWeight(f.Weight), clip(front+" "+m.claim(f), w))
}

// text is the picked finding, or the choice, in full.
func (v *findingsView) text(m *model, w int) []string {
	if f := v.picked(m); f != nil {
		return m.findingText(*f, w)
	}
	return m.choiceText(w)
}

// findingText is a finding in full: claim, how sure and how weighty, what it
// rests on, advice, tries.
func (m *model) findingText(f diagnose.Finding, w int) []string {
	lines := paragraph(m.signs.clean(f.Claim), 0, w)
	for i := range lines {
		lines[i] = m.on.paint(strong, lines[i])
	}
	lines = append(lines, clip(fmt.Sprintf("%s, %s; about %s", f.Weight, f.Certainty, m.subject(f)), w))
	if len(f.Also) > 0 {
		lines = append(lines, paragraph("also of "+m.signs.clean(strings.Join(f.Also, ", ")), 2, w)...)
	}
	if len(f.Evidence) > 0 {
		lines = append(lines, "", "rests on")
		for _, e := range f.Evidence {
			lines = append(lines, paragraph(m.signs.clean(evidence(e, m.snap.Facts)), 2, w)...)
		}
	}
	if f.Advice != "" {
		lines = append(lines, "", "advice")
		lines = append(lines, paragraph(m.signs.clean(f.Advice), 2, w)...)
	}
	if len(f.Try) > 0 {
		lines = append(lines, clip("  enter: try "+m.signs.clean(strings.Join(f.Try, " or ")), w))
	}
	return lines
}

// evidence is one number behind a finding, rows by the names that facts know.
func evidence(e diagnose.Evidence, facts *inspect.Facts) string {
	s := e.Quantity + "  "
	if e.Unit == "s" {
		s += trace.Took(e.Value)
	} else {
		s += strings.TrimSpace(value(e.Value) + " " + e.Unit)
	}
	if e.Iteration >= 0 {
		s += fmt.Sprintf("  at it %d", e.Iteration)
	}
	return withRows(s, e.Rows, facts)
}
