package tui

import (
	"fmt"
	tea "github.com/charmbracelet/bubbletea"
	"math"

	"dwindle/engine"
	"dwindle/engine/trace"
)

// draw draws chart, list and what room is left for of the picked trial.
func (v *trialsView) draw(m *model, w, h int) []string {
	if len(m.snap.Trials) == 0 {
		return m.noTrials(w, h)
	}
	n := len(m.snap.Trials)
	if w < chartWidth || m.h < chartHeight {
		v.columns = 0
		return v.list(m, w, h)
	}
	detail := m.detail(w, h)
	rows := v.listRows(n, h-len(detail))
	chart := h - len(detail) - rows
	p := v.chart(m)
	v.columns = w - p.margin()
	lines := p.draw(w, chart)
	if v.reading >= 0 && v.reading < v.columns {
		lines[len(lines)-2] = cursorAt(lines[len(lines)-2], p.margin()+v.reading)
	}
	lines = append(lines, v.list(m, w, rows)...)
	return append(lines, detail...)
}

// listRows shares h rows between chart and list: the list shows every trial
// on a high screen, six and its title on one of 24 rows, never more than
// what leaves the chart half. The number does not depend on what the trials
// do, only on how many there are.
func (v *trialsView) listRows(n, h int) int {
	most := max(h/3+1, 4)
	return min(max(n, 6), most-1) + 1
}

// cursorAt marks the column of the reading cursor on the axis.
func cursorAt(line string, x int) string {
	r := []rune(line)
	if x < len(r) {
		r[x] = '^'
	}
	return string(r)
}

// chart is what the chart shows.
func (v *trialsView) chart(m *model) plot {
	p := plot{x: v.axis(), y: v.y, tol: m.snap.Settings.Tol, floor: math.NaN(),
		truth: v.truth, marks: v.marks, bounds: v.bounds, out: v.leftOut(m), name: v.residualName(m), signs: m.signs, on: m.on}
	lead := leader(m.snap)
	for i := range m.snap.Trials {
		t := &m.snap.Trials[i]
		picked := t.ID == v.picked
		if v.hidden[t.ID] || m.crowded() && aside(&t.History) && !picked {
			continue
		}
		if picked {
			p.floor = t.History.Attainable()
		}
		p.curves = append(p.curves, drawn{t.ID, &t.History, picked, i == lead})
	}
	return p
}

// crowded says that there are too many trials to draw those set aside.
func (m *model) crowded() bool { return len(m.snap.Trials) > many }

// residualName names the residual that is drawn and, where the picked
// trial's own norm is another one, that norm.
func (v *trialsView) residualName(m *model) string {
	if v.truth {
		return "true residual"
	}
	t := m.trial(v.picked)
	if t == nil || t.History.Norm == "" || t.History.Norm == trace.TwoNorm {
		return "own residual"
	}
	return fmt.Sprintf("own residual (%s: %s norm)", trace.Tag(t.ID), m.signs.clean(string(t.History.Norm)))
}

// leftOut counts the curves that are not drawn since there are too many.
func (v *trialsView) leftOut(m *model) int {
	n := 0
	for _, t := range m.snap.Trials {
		if m.crowded() && aside(&t.History) && t.ID != v.picked {
			n++
		}
	}
	return n
}

// list is the title and h-1 rows of the list: all trials where there is room,
// else those that must be seen and a window on the others.
func (v *trialsView) list(m *model, w, h int) []string {
	if h < 1 {
		return nil
	}
	l := listingFor(w)
	n := len(m.snap.Trials)
	shown := v.visible(m, h-1)
	where := ""
	if len(shown) < n {
		where = fmt.Sprintf("%d of %d", len(shown), n)
	}
	lines := []string{m.on.paint(faint, l.title(where, w))}
	for _, i := range shown {
		lines = append(lines, m.row(l, &m.snap.Trials[i], w))
	}
	return fit(lines, h)
}

// noTrials says what goes on before there is a trial.
func (m *model) noTrials(w, h int) []string {
	switch m.snap.Phase {
	case engine.Broken:
		return m.brokenLines(w)
	case engine.Loading:
		return []string{"", "the system is being read"}
	case engine.Inspecting:
		return []string{"", "the system is being inspected; tab shows what is known of it, enter skips the rest"}
	}
	return []string{"", "no trial; n adds a pairing"}
}

// brokenLines says why there is nothing to see.
func (m *model) brokenLines(w int) []string {
	lines := []string{"", m.on.paint(bad, "the system could not be opened"), ""}
	if m.snap.Err != nil {
		lines = append(lines, paragraph(m.signs.clean(m.snap.Err.Error()), 2, w)...)
	}
	if m.chooser != nil {
		lines = append(lines, "", "enter goes back to the samples")
	}
	return lines
}

// back returns from a system that could not be opened to the chooser.
func (m *model) back() tea.Cmd {
	if m.chooser != nil && m.snap.Phase == engine.Broken {
		m.s, m.snap, m.looked = nil, engine.Snapshot{}, false
		m.show(m.chooser)
	}
	return nil
}
