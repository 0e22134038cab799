package report

import (
	"fmt"
	"math"

	"dwindle/engine/choose"
	"dwindle/engine/trace"
)

// near is how far a prediction may be off to count as good.
const near = 0.2

// calibration says how good the predictions of this session were; nothing
// where none has met its outcome.
func calibration(outcomes []choose.Outcome) string {
	met, good := 0, 0
	for _, o := range outcomes {
		if !finite(o.Came) || math.IsNaN(o.Predicted) { // one that said never has failed
			continue
		}
		met++
		if math.Abs(o.Predicted-o.Came) <= near*math.Abs(o.Came) {
			good++
		}
	}
	if met == 0 {
		return ""
	}
	return fmt.Sprintf("%d of %s within %.0f %% of what came", good, plural(met, "prediction", "predictions"), 100*near)
}

// singled are the trials that are looked at one by one: those that were outpaced
// are left to JSON and the page.
func singled(ts []trace.History) (list []int, outpaced int) {
	for i, t := range ts {
		if t.Stop == trace.Outpaced && !t.Today {
			outpaced++
		} else {
			list = append(list, i)
		}
	}
	return list, outpaced
}

// leftOut says how many trials are not looked at one by one; empty for none.
func leftOut(outpaced int) string {
	if outpaced == 0 {
		return ""
	}
	return fmt.Sprintf("%s: --as html or json tells theirs", plural(outpaced, "outpaced trial", "outpaced trials"))
}

// trialItems tells what a trial left beyond the table: error estimates,
// fields, probes, reruns, further right-hand sides.
func trialItems(t trace.History) []labelled {
	var out []labelled
	add := func(label, format string, args ...any) {
		out = append(out, labelled{label, fmt.Sprintf(format, args...)})
	}
	if n := len(t.EnergyErrors); n > 0 {
		e := t.EnergyErrors[n-1]
		upper := "estimated"
		if t.EnergyProved {
			upper = "proved"
		}
		if finite(e.Upper) {
			add("energy error", "at it %d between %s and %s (%s) of the first", e.Iter, sci(e.Lower), sci(e.Upper), upper)
		} else {
			add("energy error", "at it %d at least %s of the first", e.Iter, sci(e.Lower))
		}
	}
	if len(t.Locks) > 0 {
		add("locked", "%s", lockText(t.Locks))
	}
	if t.Delay > 0 {
		add("delay", "about %s lost to rounding, estimated", plural(t.Delay, "iteration", "iterations"))
	}
	if floor := t.Attainable(); floor > 0 {
		add("floor", "rounding is estimated to end the true residual near %s", sci(floor))
	}
	if n := t.Near; n != nil && n.Of != t.Pairing {
		add("error of x", "%s, in its worst entry %s, against x in two doubles by %s", sci(n.Error), sci(n.Worst), n.Of)
	}
	if t.TwoDoubles {
		add("in two doubles", "x rounded to one double leaves %s", sci(t.Rounded))
	}
	if n := len(t.Predictions); n > 0 && t.Stop != trace.Converged { // else the outcome is known
		p := t.Predictions[n-1]
		switch {
		case math.IsInf(p.Total, 1):
			add("prediction", "at it %d: it will not reach the tolerance; its true residual stays near %s", p.Iter, sci(t.TrueResidual))
		case math.IsInf(p.High, 1):
			add("prediction", "at it %d: %s its in all (%s or more, or never)", p.Iter, short(p.Total), short(p.Low))
		default:
			add("prediction", "at it %d: %s its in all (%s to %s)", p.Iter, short(p.Total), short(p.Low), short(p.High))
		}
	}
	for _, w := range t.Without {
		add("without", "%s: about %s, computed from its own coefficients", withoutText(w), plural(w.Iterations, "it", "its"))
	}
	for _, f := range t.Fields {
		s := fmt.Sprintf("%s, %s: residual %s, componentwise %s", f.Name, plural(f.Rows, "row", "rows"), sci(f.Residual), sci(f.Componentwise))
		if f.Tol > 0 {
			s += fmt.Sprintf(", to reach %s", exact(f.Tol))
		}
		add("field", "%s", s)
	}
	if p := t.Probe; p != nil {
		add("probe of M", "asymmetry %s, nonlinearity %s, unrepeatable %s, distance of M^-1 A from a multiple of I %s (scaled by diag A alone %s)",
			sci(p.Asymmetry), sci(p.Nonlinear), sci(p.Unrepeatable), sci(p.Distance), sci(p.Plain))
	}
	if p := t.Probe; p != nil && p.Deviation > 0 {
		add("factors", "||A - M|| is %s of ||A||, Frobenius norms", sci(p.Deviation))
	}
	if len(t.Counts) > 0 {
		add("noise", "%s with b changed in its last places: %s its", plural(len(t.Counts), "rerun", "reruns"), countText(t.Counts))
	}
	for _, c := range t.Columns {
		end := "reached"
		if !c.Reached {
			end = "not reached"
		}
		add("column", "%d: %s, %s, true residual %s, %s", c.Index, plural(c.Iterations, "it", "its"), trace.Took(c.Seconds), sci(c.True), end)
	}
	return out
}

// lockText lists the first Ritz values that locked.
func lockText(locks []trace.Lock) string {
	const most = 6
	s := ""
	for i, l := range locks {
		if i == most {
			return s + fmt.Sprintf(" and %d more", len(locks)-most)
		}
		if i > 0 {
			s += ", "
		}
		s += fmt.Sprintf("%s at it %d", short(l.Value), l.Iter)
		if l.Copies > 1 {
			s += fmt.Sprintf(" (%d copies)", l.Copies)
		}
	}
	return s
}

// countText is the range of iteration counts.
func countText(counts []int) string {
	low, high := counts[0], counts[0]
	for _, c := range counts {
		low, high = min(low, c), max(high, c)
	}
	if low == high {
		return fmt.Sprint(low)
	}
	return fmt.Sprintf("%d to %d", low, high)
}

// withoutText says what a counterfactual takes out of the spectrum.
func withoutText(w trace.Counterfactual) string {
	return fmt.Sprintf("%s, %s up to %s", w.What, plural(w.Removed, "value", "values"), short(w.Largest))
}
