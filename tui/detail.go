package tui

import (
	"fmt"
	"strings"

	"dwindle/engine/trace"
)

// detail is what is told of the picked trial where the screen is high enough:
// where common stopping rules first held, what the condition estimate rests
// on, and how the trial ended.
func (m *model) detail(w, h int) []string {
	if h < 32 {
		return nil
	}
	t := m.trial(m.trials.picked)
	if t == nil {
		return make([]string, 3)
	}
	hist := &t.History
	head := fmt.Sprintf("%d %s: ", t.ID, m.signs.clean(hist.Pairing))
	return []string{
		clip(head+m.endWords(hist), w),
		clip("  would stop by: "+stopWords(hist.WouldStop), w),
		clip("  "+m.conditionWords(hist)+preconditionerWords(hist.Notes), w),
	}
}

// endWords says how the trial stands, with both of its residuals named.
func (m *model) endWords(h *trace.History) string {
	s := h.Stop.String()
	if h.Reason != "" {
		s += ": " + m.signs.clean(h.Reason)
	}
	norm := string(h.Norm)
	if norm == "" {
		norm = string(trace.TwoNorm)
	}
	return s + fmt.Sprintf("; own residual %s (%s norm), true %s", sci(h.Residual), m.signs.clean(norm), sci(h.TrueResidual))
}

// stopWords lists where common stopping rules first held.
func stopWords(marks []trace.StopMark) string {
	var words []string
	for _, s := range marks {
		at := "never"
		if s.Iter >= 0 {
			at = fmt.Sprintf("it %d", s.Iter)
			if v := sci(s.True); v != none {
				at += " (true " + v + ")"
			}
		}
		words = append(words, s.Rule+" "+at)
	}
	if len(words) == 0 {
		return "nothing yet"
	}
	return strings.Join(words, "   ")
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
	return fmt.Sprintf("Ritz values %s .. %s: cond(%s) at least %s, %s",
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
