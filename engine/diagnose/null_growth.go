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
		if prep == "project/" || !h.Stop.Ended() || solved(h) || !(last.Audit > regrown*low.Audit) {
			continue
		}
		f := Finding{Weight: Drag, Certainty: inspect.Measured, Subject: h.Pairing,
			Claim: fmt.Sprintf("||b-Ax|| falls to %s of ||b|| at it %d, then grows to %s along the null space of A",
				num(low.Audit), low.Iter, num(last.Audit)),
			Advice: "take the unreachable part out of b, or use a method of minimal residuals and stop it there",
			Try:    projected(c.Facts),
			Evidence: []Evidence{{Quantity: "smallest true residual", Value: low.Audit, Unit: "of ||b||", Iteration: int(low.Iter)},
				{Quantity: "last true residual", Value: last.Audit, Unit: "of ||b||", Iteration: int(last.Iter)}}}
		if c.Facts.Symmetric.Answer == inspect.Yes {
			f.Try = append(f.Try, "minres+none")
		}
		if h.Monotone {
			f.Claim = fmt.Sprintf("||b-Ax|| falls to %s of ||b|| at it %d and grows to %s, which it cannot do in exact arithmetic: x runs off along the null space of A, and what grows is rounding times its size",
				num(low.Audit), low.Iter, num(last.Audit))
			f.Advice = "take the unreachable part out of b, or stop where the residual no longer falls"
			f.Try = projected(c.Facts)
		}
		out = append(out, f)
	}
	return out
}}

// lowest returns the audited record with the smallest residual, and the last.
func lowest(h trace.History) (low, last trace.Record) {
	for _, r := range h.Records {
		if !r.Audited() {
			continue
		}
		if last.Audit == 0 || r.Audit < low.Audit {
			low = r
		}
		last = r
	}
	return low, last
}
