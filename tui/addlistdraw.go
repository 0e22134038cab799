package tui

import (
	"fmt"
	"strings"

	"dwindle/engine/choose"
)

// draw draws the list.
func (v *addView) draw(m *model, w, h int) []string {
	lines := []string{v.title(m, w), m.on.paint(faint, v.heading(w))}
	var rows []string
	if v.grouped() {
		for i, g := range v.solvers(m.snap.Facts) {
			rows = append(rows, v.groupRow(m, g, i == v.at, w))
		}
	} else {
		for i, c := range v.shown() {
			rows = append(rows, v.row(m, c, i == v.at, w))
		}
	}
	switch {
	case !v.ready:
		return append(lines, "  the list is being made")
	case len(rows) == 0:
		return append(lines, "  none in the list; enter adds what is typed")
	}
	v.at = min(v.at, len(rows)-1)
	room := max(h-len(lines), 1)
	v.first = scroll(v.first, v.at, len(rows), room)
	return append(lines, rows[v.first:min(v.first+room, len(rows))]...)
}

// heading names the columns and says what the marks mean.
func (v *addView) heading(w int) string {
	if v.grouped() {
		return clip("   "+left("solver", 12)+right("precond.", 9)+"  + suits this A   x refused", w)
	}
	return clip("   "+left("pairing", pairingCells(w))+right("memory", 10)+"  + suits this A   x refused   . in use", w)
}

// pairingCells is the width of the column of pairings.
func pairingCells(w int) int { return max(min(w/3, 34), 12) }

// title says what is listed, or what is being typed.
func (v *addView) title(m *model, w int) string {
	switch {
	case v.line != nil:
		return v.line.line(m.signs, w)
	case v.text != "":
		return left("new pairing, with \""+m.signs.clean(v.text)+"\"; / changes it, p its parameters", w)
	case v.solver != "":
		return left("new pairing: "+m.signs.clean(v.solver)+" with; enter adds, p edits its parameters", w)
	}
	return left("new pairing: enter opens a solver, / finds or types one such as cg+ssor:1.2", w)
}

// groupRow is one solver: how many preconditioners it takes, and what it is.
func (v *addView) groupRow(m *model, g group, picked bool, w int) string {
	mark, ink := " ", plain
	if picked {
		mark = ">"
	}
	note := g.title
	if g.naive {
		note += "; for comparison only"
	}
	state := signOf(g.fit)
	if g.fits == 0 {
		state, note, ink = "x", "refused: "+g.only, faint
	}
	text := mark + state + " " + left(m.signs.clean(g.name), 12) + right(fmt.Sprintf("%d of %d", g.fits, g.fits+g.refused), 9) + "  " + m.signs.clean(note)
	return m.on.paint(ink, clip(text, w))
}

// row is one candidate: name, memory, what it is; "x" and why where it cannot
// run here.
func (v *addView) row(m *model, c choose.Candidate, picked bool, w int) string {
	mark := " "
	if picked {
		mark = ">"
	}
	note, ink := c.Summary, plain
	if v.solver != "" && v.filter() == "" {
		_, note, _ = strings.Cut(c.Summary, ", ")
	}
	state := signOf(fitnessOf(c, m.snap.Facts))
	if c.Refused != "" {
		state, note, ink = "x", "refused: "+c.Refused, faint
	} else if id := m.numberOf(c.Pairing); id > 0 {
		state = "."
		note = "is a trial already"
	}
	text := mark + state + " " + left(m.signs.clean(c.Pairing), pairingCells(w)) + right(size(c.Memory), 10) + "  " + m.signs.clean(note)
	return m.on.paint(ink, clip(text, w))
}

// signOf marks what suits, and what is refused.
func signOf(f fitness) string {
	switch f {
	case suits:
		return "+"
	case cannot:
		return "x"
	}
	return " "
}
