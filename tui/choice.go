package tui

import (
	"fmt"
	"math"

	"dwindle/engine"
	"dwindle/engine/choose"
	"dwindle/engine/trace"
)

// choiceText is the recommendation in full: what, why, what could overturn it,
// the settings, the ranking for one and for many right-hand sides, how good the
// predictions were, and what was ruled out.
func (m *model) choiceText(w int) []string {
	c := m.snap.Choice
	if c.Pairing == "" {
		lines := []string{"nothing is recommended yet"}
		lines = append(lines, m.bullets("doubt", c.Doubts, w)...)
		lines = append(lines, m.ranking(c.Ranked, w)...)
		return append(lines, m.ruledOut(c.RuledOut, w)...)
	}
	head := "use " + m.choiceName()
	switch g := c.Gain; {
	case g.Times == 0:
	case g.ByWork:
		head += fmt.Sprintf(": %s times less counted work than today's", round2(g.Times))
	default:
		head += fmt.Sprintf(": %s times as fast as today's", round2(g.Times))
	}
	lines := []string{m.on.paint(strong, clip(head, w))}
	lines = append(lines, m.bullets("because", c.Reasons, w)...)
	lines = append(lines, m.bullets("doubt", c.Doubts, w)...)
	if len(c.Settings) > 0 {
		lines = append(lines, "", m.on.paint(faint, "settings, for any code"))
		for _, s := range c.Settings {
			lines = append(lines, hanging(m.signs.clean(s), w)...)
		}
	}
	lines = append(lines, m.ranking(c.Ranked, w)...)
	lines = append(lines, m.outcomes(c.Outcomes, w)...)
	return append(lines, m.ruledOut(c.RuledOut, w)...)
}

// chosen is the trial that is recommended, nil where there is none.
func (m *model) chosen() *engine.Trial {
	for i := range m.snap.Trials {
		if t := &m.snap.Trials[i]; t.History.Pairing == m.snap.Choice.Pairing {
			return t
		}
	}
	return nil
}

// choiceName is the pairing that is recommended, with what must be known of its
// answer.
func (m *model) choiceName() string {
	name := m.signs.clean(m.snap.Choice.Pairing)
	if t := m.chosen(); t != nil && t.History.TwoDoubles {
		name += ", x in two doubles"
	}
	return name
}

// bullets lists sentences under a word.
func (m *model) bullets(word string, list []string, w int) []string {
	var lines []string
	for _, s := range list {
		lines = append(lines, hanging(word+": "+m.signs.clean(s), w)...)
	}
	return lines
}

// ranking is the table of the ranked pairings: predicted seconds for one, ten
// and a thousand right-hand sides, one after the other with one set-up.
func (m *model) ranking(ranked []choose.Ranked, w int) []string {
	if len(ranked) == 0 {
		return nil
	}
	name := min(max(w-59, 14), 34)
	head := "     " + left("time, right sides", name)
	for _, n := range choose.Sides {
		head += right(fmt.Sprintf("for %d", n), 9)
	}
	lines := []string{"", m.on.paint(faint, clip(head+right("set-up", 9)+right("its", 8)+right("memory", 10), w))}
	for i, r := range ranked {
		lines = append(lines, clip(m.rankedRow(i+1, r, name), w))
	}
	for _, r := range ranked {
		if finite(r.BreakEven) && r.BreakEven > 1 {
			lines = append(lines, clip(fmt.Sprintf("     %s pays for its set-up from %.0f right-hand sides", m.signs.clean(r.Pairing), r.BreakEven), w))
		}
	}
	return lines
}

// rankedRow is one line of the ranking.
func (m *model) rankedRow(place int, r choose.Ranked, name int) string {
	line := fmt.Sprintf("%4d ", place) + left(m.signs.clean(r.Pairing), name)
	for i := range choose.Sides {
		text := none
		switch {
		case !r.Reached && i == 0:
			text = "not met"
		case r.Reached && finite(r.For[i]) && r.For[i] > 0:
			text = trace.Took(r.For[i])
		case r.Reached && i == 0:
			text = trace.Took(r.Seconds)
		}
		line += right(text, 9)
	}
	return line + right(trace.Took(r.Setup), 9) + right(fmt.Sprint(r.Iterations), 8) + right(size(r.Memory), 10)
}

// near is how far a prediction may be off to count as good.
const near = 0.2

// outcomes tells how good the predictions were.
func (m *model) outcomes(list []choose.Outcome, w int) []string {
	if len(list) == 0 {
		return nil
	}
	good := 0
	var lines []string
	for _, o := range list {
		if math.Abs(o.Predicted-o.Came) <= near*math.Abs(o.Came) {
			good++
		}
		lines = append(lines, hanging(m.signs.clean(fmt.Sprintf("%s, %s: predicted %s, came %s", o.Pairing, o.What, value(o.Predicted), value(o.Came))), w)...)
	}
	title := fmt.Sprintf("predictions: %d of %d within 20 %% of what came", good, len(list))
	return append([]string{"", m.on.paint(faint, clip(title, w))}, lines...)
}

// ruledOut lists what cannot run here.
func (m *model) ruledOut(list []choose.Ruled, w int) []string {
	if len(list) == 0 {
		return nil
	}
	lines := []string{"", m.on.paint(faint, "ruled out")}
	for _, r := range list {
		lines = append(lines, hanging(m.signs.clean(r.Pairing+": "+r.Reason), w)...)
	}
	return lines
}

// round2 writes a factor with two digits or so.
func round2(v float64) string {
	if v >= 10 {
		return fmt.Sprintf("%.0f", v)
	}
	return fmt.Sprintf("%.1f", v)
}
