package tui

import (
	"fmt"
	"strings"

	"dwindle/engine"
	"dwindle/engine/diagnose"
	"dwindle/engine/trace"
)

// bottom is the last lines: on a session's screens the leading finding and
// the key that tries its advice, and always the keys, a message or a
// question.
func (m *model) bottom() []string {
	last := m.lastLine()
	if m.s == nil || m.over != nil || m.h < 8 {
		return []string{last}
	}
	lead := m.lead()
	if m.h < chartHeight {
		lead = lead[:1]
	}
	return append(lead, last)
}

// lastLine is the question, the message, or the name of the screen with its
// keys.
func (m *model) lastLine() string {
	switch {
	case m.question != nil:
		return m.on.paint(strong, ends(m.signs.clean(m.question.text), "y yes  n no", m.w))
	case m.message != "":
		return m.on.paint(strong, left(m.signs.clean(m.message), m.w))
	}
	return m.on.paint(faint, m.keyLine())
}

// keyLine names the view and as many of its keys as there is room for.
func (m *model) keyLine() string {
	line := m.top().(named).name() + " |"
	used := map[string]bool{}
	for _, a := range m.hints() {
		h := a.Help()
		if used[h.Key] {
			continue
		}
		used[h.Key] = true
		word, _, _ := strings.Cut(h.Desc, ";")
		if text := " " + h.Key + " " + word + " "; width(line)+width(text) <= m.w+1 {
			line += text
		}
	}
	return line
}

// hints are the bindings for the key line, help and quit first since they
// must find room.
func (m *model) hints() []action {
	var first, rest []action
	for _, a := range m.actions() {
		switch a.Help().Key {
		case "?", "q":
			first = append(first, a)
		case "esc", "ctrl+c", "ctrl+z", "ctrl+l", "up", "down", "-", "+", "shift+tab", "pgup", "pgdown", "g", "G":
			if m.over != nil && a.Help().Key == "esc" {
				first = append(first, a)
			}
		default:
			rest = append(rest, a)
		}
	}
	return append(first, rest...)
}

// lead is the two lines of the leading finding; before there is one, what is
// waited for.
func (m *model) lead() []string {
	f := m.leading()
	switch {
	case m.snap.Phase == engine.Broken:
		return []string{"", ""}
	case m.snap.Phase == engine.Ready:
		return []string{left(m.signs.clean(m.snap.Waiting), m.w), "  enter starts the line-up"}
	case f == nil:
		return m.leadChoice()
	}
	head := fmt.Sprintf("%s %s: %s", m.findingMark(*f), m.subject(*f), m.claim(*f))
	place := fmt.Sprintf("1 of %d", len(m.findings()))
	return []string{
		m.on.paint(inkOfWeight(f.Weight), ends(head, place, m.w)),
		ends("  "+m.signs.clean(f.Advice), m.leadKey(f), m.w),
	}
}

// leadKey names the key that tries the leading finding's advice; where it
// offers nothing new, which trial runs it, or what is best so far.
func (m *model) leadKey(f *diagnose.Finding) string {
	for _, pairing := range f.Try {
		if m.numberOf(pairing) == 0 {
			return "a: try " + m.signs.clean(pairing)
		}
	}
	switch {
	case len(f.Try) > 0:
		return fmt.Sprintf("trial %s runs %s", trace.Tag(m.numberOf(f.Try[0])), m.signs.clean(f.Try[0]))
	case m.snap.Choice.Pairing != "":
		return "best so far: " + m.choiceName()
	}
	return "tab: findings"
}

// leadChoice says what is recommended when nothing was found wrong.
func (m *model) leadChoice() []string {
	c := m.snap.Choice
	if c.Pairing == "" {
		if m.running() {
			return []string{"no finding yet", ""}
		}
		return []string{"no finding", ""}
	}
	why := ""
	if len(c.Reasons) > 0 {
		why = m.signs.clean(c.Reasons[0])
	}
	return []string{clip("no finding; best so far: "+m.choiceName(), m.w), clip("  "+why, m.w)}
}

// findings are those of the snapshot as a reader wants them.
func (m *model) findings() []diagnose.Finding { return diagnose.Fold(m.snap.Findings) }

// leading is the finding that matters most, nil if there is none.
func (m *model) leading() *diagnose.Finding {
	list := m.findings()
	if len(list) == 0 {
		return nil
	}
	return &list[0]
}

// subject names what a finding is about, with the trial's number.
func (m *model) subject(f diagnose.Finding) string {
	if id := m.numberOf(f.Subject); id > 0 {
		return fmt.Sprintf("%s %s", trace.Tag(id), m.signs.clean(f.Subject))
	}
	return m.signs.clean(f.Subject)
}

// claim is what a finding says, behind its subject.
func (m *model) claim(f diagnose.Finding) string {
	return m.signs.clean(strings.TrimPrefix(f.Claim, f.Subject+" "))
}

// findingMark is one sign for the weight of a finding.
func (m *model) findingMark(f diagnose.Finding) string {
	switch f.Weight {
	case diagnose.Blocker:
		return "!"
	case diagnose.Drag:
		return "="
	}
	return "."
}

// inkOfWeight is the ink of a finding.
func inkOfWeight(w diagnose.Weight) ink {
	switch w {
	case diagnose.Blocker:
		return bad
	case diagnose.Drag:
		return care
	}
	return plain
}
