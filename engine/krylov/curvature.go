package krylov

import (
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// maxTurns bounds how many turns of the curvature's sign one trial reports.
const maxTurns = 64

// curvature watches the sign of pᵀAp.
type curvature struct {
	negative bool // the last one was
	turns    int
}

// watch records an event when pᵀAp (given as pq) turns from positive to
// negative, or is zero: the Rayleigh quotient pᵀAp/pᵀp. The rows that carry
// it, and whether rounding could explain it, are found off the clock through
// Curver.
func (w *curvature) watch(c *core, p []float64, pq float64) {
	turned := pq <= 0 && !w.negative
	w.negative = pq <= 0
	if !turned || w.turns >= maxTurns {
		return
	}
	w.turns++
	kind := trace.NegativeCurvature
	if pq == 0 {
		kind = trace.ZeroCurvature
	}
	c.event(kind, "p'Ap/p'p", pq/linear.Dot(p, p))
}
