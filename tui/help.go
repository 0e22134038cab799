package tui

import (
	"slices"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"dwindle/engine"
)

// helpView lies over a screen and lists its keys, derived from the bindings,
// and what the marks mean.
type helpView struct {
	of    view // the screen it explains
	first int
	lines int
}

func (v *helpView) name() string   { return "help" }
func (v *helpView) entry() *prompt { return nil }

// openHelp opens help for the screen.
func (m *model) openHelp() tea.Cmd {
	m.over = &helpView{of: m.screen}
	return nil
}

// keys are the bindings of the help screen.
func (v *helpView) keys(m *model) []action {
	list := []action{bind("close", (*model).closeOver, "esc", "q", "?", "enter")}
	return append(list, moves(func(m *model, step int) {
		v.first = max(min(v.first+step, v.lines-1), 0)
	})...)
}

// signsHelp explains what the screens abbreviate.
var signsHelp = []string{
	"",
	"> picked    t what your code runs today    (name) its curve is hidden",
	"~ running   + converged   = stagnated   ! diverged or falsely converged",
	"x broke down, refused or failed   . waiting   - held   # a limit or your stop",
	"outpaced (#)  ended early: another trial has solved the system, and this one",
	"           can no longer be as quick, neither for one b nor for many",
	"1-9 a-z A-Z  the trials, a the 10th",
	"(!) the method's own number met the target, the true residual had not",
	"left out   among many trials: curves of those outpaced, refused or stopped",
	"^ the curve goes on above the chart",
	"R I P B E  on a curve (key m): a code that stops relative to b, relative to",
	"           r0, preconditioned, by backward error, by energy norm stops here",
	"findings: ! blocker   = drag   . note",
	"true res   ||b - Ax|| / ||b|| measured afresh, in no trial's clock",
	"own res    the number the method itself watches, relative to b",
	"Ritz cond  condition of the preconditioned matrix from Ritz values,",
	"           a lower bound; ? not settled; - the method gives none",
	"own s      this trial's time alone, set-up included",
	". '        lower and upper bound of the error in the energy norm (key e)",
	"s left     at the pace so far to the predicted end; a model, no promise",
	"floor~     estimated accuracy below which nothing can be reached",
}

// draw draws the keys, then the signs, both in full: what does not fit in
// height is scrolled to.
func (v *helpView) draw(m *model, w, h int) []string {
	list := v.of.keys(m)
	switch {
	case m.s != nil && m.snap.Phase == engine.Broken:
		list = m.brokenKeys()
	case v.of != view(m.chooser):
		list = slices.Concat(list, common)
	}
	list = slices.Concat(list, everywhere)
	lines := []string{m.on.paint(faint, "keys of the "+v.of.(named).name()+" screen")}
	lines = append(lines, keyTable(list, w)...)
	for _, s := range signsHelp {
		lines = append(lines, inTwo(s, w)...)
	}
	v.lines = len(lines)
	v.first = max(min(v.first, len(lines)-h), 0)
	out := some(lines, v.first, h)
	if v.first+h < len(lines) {
		out = slices.Clone(out)
		out[len(out)-1] = m.on.paint(faint, "down: more")
	}
	return out
}

// keyTable lists bindings, one below the other.
func keyTable(list []action, w int) []string {
	var lines []string
	for _, a := range list {
		lines = append(lines, inTwo(" "+left(allKeys(a), 11)+" "+strings.ReplaceAll(a.Help().Desc, ";", ","), w)...)
	}
	return lines
}

// inTwo is a line of two columns in lines of at most w cells: the second
// column, behind the last run of two blanks or more, goes on below itself.
func inTwo(s string, w int) []string {
	if width(s) <= w {
		return []string{s}
	}
	at := strings.LastIndex(s, "  ") + 2
	if at < 2 || at > w/2 {
		return paragraph(s, 0, w)
	}
	lines := paragraph(s[at:], at, w)
	lines[0] = s[:at] + strings.TrimLeft(lines[0], " ")
	return lines
}

// allKeys names every key of a binding.
func allKeys(a action) string {
	if a.Help().Key == "1-9" {
		return "1-9"
	}
	s := ""
	for _, k := range a.Keys() {
		if s != "" {
			s += " "
		}
		s += keyName([]string{k})
	}
	return s
}
