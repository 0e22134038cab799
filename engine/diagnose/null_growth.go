package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// regrown is how far a residual must grow again, over its smallest, before it
// is laid to the null space.
const regrown = 100

// nullGrowth: on a singular system whose right-hand side is partly out of
// reach, a method that goes on past the reachable part grows along the null
// space.
var nullGrowth = Rule{"null-space-growth", func(c Case) (out []Finding) {
	if !outOfReach(c) {
		return nil
	}
	for _, h := range c.Trials {
		prep, _, _ := cut(h.Pairing)
		low, last := lowest(h)
		if prep == "project/" || !h.Stop.Ended() || solved(h) || !(last.Residual > regrown*low.Residual) {
			continue
		}
		out = append(out, Finding{Weight: Drag, Certainty: inspect.Measured, Subject: h.Pairing,
			Claim: fmt.Sprintf("its residual falls to %s at it %d, then grows to %s along the null space of A",
				num(low.Residual), low.Iter, num(last.Residual)),
			Advice: "take the unreachable part out of b, or use a method of minimal residuals and stop it there",
			Try:    []string{"project/cg+none", "minres+none"},
			Evidence: []Evidence{{Quantity: "smallest residual", Value: low.Residual, Unit: "of ||b||", Iteration: int(low.Iter)},
				{Quantity: "last residual", Value: last.Residual, Unit: "of ||b||", Iteration: int(last.Iter)}}})
	}
	return out
}}

// lowest returns the record with the smallest residual, and the last one.
func lowest(h trace.History) (low, last trace.Record) {
	for i, r := range h.Records {
		if i == 0 || r.Residual < low.Residual {
			low = r
		}
		last = r
	}
	return low, last
}
