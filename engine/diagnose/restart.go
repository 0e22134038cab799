package diagnose

import (
	"fmt"
	"math"
	"math/cmplx"
	"strconv"
	"strings"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

const (
	lateCycles = 5    // of the last whole cycles the factor is taken
	restarting = 4    // whole cycles from which a restart is worth a word
	worthHalf  = 0.6  // of the iterations: what longer cycles must come below
	longest    = 200  // restart length that is proposed
	nearZero   = 0.02 // of the largest harmonic Ritz value: the smallest is near zero
	slowPart   = 0.1  // of it: values below come last
	realPart   = 1e-6 // of a value that its imaginary part may be
)

// restartLength: gmres pays for its restarts, by the factor of its last
// cycles, where its harmonic Ritz values are real.
var restartLength = Rule{"restart-length", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		m, ok := restartOf(h)
		if !ok || !h.Stop.Ended() || h.Stop == trace.Outpaced || h.Stop == trace.Cancelled || outOfReach(c) {
			continue
		}
		factor := cycleFactor(h, m)
		smallest, known := realHarmonic(h)
		if !(factor < flat) || !known {
			continue
		}
		now := cycles(m, m, factor, c.Tol)
		if solved(h) {
			now = float64(h.Iterations)
		}
		long := min(4*m, longest)
		with := cycles(long, m, factor, c.Tol)
		if long <= m || !(with <= worthHalf*now) {
			continue
		}
		prep, _, p := cut(h.Pairing)
		try := fmt.Sprintf("%sgmres:%d+%s", prep, long, p)
		f := Finding{Weight: Drag, Certainty: inspect.Estimated, Subject: h.Pairing,
			Advice: "a longer cycle takes more memory and fewer products",
			Try:    []string{try},
			Evidence: []Evidence{number("factor of a cycle", factor, ""),
				number("smallest harmonic Ritz value", smallest, "")}}
		if solved(h) {
			f.Claim = fmt.Sprintf("pays for its restarts: cycles of %d would need about %.0f its or fewer in place of %.0f", long, with, now)
			f.Evidence = append(f.Evidence, number("iterations with longer cycles, at most", with, "predicted"))
			f.Predicts = []Predicted{{Pairing: try, Quantity: "iterations, at most", Value: with}}
		} else {
			f.Claim = fmt.Sprintf("pays for its restarts: at this rate it would need about %.2g its", now)
			f.Evidence = append(f.Evidence, number("iterations at this rate", now, "predicted"))
		}
		f.Claim += fmt.Sprintf("; a cycle of %d leaves %s of the residual", m, num(factor))
		if keep, advice, ok := deflatedRestart(h, m); ok {
			f.Advice += "; or " + advice
			f.Try = append(f.Try, keep)
		}
		out = append(out, f)
	}
	return out
}}

// restartOf is the restart length of a gmres trial with enough whole cycles.
func restartOf(h trace.History) (int, bool) {
	_, solver, _ := cut(h.Pairing)
	name, arg, _ := strings.Cut(solver, ":")
	m, err := strconv.Atoi(arg)
	return m, name == "gmres" && err == nil && m > 1 && h.Iterations >= restarting*m && len(h.Records) > h.Iterations
}

// cycleFactor is the geometric mean of what the last whole cycles left of the
// residual.
func cycleFactor(h trace.History, m int) float64 {
	whole := h.Iterations / m
	n := min(whole, lateCycles)
	return math.Pow(h.Records[whole*m].Residual/h.Records[(whole-n)*m].Residual, 1/float64(n))
}

// cycles foretells how many steps cycles of some length take to reduce the
// residual by tol, from the factor of cycles of length m: as Chebyshev
// polynomials on real intervals would, 1/T_m = factor (Saad, Iterative Methods
// for Sparse Linear Systems, §6.11). What the iteration gains beyond them is
// left out, so that it is told as an upper estimate.
func cycles(length, m int, factor, tol float64) float64 {
	step := math.Acosh(1/factor) / float64(m)
	if whole := math.Cosh(step * float64(length)); whole*tol < 1 {
		return math.Ceil(math.Log(1/tol) / math.Log(whole) * float64(length))
	}
	return math.Ceil(math.Acosh(1/tol) / step)
}

// realHarmonic returns the smallest magnitude of the harmonic Ritz values
// where all are real.
func realHarmonic(h trace.History) (smallest float64, ok bool) {
	for _, v := range h.Harmonic {
		if math.Abs(imag(v)) > realPart*cmplx.Abs(v) {
			return 0, false
		}
	}
	if len(h.Harmonic) == 0 {
		return 0, false
	}
	return cmplx.Abs(h.Harmonic[0]), true
}

// deflatedRestart proposes to carry the slow part over the restart: where all
// harmonic Ritz values are positive and the smallest is near zero, it is what
// each restart throws away.
func deflatedRestart(h trace.History, m int) (try, advice string, ok bool) {
	smallest, ok := realHarmonic(h)
	if !ok {
		return "", "", false
	}
	largest, slow := cmplx.Abs(h.Harmonic[len(h.Harmonic)-1]), 0
	for _, v := range h.Harmonic {
		if real(v) <= 0 {
			return "", "", false
		}
		if real(v) < slowPart*largest {
			slow++
		}
	}
	if smallest > nearZero*largest {
		return "", "", false
	}
	k := max(2, min(slow, m/3))
	prep, _, p := cut(h.Pairing)
	return fmt.Sprintf("%sgmresdr:%d,%d+%s", prep, m, k, p),
		fmt.Sprintf("carry the slow part over the restart: %s near zero (from %s, the largest is %s) %s thrown away by each",
			count(slow, "harmonic Ritz value"), num(smallest), num(largest), verb(slow, "is", "are")), true
}
