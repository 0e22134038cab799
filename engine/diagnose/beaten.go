package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

const (
	beatFactor = 1.25  // faster by this factor
	beatLeast  = 0.005 // and by so many seconds: below, the clock decides nothing
)

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
	f := Finding{Weight: Drag, Certainty: inspect.Measured, Subject: today.Pairing, Try: []string{best.Pairing},
		Advice: "use " + best.Pairing,
		Evidence: []Evidence{number("own time today", today.OwnTime.Seconds(), "s"),
			number("own time of "+best.Pairing, best.OwnTime.Seconds(), "s"),
			number("iterations today", float64(today.Iterations), ""),
			number("iterations of "+best.Pairing, float64(best.Iterations), "")}}
	if !solved(*today) {
		at := ""
		if !math.IsNaN(today.TrueResidual) { // a set-up that broke down has none
			at = " at " + num(today.TrueResidual)
		}
		f.Claim = fmt.Sprintf("today's pairing ends %s%s; %s reaches the target in %s and %s",
			today.Stop, at, best.Pairing, steps(best.Iterations), seconds(best.OwnTime.Seconds()))
		return []Finding{f}
	}
	t, b := today.OwnTime.Seconds(), best.OwnTime.Seconds()
	if t < beatFactor*b || t-b < beatLeast || !Apart(best, *today, 0) {
		return nil
	}
	f.Claim = fmt.Sprintf("today's pairing takes %s and %s; %s takes %d and %s: %.1f times faster",
		steps(today.Iterations), seconds(t), best.Pairing, best.Iterations, seconds(b), t/b)
	return []Finding{f}
}}
