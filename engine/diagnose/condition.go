package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
)

// illFrom is the condition, after equilibration, from which a system is called
// ill-conditioned: methods without a strong preconditioner need hundreds of
// steps, and restarted ones hardly gain.
const illFrom = 1e5

// illConditioned: A is ill-conditioned, and scaling does not help it. Silent
// where a few nearly free directions are told to make the condition.
var illConditioned = Rule{"ill-conditioned", func(c Case) []Finding {
	f := c.Facts
	if f.Study == nil || f.Study.Equilibrated == nil || f.Singular.Answer == inspect.Yes || len(f.Study.Null) > 0 {
		return nil
	}
	x := f.Study.Equilibrated
	if !(x.Condition >= illFrom) || math.IsInf(x.Condition, 0) {
		return nil
	}
	g := Finding{Weight: Note, Certainty: x.Certainty, Subject: OnSystem,
		Claim:    fmt.Sprintf("A is ill-conditioned, %s in the %s-norm once rows and columns are equilibrated, and scaling takes no more away", num(x.Condition), x.Norm),
		Advice:   "a strong preconditioner, or a direct solve",
		Evidence: []Evidence{number("condition after equilibration", x.Condition, "")}}
	for _, h := range c.Trials {
		if prep, _, m := cut(h.Pairing); prep == "" && m == "none" && failed(h) {
			g.Claim += fmt.Sprintf("; %s ends %s at %s", h.Pairing, h.Stop, num(h.TrueResidual))
			break
		}
	}
	if best, ok := quickest(c); ok {
		g.Try = []string{best.Pairing}
		g.Advice += fmt.Sprintf(": %s has solved the system in %s and %s", best.Pairing, steps(best.Iterations), seconds(best.OwnTime.Seconds()))
	}
	return []Finding{g}
}}
