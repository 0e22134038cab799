package diagnose

import (
	"fmt"
	"strconv"
	"strings"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

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
		if run < flatRun || !h.Stop.Ended() || solved(h) || h.FloorHits > 0 {
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
		if other, ok := otherLength(c, h); ok {
			f.Claim += fmt.Sprintf("; %s solves it in %s", other.Pairing, steps(other.Iterations))
			f.Try = []string{other.Pairing}
		}
		if s := c.Facts.Study; s != nil && s.Normality != nil && s.Normality.FieldHoldsZero {
			f.Claim += fmt.Sprintf("; the field of values of A holds 0 (%s to %s), so that no short cycle is sure to gain",
				num(s.Normality.FieldMin), num(s.Normality.FieldMax))
		}
		out = append(out, f)
	}
	return out
}}

// otherLength is a trial that solved the system with the same method and
// preconditioner and another restart length; a shorter one may do so (Embree,
// SIAM Rev. 45 (2003) 259-266).
func otherLength(c Case, h trace.History) (trace.History, bool) {
	prep, solver, m := cut(h.Pairing)
	name, _, _ := strings.Cut(solver, ":")
	for _, o := range c.Trials {
		p, s, q := cut(o.Pairing)
		if n, _, _ := strings.Cut(s, ":"); solved(o) && n == name && p == prep && q == m {
			return o, true
		}
	}
	return trace.History{}, false
}

// doubled is the solver with four times the restart length.
func doubled(solver string) (string, bool) {
	name, arg, _ := strings.Cut(solver, ":")
	m, err := strconv.Atoi(arg)
	if err != nil || m >= 500 {
		return "", false
	}
	return fmt.Sprintf("%s:%d", name, min(4*m, 500)), true
}

// ofRounding is how many times the level of rounding a residual may be for
// rounding alone to account for it.
const ofRounding = 10

// floor: the true residual has stopped while the method's own number falls on.
// Where it has come down to the level of rounding, that is the accuracy that
// the method can have; far above it, the recurrence has lost the residual. A
// method outside its assumptions parts from its residual for another reason,
// and is told so.
var floor = Rule{"accuracy-floor", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		if h.FloorHits < 5 || solved(h) || missed(h) != nil && normMet(c, h) {
			continue
		}
		f := Finding{Weight: Drag, Certainty: inspect.Measured, Subject: h.Pairing,
			Evidence: []Evidence{{Quantity: "smallest true residual", Value: h.BestTrue, Iteration: h.Iterations}}}
		f.Claim, f.Advice = stopped(c, h)
		if level := h.Attainable(); level > 0 {
			f.Evidence = append(f.Evidence, Evidence{Quantity: "u ||A|| max||x|| / ||b||", Value: level, Iteration: none})
		}
		if at, ok := parting(h); ok {
			f.Claim += fmt.Sprintf("; the two part at it %d, and nothing below %s is real", at, num(h.BestTrue))
			f.Evidence = append(f.Evidence, Evidence{Quantity: "true residual over own number", Value: parts, Iteration: at})
		}
		if at := bottom(h); at > 0 && h.Iterations-at > h.Iterations/10 {
			f.Claim += fmt.Sprintf("; there since it %d: the other %d its are noise", at, h.Iterations-at)
		}
		if deeper, ok := reached(c, h.BestTrue/2); ok {
			f.Claim += fmt.Sprintf("; %s gets to %s", deeper.Pairing, num(deeper.BestTrue))
			f.Try = []string{deeper.Pairing}
		}
		out = append(out, f)
	}
	return out
}}

// stopped says where the true residual stopped, why, and what is to be done.
func stopped(c Case, h trace.History) (claim, advice string) {
	where := fmt.Sprintf("stays at %s while its own number falls to %s", num(h.BestTrue), num(h.Residual))
	if h.BestTrue > ofRounding*h.Floor {
		return fmt.Sprintf("its recurrence has lost the true residual, which %s; the level of rounding is %s", where, num(h.Floor)),
			"start again from this answer with a fresh residual, or take another method"
	}
	return fmt.Sprintf("at its accuracy floor: the true residual %s; rounding allows it no %.0e", where, c.Tol),
		fmt.Sprintf("ask for no less than %.0e, or start again from this answer with a fresh residual", 2*h.BestTrue)
}

// parts is the ratio of the true residual to the method's own number from which
// the two curves have parted for good.
const parts = 2

// parting is the first audit from which on the true residual stays above the
// method's own number, where that is a residual in the same norm.
func parting(h trace.History) (iter int, ok bool) {
	if h.Norm != trace.TwoNorm {
		return 0, false
	}
	for _, r := range h.Records {
		switch {
		case !r.Audited():
		case !(r.Audit > parts*r.Residual):
			ok = false
		case !ok:
			iter, ok = int(r.Iter), true
		}
	}
	return iter, ok
}

// bottom is the first audit within twice the smallest true residual.
func bottom(h trace.History) int {
	for _, r := range h.Records {
		if r.Audited() && r.Audit <= 2*h.BestTrue {
			return int(r.Iter)
		}
	}
	return h.Iterations
}

// reached finds the trial with the smallest true residual below limit.
func reached(c Case, limit float64) (best trace.History, ok bool) {
	for _, h := range c.Trials {
		if h.BestTrue < limit && !h.TwoDoubles && (!ok || h.BestTrue < best.BestTrue) {
			best, ok = h, true
		}
	}
	return best, ok
}
