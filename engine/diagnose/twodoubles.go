package diagnose

import (
	"fmt"
	"math"
	"slices"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// surely is the part of a measured error that the solution it is measured
// against may itself be off by.
const surely = 0.1

// InTwo returns the trial that reached the tolerance with x in two doubles,
// the quickest of them.
func InTwo(trials []trace.History) (best trace.History, ok bool) {
	for _, h := range trials {
		if h.TwoDoubles && h.Stop == trace.Converged && (!ok || h.OwnTime < best.OwnTime) {
			best, ok = h, true
		}
	}
	return best, ok
}

// anyInDouble says whether a trial has solved the system with x in one double.
func anyInDouble(trials []trace.History) bool { return slices.ContainsFunc(trials, inDouble) }

// Offered is the pairing with x in two doubles that the finding about double
// precision offers to try, or nothing.
func Offered(c Case) string {
	for _, f := range precision.Judge(c) {
		for _, p := range f.Try {
			return p
		}
	}
	return ""
}

// twoOf is the refinement in two doubles that goes with an answer in one: by
// the factors that gave it, by those of another trial, or by those that fit A.
func twoOf(c Case, h trace.History) string {
	m := "lu"
	if c.Facts.Symmetric.Answer == inspect.Yes {
		m = "ldl"
	}
	if !h.Direct {
		if k := slices.IndexFunc(c.Trials, func(o trace.History) bool { return o.Direct && len(o.Records) > 0 && !o.TwoDoubles }); k >= 0 {
			h = c.Trials[k]
		}
	}
	if h.Direct {
		_, _, m = cut(h.Pairing)
	}
	return "richardson:1,2+" + m
}

// Right tells to how many decimal digits the last x of a trial was found to be
// right, in the 2-norm and in its worst entry, against a solution kept in two
// doubles; nothing where there is none, or it is not sure enough to tell.
func Right(h trace.History) string {
	n := h.Near
	if n == nil {
		return ""
	}
	digits, ok := rightTo(n.Error, n.Doubt, n.Of == h.Pairing)
	if !ok {
		return ""
	}
	text := "right to " + count(digits, "digit")
	if worst, ok := rightTo(n.Worst, n.WorstDoubt, n.Of == h.Pairing); ok && worst < digits {
		text += fmt.Sprintf(" (%d in its worst entry)", worst)
	}
	return text
}

// rightTo is the number of digits of a measured relative error, where what it
// is measured against is so sure; own: it is measured against itself, rounded.
func rightTo(off, doubt float64, own bool) (digits int, ok bool) {
	if own {
		off = math.Max(off, doubt)
	} else if !(doubt <= surely*off) {
		return 0, false
	}
	const almost = 0.05 // the rounding of a double, 15.95 digits, counts as 16
	return max(0, int(almost-math.Log10(math.Max(off, 0x1p-53)))), !math.IsNaN(off)
}
