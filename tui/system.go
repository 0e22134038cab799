package tui

import (
	"fmt"
	"strings"

	"dwindle/engine"
	"dwindle/engine/diagnose"

	tea "github.com/charmbracelet/bubbletea"
)

// systemView is the screen of what is known of the system.
type systemView struct {
	at, first int
	find      *prompt // being typed
	wanted    string  // facts are shown that hold this text
}

func (v *systemView) name() string   { return "system" }
func (v *systemView) entry() *prompt { return v.find }

// keys are the bindings of the screen, or of the line being typed.
func (v *systemView) keys(m *model) []action {
	if v.find != nil {
		return []action{
			bind("keep", v.keep, "enter"),
			bind("show all", v.all, "esc"),
		}
	}
	list := []action{
		bind("find; a fact by a word", v.search, "/"),
	}
	switch m.snap.Phase {
	case engine.Inspecting:
		list = append(list, bind("skip; the rest of the second look", v.enter, "enter"))
	case engine.Ready, engine.Broken:
		list = append(list, bind("go on", v.enter, "enter"))
	}
	if v.wanted != "" {
		list = append(list, bind("show all facts", v.all, "esc"))
	}
	return append(list, moves(v.move)...)
}

func (v *systemView) search(m *model) tea.Cmd {
	v.find = &prompt{label: "find"}
	return nil
}

func (v *systemView) keep(m *model) tea.Cmd {
	v.wanted, v.find, v.at = v.find.text, nil, 0
	return nil
}

func (v *systemView) all(m *model) tea.Cmd {
	v.wanted, v.find, v.at = "", nil, 0
	return nil
}

// enter starts the waiting line-up or goes back from a broken system.
func (v *systemView) enter(m *model) tea.Cmd {
	switch m.snap.Phase {
	case engine.Inspecting:
		return m.skip()
	case engine.Ready:
		return m.start()
	case engine.Broken:
		return m.back()
	}
	return nil
}

// move moves through the facts.
func (v *systemView) move(m *model, step int) {
	v.at = max(min(v.at+step, len(v.shown(m))-1), 0)
}

// shown are the facts that hold the text looked for.
func (v *systemView) shown(m *model) []factRow {
	all := factRows(m.snap.Facts, m.signs)
	text := v.wanted
	if v.find != nil {
		text = v.find.text
	}
	if text == "" {
		return all
	}
	var out []factRow
	for _, f := range all {
		if strings.Contains(strings.ToLower(f.label+" "+f.answer+" "+f.why), strings.ToLower(text)) {
			out = append(out, f)
		}
	}
	return out
}

// draw draws the facts, the pattern beside them, the picked fact in full and
// what the facts mean.
func (v *systemView) draw(m *model, w, h int) []string {
	if m.snap.Phase == engine.Broken {
		return m.brokenLines(w)
	}
	if m.snap.Facts == nil {
		return []string{"", "the system is being read"}
	}
	rows := v.shown(m)
	v.at = max(min(v.at, len(rows)-1), 0)
	more := v.inFull(rows, w)
	reads := m.readsAs(w, max(h/5, 1))
	n := max(h-1-len(more)-len(reads), 1)
	v.first = scroll(v.first, v.at, len(rows), n)
	picture := patternLines(m, w, n)
	side := 0
	if len(picture) > 0 {
		side = width(picture[0]) + 2
	}
	lines := []string{v.title(m, len(rows), n, w)}
	for i := v.first; i < v.first+n; i++ {
		line := ""
		if i < len(rows) {
			line = rows[i].line(i == v.at, w-side)
		}
		if k := i - v.first; k < len(picture) {
			line = left(line, w-side) + "  " + picture[k]
		}
		lines = append(lines, line)
	}
	lines = append(lines, more...)
	return append(lines, reads...)
}

// title is the first line: what is shown, or what is being typed.
func (v *systemView) title(m *model, shown, h, w int) string {
	if v.find != nil {
		return v.find.line(m.signs, w)
	}
	text := "system facts"
	if v.wanted != "" {
		text += " with \"" + m.signs.clean(v.wanted) + "\"; esc shows all"
	}
	if !m.snap.Facts.Complete {
		text += ", more to come"
	}
	where := ""
	if shown > h {
		where = fmt.Sprintf("%d-%d of %d", v.first+1, v.first+h, shown)
	}
	return m.on.paint(faint, ends(text, where, w))
}

// inFull is the picked fact without cuts, on two lines.
func (v *systemView) inFull(rows []factRow, w int) []string {
	if v.at >= len(rows) {
		return make([]string, 2)
	}
	r := rows[v.at]
	text := r.label + ": " + r.answer
	if r.sure != "" {
		text += " (" + r.sure + ")"
	}
	if r.why != "" {
		text += ", " + r.why
	}
	return fit(some(wrap(text, w), 0, 2), 2)
}

// readsAs lists the findings on the system.
func (m *model) readsAs(w, most int) []string {
	var lines []string
	for _, f := range m.snap.Findings {
		if f.Subject == diagnose.OnSystem && len(lines) < most {
			text := clip(m.findingMark(f)+" "+m.signs.clean(f.Claim), w)
			lines = append(lines, m.on.paint(inkOfWeight(f.Weight), text))
		}
	}
	return lines
}
