package tui

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"dwindle/engine"
	"dwindle/engine/trace"
)

// column is one column of the list of trials.
type column struct {
	title string
	w     int // cells, without the blank before it
	text  func(h *trace.History) string
}

// The columns besides number, name, state and note, the most important first:
// they find room in this order and are drawn in the order of place.
var columns = [...]struct {
	column
	place int
}{
	{column{"true res", 8, func(h *trace.History) string { return sci(h.TrueResidual) }}, 3},
	{column{"iters", 6, func(h *trace.History) string { return iterations(h.Iterations) }}, 0},
	{column{"own", 7, func(h *trace.History) string { return trace.Took(h.OwnTime.Seconds()) }}, 8},
	{column{"Ritz cond", 9, func(h *trace.History) string { return condition(h.Condition) }}, 6},
	{column{"products", 8, func(h *trace.History) string { return strconv.Itoa(h.Products) }}, 1},
	{column{"set-up", 7, func(h *trace.History) string { return trace.Took(h.SetupTime.Seconds()) }}, 7},
	{column{"own res", 8, func(h *trace.History) string { return sci(h.Residual) }}, 2},
	{column{"best", 8, func(h *trace.History) string { return sci(h.BestTrue) }}, 4},
	{column{"a decade", 8, func(h *trace.History) string { return perDecade(h) }}, 9},
	{column{"backward", 8, func(h *trace.History) string { return sci(h.Backward) }}, 5},
	{column{"memory", 9, func(h *trace.History) string { return size(h.MemoryBytes) }}, 10},
}

const (
	leadCells  = 5 // ">t 3 "
	leastNote  = 17
	stateCells = 22 // " ! falsely-converged", " # iteration-limit(!)"
)

// listing is the columns that fit a width.
type listing struct {
	columns []column // in drawing order
	name    int      // cells of the name
	state   int      // cells of the state
	note    int      // cells left for a note
}

// listingFor chooses the columns for w cells by width alone, so that they do
// not jump while trials run. Names get more room on wider screens.
func listingFor(w int) listing {
	if w < chartWidth {
		return narrow(w)
	}
	l := listing{name: 19, state: stateCells}
	switch {
	case w < 70:
		l.name = 15
	case w >= 160:
		l.name = 34
	case w >= 100:
		l.name = 24
	}
	room := w - leadCells - l.name - l.state
	taken := map[int]column{}
	for _, c := range columns {
		if c.w+1 > room || (w >= 100 && len(taken) >= 4 && room-c.w-1 < leastNote) {
			break
		}
		taken[c.place] = c.column
		room -= c.w + 1
	}
	for place := range len(columns) {
		if c, ok := taken[place]; ok {
			l.columns = append(l.columns, c)
		}
	}
	if l.note = room; l.note < 12 {
		l.name += l.note
		l.note = 0
	}
	return l
}

// narrow is the list on screens without a chart: the residual, then the
// iterations, and as much of the state as fits, if only its mark.
func narrow(w int) listing {
	l := listing{name: 15, state: 3, columns: []column{columns[0].column}}
	if w >= 40 {
		l.columns = []column{columns[1].column, columns[0].column}
	}
	room := w - leadCells - l.name - l.state
	for _, c := range l.columns {
		room -= c.w + 1
	}
	l.name += min(room, 0)
	l.state += max(room, 0)
	return l
}

// title is the line above the list.
func (l listing) title(where string, w int) string {
	s := blanks(leadCells-2) + "# " + left("trial", l.name)
	for _, c := range l.columns {
		s += " " + right(c.title, c.w)
	}
	if l.state >= len("  state") {
		s += "  state"
	}
	return ends(strings.TrimRight(s, " "), where, w)
}

// row is one trial: picked mark, today's mark, number, name, numbers, state
// and note. A hidden curve's name stands in parentheses.
func (m *model) row(l listing, t *engine.Trial, w int) string {
	h := &t.History
	picked, today := " ", " "
	if t.ID == m.trials.picked {
		picked = ">"
	}
	if h.Today {
		today = "t"
	}
	name := m.signs.clean(h.Pairing)
	if m.trials.hidden[t.ID] {
		name = "(" + clip(name, l.name-2) + ")"
	}
	front := picked + today + right(trace.Tag(t.ID), 2) + " " + left(name, l.name)
	for _, c := range l.columns {
		front += " " + right(c.text(h), c.w)
	}
	state := left(stateText(h), l.state-2)
	if l.state < len("  + conv") {
		state = left(string(h.Stop.Mark()), l.state-2)
	}
	note := ""
	if l.note > 0 {
		note = left(m.signs.clean(noteOf(h)), l.note)
	}
	if strings.TrimSpace(note) == "" {
		state, note = strings.TrimRight(state, " "), ""
	}
	on, mark := plain, inkOfMark(h.Stop.Mark())
	switch {
	case t.ID == m.trials.picked:
		on = strong
	case aside(h):
		on, mark = faint, faint
	}
	return m.on.paint(on, front) + "  " + m.on.paint(mark, state) + note
}

// stateText is the mark and the name of the state; "(!)" says that the
// method's own number met the target while the true residual had not.
func stateText(h *trace.History) string {
	s := string(h.Stop.Mark()) + " " + h.Stop.String()
	if _, ok := falseStop(h); ok && h.Stop != trace.FalselyConverged {
		s += "(!)"
	}
	switch {
	case h.TwoDoubles && h.Stop.Ended():
		s += " 2-double" // x is kept in two doubles
	case h.Direct:
		s += " direct" // one step with an exact factorisation
	}
	if left := leftWords(h); left != "" && h.Stop == trace.Running {
		if strings.HasSuffix(s, "(!)") { // both must find room
			left = strings.TrimSuffix(left, " left")
		}
		s += " " + left
	}
	return s
}

// falseStop returns the first event of a false stop.
func falseStop(h *trace.History) (trace.Event, bool) {
	for _, e := range h.Events {
		if e.Kind == trace.FalseStop {
			return e, true
		}
	}
	return trace.Event{}, false
}

// noteOf is the most telling thing about a trial in a few words.
func noteOf(h *trace.History) string {
	if e, ok := falseStop(h); ok {
		return fmt.Sprintf("met own test at it %d, true %s", e.Iter, sci(e.Value))
	}
	if h.Stop.Ended() {
		return h.Reason
	}
	if h.Norm != "" && h.Norm != trace.TwoNorm {
		return "own norm: " + string(h.Norm)
	}
	return ""
}

// condition is the estimate from the recurrence coefficients, "?" if it has
// not settled; "-" if the method gives none.
func condition(c trace.Condition) string {
	if c.Of == "" || c.Negative || !(c.Estimate > 0) {
		return none
	}
	s := sci(c.Estimate)
	if !c.Settled && s != none {
		return s + "?"
	}
	return s
}

// perDecade is the own time for each decade of the true residual won so far.
func perDecade(h *trace.History) string {
	if len(h.Records) == 0 {
		return none
	}
	first, ok := level(h.Records[0].Residual)
	now, fine := level(h.TrueResidual)
	if !ok || !fine || first-now < 0.05 {
		return none
	}
	return trace.Took(h.OwnTime.Seconds() / math.Abs(first-now))
}
