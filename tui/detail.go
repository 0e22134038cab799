package tui

import (
	"fmt"
	"strings"

	"dwindle/engine/trace"
)

// detail is what is told of the picked trial where the screen is high enough:
// its numbers and their sources, how it ended, and where common stopping rules
// first held.
func (m *model) detail(w, h int) []string {
	if h < 32 {
		return nil
	}
	const lines = 4
	t := m.trial(m.trials.picked)
	if t == nil {
		return make([]string, lines)
	}
	hist := &t.History
	out := []string{
		clip(fmt.Sprintf("%s %s: ", trace.Tag(t.ID), m.signs.clean(hist.Pairing))+m.numberWords(hist), w),
		clip("  "+m.endWords(hist), w),
	}
	stops := wrap("would stop by: "+stopWords(hist.WouldStop), w-2)
	for _, s := range some(stops, 0, 2) {
		out = append(out, "  "+strings.ReplaceAll(s, "_", " "))
	}
	return fit(out, lines)
}

// numberWords are the trial's residuals and its condition estimate, each with
// its source, and what building the preconditioner left behind.
func (m *model) numberWords(h *trace.History) string {
	norm := string(h.Norm)
	if norm == "" {
		norm = string(trace.TwoNorm)
	}
	return fmt.Sprintf("own residual %s (%s norm), true %s; ", sci(h.Residual), m.signs.clean(norm), sci(h.TrueResidual)) +
		m.conditionWords(h) + preconditionerWords(h.Notes)
}

// endWords says how the trial stands or ended.
func (m *model) endWords(h *trace.History) string {
	if h.Reason == "" {
		return h.Stop.String()
	}
	return h.Stop.String() + ": " + m.signs.clean(h.Reason)
}

// stopWords lists where common stopping rules first held, with the true
// residual there. "_" stands for a blank at which no line breaks.
func stopWords(marks []trace.StopMark) string {
	var words []string
	for _, s := range marks {
		at := "never"
		if s.Iter >= 0 {
			at = fmt.Sprintf("it_%d", s.Iter)
			if v := sci(s.True); v != none {
				at += "_(true_" + v + ")"
			}
		}
		words = append(words, s.Rule+"_"+at+",")
	}
	if len(words) == 0 {
		return "nothing yet"
	}
	return strings.TrimSuffix(strings.Join(words, " "), ",")
}

// conditionWords says what is known of the condition number, and from what.
func (m *model) conditionWords(h *trace.History) string {
	c := h.Condition
	switch {
	case c.Of == "":
		return "no condition estimate from this method"
	case c.Negative:
		return "a Ritz value is negative: no condition estimate"
	case condition(c) == none:
		return "no condition estimate yet"
	}
	settled := "not settled"
	if c.Settled {
		settled = "settled"
	}
	return fmt.Sprintf("Ritz %s .. %s: cond(%s) >= %s, %s",
		sci(c.Smallest), sci(c.Largest), m.signs.clean(c.Of), sci(c.Estimate), settled)
}

// preconditionerWords says what building the preconditioner left behind.
func preconditionerWords(n trace.BuildNotes) string {
	s := ""
	if n.Fill > 0 {
		s += fmt.Sprintf("; fill %.2f", n.Fill)
	}
	if n.Shift != 0 {
		s += "; shifted by " + sci(n.Shift)
	}
	if n.Replaced > 0 {
		s += fmt.Sprintf("; %d values replaced", n.Replaced)
	}
	return s
}
