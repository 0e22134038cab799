package tui

import (
	"slices"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"dwindle/engine/choose"
	"dwindle/engine/inspect"
)

// addView lies over a screen and lists what could be added: first the solvers,
// then the preconditioners of the picked one, the refused ones with their
// reason. A filter lists the pairings that hold its words; a pairing may also
// be typed.
type addView struct {
	all       []choose.Candidate
	ready     bool // the list has come
	solver    string
	at, first int
	was       int     // the place among the solvers
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
	if m.snap.ReadOnly != "" {
		m.say("read-only: " + m.snap.ReadOnly)
		return nil
	}
	v, s := &addView{}, m.s
	m.over = v
	return func() tea.Msg { return offered{to: v, all: s.Candidates()} }
}

// onOffered fills the list.
func (m *model) onOffered(o offered) {
	m.look()
	o.to.all, o.to.ready, m.stale = bestFirst(o.all, m.snap.Facts), true, true
	if m.snap.ReadOnly != "" && m.over == view(o.to) { // the system could not be read again
		m.over = nil
		m.say("read-only: " + m.snap.ReadOnly)
	}
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
	list := []action{bind("add", v.enter, "enter"), bind("parameters", v.edit, "p")}
	if v.grouped() {
		list = []action{bind("its preconditioners", v.enter, "enter")}
	}
	list = append(list, bind("find or type one", v.write, "/"), bind("back", v.back, "esc", "left", "h"), bind("close", (*model).closeOver, "q"))
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

// back goes from the preconditioners to the solvers, from a filter to the
// whole list, and from there away.
func (v *addView) back(m *model) tea.Cmd {
	switch {
	case v.text != "":
		return v.clear(m)
	case v.solver != "":
		v.solver, v.at = "", v.was
		return nil
	}
	return m.closeOver()
}

// take adds what was typed when it reads as a pairing or nothing in the list
// holds it, and stays until that has worked, so that a slip can be mended;
// otherwise the text becomes the filter.
func (v *addView) take(m *model) tea.Cmd {
	text := v.filter()
	if strings.ContainsAny(text, "+/(") || (text != "" && len(v.shown()) == 0) {
		return m.add(text)
	}
	v.leave()
	return nil
}

// grouped says whether the solvers are listed.
func (v *addView) grouped() bool { return v.solver == "" && v.filter() == "" }

// filter is the text that the list must hold.
func (v *addView) filter() string {
	if v.line != nil {
		return strings.TrimSpace(v.line.text)
	}
	return v.text
}

// enter opens the picked solver, or adds the picked pairing; a refused one
// says why.
func (v *addView) enter(m *model) tea.Cmd {
	if v.grouped() {
		if list := v.solvers(m.snap.Facts); v.at < len(list) {
			v.solver, v.was, v.at = list[v.at].name, v.at, 0
		}
		return nil
	}
	c, ok := v.candidate(m)
	if !ok {
		return nil
	}
	m.over = nil
	return m.add(c.Pairing)
}

// edit opens the parameters of the picked pairing.
func (v *addView) edit(m *model) tea.Cmd {
	if c, ok := v.candidate(m); ok {
		return m.openForm(c.Pairing, v)
	}
	return nil
}

// candidate is the picked one; a refused one is told why.
func (v *addView) candidate(m *model) (choose.Candidate, bool) {
	list := v.shown()
	if v.at >= len(list) {
		return choose.Candidate{}, false
	}
	if c := list[v.at]; c.Refused != "" {
		m.say(c.Pairing + ": " + c.Refused)
		return c, false
	}
	return list[v.at], true
}

func (v *addView) move(m *model, step int) {
	n := len(v.shown())
	if v.grouped() {
		n = len(v.solvers(m.snap.Facts))
	}
	v.at = max(min(v.at+step, n-1), 0)
}

// group is a solver with its candidates.
type group struct {
	name, title   string
	fits, refused int
	only          string // why every one of them is refused
	naive         bool
	fit           fitness // of what suits best
}

// solvers lists the solvers in the order of the candidates, which are held
// against the facts.
func (v *addView) solvers(f *inspect.Facts) []group {
	var list []group
	for _, c := range v.all {
		k := slices.IndexFunc(list, func(g group) bool { return g.name == c.Solver })
		if k < 0 {
			title, _, _ := strings.Cut(c.Summary, ", ")
			list, k = append(list, group{name: c.Solver, title: title, naive: c.Baseline, fit: cannot}), len(list)
		}
		list[k].fit = min(list[k].fit, fitnessOf(c, f))
		if c.Refused == "" {
			list[k].fits++
		} else {
			list[k].refused++
			list[k].only = c.Refused
		}
	}
	return list
}

// shown are the candidates of the picked solver, or those that hold every word
// of the filter.
func (v *addView) shown() []choose.Candidate {
	words := strings.Fields(strings.ToLower(v.filter()))
	var out []choose.Candidate
	for _, c := range v.all {
		if len(words) == 0 && v.solver != "" && c.Solver != v.solver {
			continue
		}
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
