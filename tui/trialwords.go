package tui

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// finite says whether v can be printed as a number.
func finite(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }

// forecast is the trial's last prediction, false where there is none to tell:
// none was made, or the trial is over.
func forecast(h *trace.History) (trace.Prediction, bool) {
	if n := len(h.Predictions); n > 0 && !h.Stop.Ended() {
		return h.Predictions[n-1], true
	}
	return trace.Prediction{}, false
}

// secondsLeft is how long the trial would still take at its own pace.
func secondsLeft(h *trace.History, p trace.Prediction) float64 {
	if h.Iterations == 0 || !finite(p.Total) {
		return math.NaN()
	}
	each := (h.OwnTime - h.SetupTime).Seconds() / float64(h.Iterations)
	return math.Max(p.Total-float64(h.Iterations), 0) * each
}

// leftWords says in a few cells how far a live trial has to go.
func leftWords(h *trace.History) string {
	p, ok := forecast(h)
	switch left := secondsLeft(h, p); {
	case !ok:
		return ""
	case math.IsInf(p.Total, 1):
		return "no end seen"
	case !finite(left):
		return ""
	case left < 9.95:
		return fmt.Sprintf("%.1f s left", left)
	case left < 1e5:
		return fmt.Sprintf("%.0f s left", left)
	}
	return "days left"
}

// forecastWords tells the prediction in full.
func forecastWords(h *trace.History) string {
	p, ok := forecast(h)
	if !ok && h.Unfallen() && !h.Stop.Ended() {
		return "nothing predicted: its curve has not begun to fall"
	}
	if !ok {
		return ""
	}
	if !finite(p.Total) {
		return fmt.Sprintf("predicted at it %d: it will not reach the target", p.Iter)
	}
	s := fmt.Sprintf("predicted at it %d: %.0f its in all", p.Iter, p.Total)
	if finite(p.Low) && finite(p.High) && p.High > p.Low {
		s += fmt.Sprintf(" (%.0f to %.0f)", p.Low, p.High)
	}
	if left := secondsLeft(h, p); finite(left) {
		s += ", " + trace.Took(left) + " left"
	}
	return s
}

// energyWords tells the last enclosure of the error in the energy norm.
func energyWords(h *trace.History) string {
	n := len(h.EnergyErrors)
	if n == 0 {
		return ""
	}
	e, sure := h.EnergyErrors[n-1], inspect.Estimated
	if h.EnergyProved {
		sure = inspect.Proved
	}
	s := fmt.Sprintf("energy norm of the error at it %d: at least %s of the first", e.Iter, sci(e.Lower))
	if finite(e.Upper) {
		s += fmt.Sprintf(", at most %s (%s)", sci(e.Upper), sure)
	}
	return s
}

// withoutWords tells what would have become of the trial on a changed
// spectrum.
func withoutWords(h *trace.History) []string {
	var out []string
	for _, c := range h.Without {
		what := c.What
		if c.What == trace.Deflated {
			what = fmt.Sprintf("with the %d smallest eigenvalues deflated", c.Removed)
		}
		out = append(out, fmt.Sprintf("%s: %d its instead of %d, computed (up to %s goes, %s stays)", what, c.Iterations, h.Iterations,
			sci(c.Largest), sci(c.Next)))
	}
	return out
}

// lockWords tells which Ritz values locked, the smallest first.
func lockWords(h *trace.History) string {
	if len(h.Locks) == 0 {
		return ""
	}
	list := slices.Clone(h.Locks)
	slices.SortFunc(list, func(a, b trace.Lock) int { return compareFloats(a.Value, b.Value) })
	words := make([]string, len(list))
	for i, l := range list {
		words[i] = fmt.Sprintf("%s_at_it_%d", sci(l.Value), l.Iter)
		if l.Copies > 1 {
			words[i] += fmt.Sprintf("_(%d_copies)", l.Copies)
		}
	}
	if n := len(words) - lockedLow - lockedHigh; n > 1 {
		words = slices.Concat(words[:lockedLow], []string{fmt.Sprintf("(%d_between)", n)}, words[lockedLow+n:])
	}
	return "locked: " + strings.Join(words, ", ")
}

// lockedLow and lockedHigh are how many locked values are told from either end:
// the small ones are what holds convergence up.
const lockedLow, lockedHigh = 6, 3

func compareFloats(a, b float64) int {
	switch {
	case a < b:
		return -1
	case a > b:
		return 1
	}
	return 0
}

// fieldLines is the table of the residuals by field of unknowns.
func fieldLines(h *trace.History, g glyphs, w int) []string {
	if len(h.Fields) == 0 {
		return nil
	}
	lines := []string{left("field", 16) + right("rows", 10) + right("residual", 11) + right("by rows", 11) + right("to reach", 11)}
	for _, f := range h.Fields {
		tol, mark := none, ""
		if f.Tol > 0 {
			tol, mark = power(f.Tol), " met"
			if !(f.Residual <= f.Tol) {
				mark = " not met"
			}
		}
		lines = append(lines, left(g.clean(f.Name), 16)+right(count(f.Rows), 10)+right(sci(f.Residual), 11)+
			right(sci(f.Componentwise), 11)+right(tol, 11)+mark)
	}
	for i := range lines {
		lines[i] = clip(lines[i], w)
	}
	return lines
}

// probeWords tells what probing the preconditioner showed.
func probeWords(p *trace.MProbe) string {
	if p == nil {
		return ""
	}
	s := fmt.Sprintf("M probed: ||v - cM^-1 Av|| %s of ||v||", sci(p.Distance))
	if finite(p.Plain) {
		s += fmt.Sprintf(" (%s with the diagonal alone)", sci(p.Plain))
	}
	if p.Deviation > 0 {
		s += fmt.Sprintf("; ||A - M|| %s of ||A||, Frobenius norms", sci(p.Deviation))
	}
	return s + fmt.Sprintf("; asymmetry %s, nonlinearity %s, from use to use %s", sci(p.Asymmetry), sci(p.Nonlinear), sci(p.Unrepeatable))
}

// nearWords tells how far x was found to be from a solution in two doubles.
func nearWords(h *trace.History) string {
	n := h.Near
	if n == nil || n.Of == h.Pairing {
		return ""
	}
	return fmt.Sprintf("error of x %s, in its worst entry %s, against x in two doubles by %s", sci(n.Error), sci(n.Worst), n.Of)
}

// noiseWords tells how reruns with b changed in its last bits came out.
func noiseWords(counts []int) string {
	if len(counts) == 0 {
		return ""
	}
	return fmt.Sprintf("reruns with b changed in its last bit: %d to %d its", slices.Min(counts), slices.Max(counts))
}

// columnWords tells how further right-hand sides came out.
func columnWords(list []trace.Column) string {
	if len(list) == 0 {
		return ""
	}
	words := make([]string, len(list))
	for i, c := range list {
		words[i] = fmt.Sprintf("%d:_%d_its_%s", c.Index, c.Iterations, strings.ReplaceAll(trace.Took(c.Seconds), " ", "_"))
		if !c.Reached {
			words[i] += "_(not_reached)"
		}
	}
	return "other right-hand sides: " + strings.Join(words, ", ")
}
