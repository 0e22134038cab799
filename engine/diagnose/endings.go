package diagnose

import (
	"fmt"
	"strconv"
	"strings"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// breakdown: a quantity the method divides by vanished; or BiCGStab reached
// its answer in the half step, which looks like one and is none.
var breakdown = Rule{"breakdown", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		for _, e := range events(h, trace.HalfStep) {
			out = append(out, Finding{Weight: Note, Certainty: inspect.Measured, Subject: h.Pairing,
				Claim:    fmt.Sprintf("reached the answer in the half step of iteration %d (||s|| = %s of ||b||): no breakdown, but a code that divides by t't stops with one", e.Iter, num(e.Value)),
				Advice:   "test ||s|| before the second half step",
				Evidence: []Evidence{{Quantity: "||s||", Value: e.Value, Unit: "of ||b||", Iteration: int(e.Iter)}}})
		}
		if h.Stop != trace.BrokeDown && !strings.Contains(h.Reason, trace.BrokeDown.String()) {
			continue
		}
		for _, e := range events(h, trace.Breakdown) {
			out = append(out, Finding{Weight: Drag, Certainty: inspect.Measured, Subject: h.Pairing,
				Claim:    fmt.Sprintf("broke down at iteration %d: %s = %s (normalised) vanished", e.Iter, e.Quantity, num(e.Value)),
				Advice:   remedy(e.Quantity),
				Try:      instead(c.Facts),
				Evidence: []Evidence{{Quantity: e.Quantity, Value: e.Value, Iteration: int(e.Iter)}}})
		}
	}
	return out
}}

func remedy(quantity string) string {
	switch quantity {
	case "rho", "rhat·v", "rhat'v":
		return "restart with a new shadow vector, or use gmres"
	case "omega":
		return "the one-step stabiliser fails near an imaginary spectrum: use gmres"
	}
	return "use a method that does not divide by it"
}

// divergence: the true residual ran away, or stopped being a number.
var divergence = Rule{"divergence", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		if h.Stop != trace.Diverged {
			continue
		}
		out = append(out, Finding{Weight: Drag, Certainty: inspect.Measured, Subject: h.Pairing,
			Claim:    fmt.Sprintf("diverged: %s; its best true residual was %s", h.Reason, num(h.BestTrue)),
			Advice:   "use a method whose residual cannot grow",
			Try:      instead(c.Facts),
			Evidence: []Evidence{{Quantity: "true relative residual", Value: h.TrueResidual, Iteration: h.Iterations}}})
	}
	return out
}}

// flatRun is how many flat cycles in a row are worth a word even where a limit
// ended the trial first, and flat the factor that makes one.
const (
	flatRun = 5
	flat    = 0.999
)

// stagnation: a restarted method makes no way, cycle after cycle.
var stagnation = Rule{"restart-stagnation", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		cycles := events(h, trace.Restart)
		run := 0
		for run < len(cycles) && cycles[len(cycles)-1-run].Value > flat {
			run++
		}
		if run < flatRun || !h.Stop.Ended() || solved(h) || h.FloorHits > 0 || outOfReach(c) {
			continue
		}
		last := cycles[len(cycles)-1]
		prep, solver, m := cut(h.Pairing)
		f := Finding{Weight: Drag, Certainty: inspect.Measured, Subject: h.Pairing,
			Claim: fmt.Sprintf("stands still at %s: each of its last %d cycles left more than %g of the residual",
				num(h.TrueResidual), run, flat),
			Advice:   "every restart throws away what the cycle had gathered: a longer cycle, or a preconditioner",
			Evidence: []Evidence{{Quantity: "factor of the last cycle", Value: last.Value, Iteration: int(last.Iter)}}}
		if longer, ok := doubled(solver); ok {
			f.Try = []string{prep + longer + "+" + m}
		}
		if length, known := restartOf(h); known {
			if keep, advice, ok := deflatedRestart(h, length); ok {
				f.Advice += "; or " + advice
				f.Try = append([]string{keep}, f.Try...)
			}
		}
		out = append(out, f)
	}
	return out
}}

// doubled is the solver with four times the restart length.
func doubled(solver string) (string, bool) {
	name, arg, _ := strings.Cut(solver, ":")
	m, err := strconv.Atoi(arg)
	if err != nil || m >= 500 {
		return "", false
	}
	return fmt.Sprintf("%s:%d", name, min(4*m, 500)), true
}

// floor: the trial has reached the accuracy that rounding allows it, and the
// tolerance lies below. A method outside its assumptions parts from its
// residual for another reason, and is told so.
var floor = Rule{"accuracy-floor", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		if h.FloorHits < 5 || solved(h) {
			continue
		}
		if _, outside := assumption(c.Facts, h); outside {
			continue
		}
		f := Finding{Weight: Drag, Certainty: inspect.Measured, Subject: h.Pairing,
			Claim: fmt.Sprintf("at its accuracy floor: the true residual stays at %s while its own number falls to %s; rounding allows it no %.0e",
				num(h.BestTrue), num(h.Residual), c.Tol),
			Advice: fmt.Sprintf("ask for no less than %.0e, or start again from this answer with a fresh residual", 2*h.BestTrue),
			Evidence: []Evidence{{Quantity: "smallest true residual", Value: h.BestTrue, Iteration: h.Iterations},
				{Quantity: "u ||A|| max||x|| / ||b||", Value: h.Floor, Iteration: none}}}
		if deeper, ok := reached(c, h.BestTrue/2); ok {
			f.Claim += fmt.Sprintf("; %s gets to %s", deeper.Pairing, num(deeper.BestTrue))
			f.Try = []string{deeper.Pairing}
		}
		out = append(out, f)
	}
	return out
}}

// reached finds the trial with the smallest true residual below limit.
func reached(c Case, limit float64) (best trace.History, ok bool) {
	for _, h := range c.Trials {
		if h.BestTrue < limit && (!ok || h.BestTrue < best.BestTrue) {
			best, ok = h, true
		}
	}
	return best, ok
}
