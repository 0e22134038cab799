package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// lostDefiniteness: a direction of negative curvature was met, and its
// Rayleigh quotient lies below its rounding bound.
var lostDefiniteness = Rule{"negative-curvature", func(c Case) (out []Finding) {
	if c.Facts.NegativeDefinite.Answer == inspect.Yes {
		return nil
	}
	for _, h := range c.Trials {
		for _, e := range events(h, trace.NegativeCurvature) {
			if !e.Proved() {
				continue
			}
			out = append(out, curvature(c.Facts, h, e))
			break
		}
	}
	return out
}}

func curvature(f *inspect.Facts, h trace.History, e trace.Event) Finding {
	rows, part := carriers(e.Rows)
	g := Finding{Weight: Blocker, Certainty: inspect.Proved, Subject: h.Pairing,
		Claim: fmt.Sprintf("A has a negative eigenvalue, at most %s, carried %.0f %% by %s (met at it %d)",
			num(e.Value), 100*part, f.Names.List(rows, 6), e.Iter),
		Advice: "look at these rows for a wrong sign, a missing support or a load past its limit; until then minres applies, cg does not",
		Try:    instead(f),
		Evidence: []Evidence{
			{Quantity: "p'Ap/p'p", Value: e.Value, Iteration: int(e.Iter), Rows: rows},
			{Quantity: "rounding bound", Value: e.Scale, Iteration: int(e.Iter)},
		}}
	if -e.Value <= e.Scale+e.Slack {
		g.Certainty = inspect.Measured
		g.Claim += fmt.Sprintf("; the file has %d digits, and what they leave open is %s", f.Digits, num(e.Slack))
		g.Advice = "yours may not be indefinite: write 17 digits and run again"
	}
	return g
}

// notDefinite: a symmetric A whose diagonal is positive, or all but a few entries
// of it, is not positive definite all the same. Silent where a mechanism says
// why.
var notDefinite = Rule{"not-definite", func(c Case) []Finding {
	f := c.Facts
	if f.Symmetric.Answer != inspect.Yes || f.PositiveDefinite.Answer != inspect.No || semidefinite(f) ||
		f.DiagZero+f.DiagMissing > 0 || mechanism.Judge(c) != nil {
		return nil
	}
	if f.DiagNegative > 0 {
		return c.oddSigns()
	}
	g := Finding{Weight: Drag, Certainty: f.PositiveDefinite.Certainty, Subject: OnSystem,
		Claim:  "A has a positive diagonal, yet is not positive definite: " + f.PositiveDefinite.Why,
		Advice: "if it should be definite, look at the rows named; if not, use minres, and no ic or ssor",
		Try:    instead(f),
		Evidence: []Evidence{{Quantity: "value behind it", Value: f.PositiveDefinite.Value, Iteration: none,
			Rows: f.PositiveDefinite.Rows}}}
	if f.PositiveDefinite.Certainty != inspect.Proved && f.Delta > 0 {
		g.Advice = fmt.Sprintf("the file has %d digits; yours may not be indefinite: write 17 digits and run again", f.Digits)
	}
	return []Finding{g}
}}

// fewSigns is the part of the rows up to which those whose diagonal has another
// sign than that of all others are few.
const fewSigns = 0.02

// oddSigns tells of few diagonal entries of another sign than all others: a
// quadratic form of both signs, proved by two unit vectors.
func (c Case) oddSigns() []Finding {
	f, is, others := c.Facts, "negative", "positive"
	few := f.DiagNegative
	if few > f.DiagPositive {
		few, is, others = f.DiagPositive, others, is
	}
	if few == 0 || float64(few) > fewSigns*float64(f.N) {
		return nil
	}
	return []Finding{{Weight: Drag, Certainty: inspect.Proved, Subject: OnSystem,
		Claim: fmt.Sprintf("%d of %d diagonal entries %s %s (%s), all others are %s: A is not definite",
			few, f.N, verb(few, "is", "are"), is, c.list(f.DiagRows, 6), others),
		Advice:   fmt.Sprintf("look at %s for a wrong sign; if it is meant so, use minres, and no ic or ssor", verb(few, "this row", "these rows")),
		Try:      instead(f),
		Evidence: []Evidence{{Quantity: is + " diagonal entries", Value: float64(few), Unit: fmt.Sprintf("of %d", f.N), Iteration: none, Rows: f.DiagRows}}}}
}

// oppositeSign: −A is positive definite.
var oppositeSign = Rule{"opposite-sign", func(c Case) []Finding {
	f := c.Facts
	if f.NegativeDefinite.Answer != inspect.Yes {
		return nil
	}
	return []Finding{{Weight: Drag, Certainty: f.NegativeDefinite.Certainty, Subject: OnSystem,
		Claim:  "A is negative definite, the opposite sign convention: " + f.NegativeDefinite.Why,
		Advice: "solve -A x = -b: then cg, ic and ssor apply as they are",
		Evidence: []Evidence{{Quantity: "diagonal entries below zero", Value: float64(f.DiagNegative),
			Iteration: none}}}}
}}
