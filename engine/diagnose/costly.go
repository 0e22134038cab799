package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

const (
	costFactor = 1.3  // slower than without by this factor,
	costLeast  = 0.05 // and by at least so many seconds,
	ownCPU     = 0.9  // on a machine that gave the trial this share of its time
)

// costly: a preconditioner costs more time than its iterations save. Silent
// where the machine was busy with something else.
var costly = Rule{"preconditioner-costs-more", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		prep, solver, m := cut(h.Pairing)
		plain, ok := find(c, prep+solver+"+none")
		if m == "none" || !ok || !solved(h) || !solved(plain) || h.CPUShare < ownCPU {
			continue
		}
		with, without := h.OwnTime.Seconds(), plain.OwnTime.Seconds()
		if with < costFactor*without || with-without < costLeast {
			continue
		}
		f := Finding{Weight: Drag, Certainty: inspect.Measured, Subject: h.Pairing,
			Claim: fmt.Sprintf("%s costs more than it saves: %s (set-up %s) for %d its, %s alone %s for %d",
				m, seconds(with), seconds(h.SetupTime.Seconds()), h.Iterations, solver, seconds(without), plain.Iterations),
			Advice: "leave it out",
			Try:    []string{plain.Pairing},
			Evidence: []Evidence{number("own time", with, "s"), number("own time without", without, "s"),
				number("set-up", h.SetupTime.Seconds(), "s")}}
		if sides := payback(h, plain); sides > 0 {
			f.Claim += fmt.Sprintf("; it pays off from %.0f right-hand sides on", sides)
			f.Advice = "leave it out for fewer right-hand sides with one A"
			f.Evidence = append(f.Evidence, number("right-hand sides from which it pays", sides, ""))
		}
		out = append(out, f)
	}
	return out
}}

// payback is the number of right-hand sides from which a trial with the dearer
// set-up is the quicker one; 0 if its solves are no quicker.
func payback(h, plain trace.History) float64 {
	gain := (plain.OwnTime - plain.SetupTime).Seconds() - (h.OwnTime - h.SetupTime).Seconds()
	if gain <= 0 {
		return 0
	}
	return math.Ceil((h.SetupTime - plain.SetupTime).Seconds() / gain)
}
