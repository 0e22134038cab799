package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// beatFactor is the gain from which today's pairing is called beaten.
const beatFactor = 1.25

// beaten: today's pairing is slower than another, or misses where another
// reaches.
var beaten = Rule{"today-beaten", func(c Case) []Finding {
	var today *trace.History
	for i := range c.Trials {
		if c.Trials[i].Today {
			today = &c.Trials[i]
		}
	}
	best, ok := quickest(c)
	if today == nil || !ok || best.Pairing == today.Pairing || !today.Stop.Ended() {
		return nil
	}
	t, b := today.OwnTime.Seconds(), best.OwnTime.Seconds()
	if g := c.Gain; g.Times > 0 {
		t, b = g.Today, g.Best
	}
	f := Finding{Weight: Drag, Certainty: inspect.Measured, Subject: today.Pairing, Try: []string{best.Pairing},
		Advice: "use " + best.Pairing,
		Evidence: []Evidence{number("time today", t, "s"),
			number("time of "+best.Pairing, b, "s"),
			number("iterations today", float64(today.Iterations), ""),
			number("iterations of "+best.Pairing, float64(best.Iterations), "")}}
	if !solved(*today) {
		at := ""
		if !math.IsNaN(today.TrueResidual) { // a set-up that broke down has none
			at = " at " + num(today.TrueResidual)
		}
		f.Claim = fmt.Sprintf("today's pairing ends %s%s; %s reaches the target in %s and %s",
			today.Stop, at, best.Pairing, steps(best.Iterations), seconds(b))
		return []Finding{f}
	}
	g := c.Gain
	if !(g.Times >= beatFactor) || !Apart(best, *today, 0) {
		return nil
	}
	what := fmt.Sprintf("today's pairing takes %s and %s; %s takes %d and %s", steps(today.Iterations), seconds(t), best.Pairing, best.Iterations, seconds(b))
	if g.ByWork {
		f.Weight, f.Certainty = Note, inspect.Estimated
		f.Claim = fmt.Sprintf("%s: %.1f times less work by count, which the clock does not tell", what, g.Times)
	} else {
		f.Claim = fmt.Sprintf("%s: %.2g times faster", what, g.Times)
	}
	return []Finding{f}
}}
