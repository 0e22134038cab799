package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
)

const (
	goodGuess   = 0.1 // of ||b||: from here on a word on what the tolerance is relative to
	betterGuess = 0.9 // of ||b||: what a multiple of the guess must come down to
)

// guess: the starting guess is worse than zero, and makes a rule relative to the
// first residual ask for less; or good, while the rule is
// relative to the first residual and asks for the same gain all the same.
var guess = Rule{"starting-guess", func(c Case) []Finding {
	g := c.Facts.Guess
	if g == nil {
		return nil
	}
	f := Finding{Certainty: inspect.Measured, Subject: OnSystem,
		Evidence: []Evidence{{Quantity: "||b-Ax0||/||b||", Value: g.Residual, Iteration: 0}}}
	switch {
	case g.Residual > 1:
		f.Weight = Drag
		f.Claim = fmt.Sprintf("the starting guess is worse than none: ||b-Ax0||/||b|| = %s, zero has 1", num(g.Residual))
		f.Advice = "start from zero"
		if c.StopBy == "initial" {
			f.Claim += fmt.Sprintf("; and the rule is relative to it, so that %.0e of it is %s of b", c.Tol, num(c.Tol*g.Residual))
			f.Advice = "start from zero, and stop relative to b (--stop rhs): what meets the rule from here need not be near an answer"
		} else if g.Scaled < betterGuess {
			f.Claim += fmt.Sprintf("; scaled by %s it has %s", num(g.Scale), num(g.Scaled))
			f.Advice = fmt.Sprintf("start from %s x0, or from zero", num(g.Scale))
			f.Evidence = append(f.Evidence, number("best multiple of x0: b'Ax0/||Ax0||^2", g.Scale, ""),
				number("||b-Ax0||/||b|| with it", g.Scaled, ""))
			for _, h := range c.Trials {
				if prep, _, _ := cut(h.Pairing); prep == "" {
					f.Try = append(f.Try, "rescale/"+h.Pairing)
					break
				}
			}
		}
	case g.Residual < goodGuess && c.StopBy == "initial":
		f.Weight = Drag
		f.Claim = fmt.Sprintf("the starting guess has ||b-Ax0||/||b|| = %s, and the rule is relative to it: %.0e of it is %.0e of b",
			num(g.Residual), c.Tol, c.Tol*g.Residual)
		f.Advice = "stop relative to b: --stop rhs; then a good guess saves iterations"
	default:
		return nil
	}
	return []Finding{f}
}}
