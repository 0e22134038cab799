package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

const (
	lastBit   = 4 * 0x1p-53 // componentwise backward error of an answer that is right to the last bit of A's entries
	anyAnswer = 0.1         // relative residual above which x is no answer, however it came about
	byLuck    = 2           // factor in the residual by which the roundings of two x may differ
)

// Utmost returns the trial whose answer is all that double precision gives,
// where none has reached the tolerance with x in one double: x solves a system
// whose entries differ from A's and b's by no more than their own rounding
// (Oettli and Prager 1964), so that storing any x in double precision leaves a
// residual of that size. A matrix that is singular to rounding has no such
// answer, and a solution kept in two doubles that leaves far less once it is
// rounded to one shows that it was not all.
func Utmost(f *inspect.Facts, trials []trace.History) (best trace.History, ok bool) {
	if f == nil || f.Singular.Answer == inspect.Yes || holdsZero(f.Study) {
		return best, false
	}
	for _, h := range trials {
		switch {
		case inDouble(h):
			return best, false
		case h.TwoDoubles:
		case h.Stop.Ended() && h.Componentwise <= lastBit && h.TrueResidual <= anyAnswer && (!ok || h.TrueResidual < best.TrueResidual):
			best, ok = h, true
		}
	}
	if p, paired := InTwo(trials); paired && byLuck*p.Rounded < best.TrueResidual {
		return trace.History{}, false
	}
	return best, ok
}

// holdsZero says that a direction is free to rounding.
func holdsZero(s *inspect.Study) bool {
	return s != nil && len(s.Null) > 0 && s.Null[0].Quotient <= inspect.ZeroLimit
}

// AskFor is a tolerance, of one digit, that can be had where x leaves this
// residual.
func AskFor(residual float64) float64 {
	r := 1.2 * residual
	unit := math.Pow(10, math.Floor(math.Log10(r)))
	return math.Ceil(r/unit) * unit
}

// precision: the tolerance asks for more than double precision can hold.
var precision = Rule{"double-precision", func(c Case) []Finding {
	p, paired := InTwo(c.Trials)
	h, ok := Utmost(c.Facts, c.Trials)
	switch {
	case paired && p.Rounded <= c.Tol:
		return nil // a double holds it, and was found so
	case ok && h.TrueResidual > c.Tol:
		return []Finding{beyond(c, h, p, paired)}
	case !ok && paired && p.Rounded > byLuck*c.Tol:
		return beyondRounded(c, p)
	}
	return nil
}}

// beyond tells of a tolerance that h misses although its answer is all that one
// double gives; p is what x in two doubles gives, where that is known.
func beyond(c Case, h, p trace.History, paired bool) Finding {
	f := Finding{Weight: Blocker, Certainty: inspect.Measured, Subject: OnSystem,
		Claim: fmt.Sprintf("double precision cannot be counted on for %.0e here: %s solves A to the last bit of its entries, and %.2g is left",
			c.Tol, h.Pairing, h.TrueResidual),
		Advice: fmt.Sprintf("ask for %.1g, or stop by the backward error (--stop backward)", AskFor(h.TrueResidual)),
		Evidence: []Evidence{{Quantity: "componentwise backward error of " + h.Pairing, Value: h.Componentwise, Iteration: h.Iterations},
			{Quantity: "true relative residual", Value: h.TrueResidual, Iteration: h.Iterations}}}
	if right := Right(h); right != "" {
		f.Advice += fmt.Sprintf(": x of %s is %s, measured against x in two doubles", h.Pairing, right)
	}
	if paired {
		f.Claim += fmt.Sprintf("; x in two doubles leaves %.2g, %.2g once rounded to one", p.TrueResidual, p.Rounded)
		f.Evidence = append(f.Evidence, pairEvidence(p)...)
		if h.Near != nil {
			f.Evidence = append(f.Evidence, number("relative error of x of "+h.Pairing+" against it", h.Near.Error, ""),
				number("the same of its worst entry", h.Near.Worst, ""))
		}
		f.Advice += fmt.Sprintf("; for %.0e itself keep x in two doubles: %s", c.Tol, p.Pairing)
		f.Try = []string{p.Pairing}
		return f
	}
	two := twoOf(c, h)
	switch q, ran := find(c, two); {
	case ran && q.Stop.Ended() && len(q.Records) > 0:
		f.Advice += fmt.Sprintf("; x in two doubles does not get there either: %s ends %s at %.2g", two, q.Stop, q.TrueResidual)
	case !ran && !unbuilt(c, two):
		f.Try = []string{two}
		f.Advice += fmt.Sprintf("; whether x in two doubles reaches %.0e, %s tells", c.Tol, two)
	}
	return f
}

// beyondRounded tells the same where only x in two doubles is known.
func beyondRounded(c Case, p trace.History) []Finding {
	if f := c.Facts; f == nil || f.Singular.Answer == inspect.Yes || holdsZero(f.Study) || anyInDouble(c.Trials) {
		return nil
	}
	return []Finding{{Weight: Blocker, Certainty: inspect.Measured, Subject: OnSystem,
		Claim: fmt.Sprintf("double precision cannot be counted on for %.0e here: %s keeps x in two doubles and leaves %.2g, %.2g once rounded to one",
			c.Tol, p.Pairing, p.TrueResidual, p.Rounded),
		Advice: fmt.Sprintf("ask for %.1g, or stop by the backward error (--stop backward); for %.0e itself keep x in two doubles",
			AskFor(byLuck*p.Rounded), c.Tol),
		Evidence: pairEvidence(p)}}
}

func pairEvidence(p trace.History) []Evidence {
	return []Evidence{{Quantity: "true relative residual of x in two doubles, " + p.Pairing, Value: p.TrueResidual, Iteration: p.Iterations},
		{Quantity: "the same of that x rounded to one double", Value: p.Rounded, Iteration: p.Iterations}}
}
