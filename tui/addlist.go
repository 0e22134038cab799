package tui

import (
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"dwindle/engine/choose"
)

// addView lies over a screen and lists the pairings that could be added, the
// refused ones with their reason. A pairing may also be typed.
type addView struct {
	all       []choose.Candidate
	ready     bool // the list has come
	at, first int
	line      *prompt // being typed
	text      string  // filters the list; also what is typed as a pairing
}

// offered carries the candidates to the list that asked for them.
type offered struct {
	to  *addView
	all []choose.Candidate
}

func (v *addView) name() string   { return "new pairing" }
func (v *addView) entry() *prompt { return v.line }

// openAdd opens the list.
func (m *model) openAdd() tea.Cmd {
	v, s := &addView{}, m.s
	m.over = v
	return func() tea.Msg { return offered{v, s.Candidates()} }
}

// onOffered fills the list.
func (m *model) onOffered(o offered) {
	o.to.all, o.to.ready, m.stale = o.all, true, true
}

// keys are the bindings of the list, or of the line being typed.
func (v *addView) keys(m *model) []action {
	if v.line != nil {
		return []action{
			bind("add, or keep the filter", v.take, "enter"),
			bind("take back", v.clear, "esc"),
			bind("down", func(m *model) tea.Cmd { v.leave(); return nil }, "down"),
		}
	}
	list := []action{
		bind("add", v.enter, "enter"),
		bind("find or type one", v.write, "/"),
		bind("close", (*model).closeOver, "esc", "q"),
	}
	return append(list, moves(v.move)...)
}

func (v *addView) write(m *model) tea.Cmd {
	v.line = &prompt{label: "pairing", text: v.text}
	return nil
}

// leave keeps the typed text as the filter.
func (v *addView) leave() { v.text, v.line, v.at = strings.TrimSpace(v.line.text), nil, 0 }

func (v *addView) clear(m *model) tea.Cmd {
	v.text, v.line, v.at = "", nil, 0
	return nil
}

// take adds what was typed when it reads as a pairing or nothing in the list
// holds it; otherwise it stays as the filter.
func (v *addView) take(m *model) tea.Cmd {
	v.leave()
	if strings.ContainsAny(v.text, "+/(") || (v.text != "" && len(v.shown()) == 0) {
		m.over = nil
		return m.add(v.text)
	}
	return nil
}

// enter adds the picked pairing; a refused one says why.
func (v *addView) enter(m *model) tea.Cmd {
	list := v.shown()
	if v.at >= len(list) {
		return nil
	}
	if c := list[v.at]; c.Refused != "" {
		m.say(c.Pairing + ": " + c.Refused)
		return nil
	}
	m.over = nil
	return m.add(list[v.at].Pairing)
}

func (v *addView) move(m *model, step int) {
	v.at = max(min(v.at+step, len(v.shown())-1), 0)
}

// shown are the candidates that hold every word of the filter.
func (v *addView) shown() []choose.Candidate {
	text := v.text
	if v.line != nil {
		text = v.line.text
	}
	words := strings.Fields(strings.ToLower(text))
	var out []choose.Candidate
	for _, c := range v.all {
		if holds(c.Pairing+" "+c.Summary+" "+c.Refused, words) {
			out = append(out, c)
		}
	}
	return out
}

// holds says whether text has every word, in any case.
func holds(text string, words []string) bool {
	text = strings.ToLower(text)
	for _, w := range words {
		if !strings.Contains(text, w) {
			return false
		}
	}
	return true
}

// draw draws the list.
func (v *addView) draw(m *model, w, h int) []string {
	title := left("new pairing: enter adds, / finds or types one such as cg+ssor:1.2", w)
	switch {
	case v.line != nil:
		title = v.line.line(m.signs, w)
	case v.text != "":
		title = left("new pairing, with \""+m.signs.clean(v.text)+"\"; / changes it", w)
	}
	lines := []string{title}
	list := v.shown()
	switch {
	case !v.ready:
		return append(lines, "  the list is being made")
	case len(list) == 0:
		return append(lines, "  none in the list; enter adds what is typed")
	}
	v.at = min(v.at, len(list)-1)
	v.first = scroll(v.first, v.at, len(list), h-1)
	for i := v.first; i < min(v.first+h-1, len(list)); i++ {
		lines = append(lines, v.row(m, list[i], i == v.at, w))
	}
	return lines
}

// row is one candidate: name, memory, what it is; "x" and why where it cannot
// run here.
func (v *addView) row(m *model, c choose.Candidate, picked bool, w int) string {
	mark := " "
	if picked {
		mark = ">"
	}
	note, ink := c.Summary, plain
	state := " "
	if c.Refused != "" {
		state, note, ink = "x", "refused: "+c.Refused, faint
	} else if id := m.numberOf(c.Pairing); id > 0 {
		state = "."
		note = "is a trial already"
	}
	name := max(min(w/3, 34), 12)
	text := mark + state + " " + left(m.signs.clean(c.Pairing), name) + right(size(c.Memory), 10) + "  " + m.signs.clean(note)
	return m.on.paint(ink, clip(text, w))
}
