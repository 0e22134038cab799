package tui

import (
	"fmt"
	"slices"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"dwindle/engine/trace"
)

// infoView lies over a screen and tells everything about the picked trial,
// each number with its source.
type infoView struct{ first, lines int }

func (v *infoView) name() string   { return "trial" }
func (v *infoView) entry() *prompt { return nil }

// openInfo opens it.
func (m *model) openInfo() tea.Cmd {
	if m.trial(m.trials.picked) == nil {
		m.say("there is no trial")
		return nil
	}
	m.over = &infoView{}
	return nil
}

// keys are the bindings of the view.
func (v *infoView) keys(m *model) []action {
	list := []action{
		bind("close", (*model).closeOver, "esc", "q", "i", "enter"),
		bind("next trial", func(m *model) tea.Cmd { m.trials.move(m, 1); v.first = 0; return nil }, "right", "l"),
		bind("trial before", func(m *model) tea.Cmd { m.trials.move(m, -1); v.first = 0; return nil }, "left", "h"),
		bindKey("pick", m.trials.pickDigit, "1", "2", "3", "4", "5", "6", "7", "8", "9", "0").named("1-9"),
	}
	return append(list, moves(func(m *model, step int) { v.first = max(min(v.first+step, v.lines-1), 0) })...)
}

// draw draws the part of the text that fits.
func (v *infoView) draw(m *model, w, h int) []string {
	t := m.trial(m.trials.picked)
	if t == nil {
		return nil
	}
	lines := m.infoLines(t.ID, &t.History, w)
	v.lines = len(lines)
	v.first = max(min(v.first, len(lines)-h), 0)
	out := slices.Clone(some(lines, v.first, h))
	if v.first+h < len(lines) && len(out) > 0 {
		out[len(out)-1] = m.on.paint(faint, fmt.Sprintf("  %d more lines: down", len(lines)-v.first-h+1))
	}
	return out
}

// infoLines is everything about a trial.
func (m *model) infoLines(id int, h *trace.History, w int) []string {
	lines := []string{m.on.paint(strong, clip(fmt.Sprintf("trial %s %s", trace.Tag(id), m.signs.clean(h.Pairing)), w))}
	add := func(texts ...string) {
		for _, text := range texts {
			lines = append(lines, hanging(m.signs.clean(text), w)...)
		}
	}
	add(m.endWords(h), fmt.Sprintf("%d its, %d products, %d uses of the preconditioner; own %s, set-up %s; %s", h.Iterations, h.Products,
		h.PrecondUses, trace.Took(h.OwnTime.Seconds()), trace.Took(h.SetupTime.Seconds()), size(h.MemoryBytes)))
	add(m.numberWords(h))
	add(fmt.Sprintf("backward error %s; by rows %s%s", sci(h.Backward), sci(h.Componentwise), worstRows(h, m)))
	if finite(h.Error) {
		add("true error " + sci(h.Error) + " of the known solution")
	}
	add(nearWords(h))
	if floor := h.Attainable(); floor > 0 {
		add("accuracy floor of the true residual near " + sci(floor) + ", estimated")
	}
	lines = append(lines, tied("would stop by: "+stopWords(h.WouldStop), w)...)
	add(forecastWords(h), energyWords(h))
	lines = append(lines, tied(lockWords(h), w)...)
	if h.Delay > 0 {
		add(fmt.Sprintf("about %d its lost to rounding (lost orthogonality), estimated", h.Delay))
	}
	add(withoutWords(h)...)
	for _, l := range fieldLines(h, m.signs, w-2) {
		lines = append(lines, "  "+l)
	}
	add(probeWords(h.Probe), noiseWords(h.Counts))
	lines = append(lines, tied(columnWords(h.Columns), w)...)
	add(h.Notes.Remarks...)
	return lines
}

// hanging wraps a sentence, its further lines indented deeper.
func hanging(text string, w int) []string {
	lines := wrap(text, w-4)
	for k := range lines {
		indent := "  "
		if k > 0 {
			indent = "    "
		}
		lines[k] = clip(indent+lines[k], w)
	}
	return lines
}

// tied is hanging for words in which "_" stands for a blank at which no line
// breaks.
func tied(text string, w int) []string {
	lines := hanging(text, w)
	for k := range lines {
		lines[k] = strings.ReplaceAll(lines[k], "_", " ")
	}
	return lines
}

// worstRows names the rows that are solved worst.
func worstRows(h *trace.History, m *model) string {
	if h.UnsolvedRows == 0 || len(h.WorstRows) == 0 {
		return ""
	}
	rows := make([]int, len(h.WorstRows))
	for i, r := range h.WorstRows {
		rows[i] = r.Row
	}
	return withRows(fmt.Sprintf("; %d rows unsolved, worst first", h.UnsolvedRows), rows, m.snap.Facts)
}
