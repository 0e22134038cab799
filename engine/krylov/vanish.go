package krylov

import (
	"math"

	"dwindle/engine/trace"
)

// lost says whether the cosine of a denominator is zero for every purpose, or
// undefined. A denominator counts as vanished only when it is beyond any use:
// within u² of the product of the norms it is made of. One that is merely
// rounding (within u) is divided by all the same, as codes do: x and r stay
// consistent, and the iteration often recovers.
func lost(c float64) bool { return !(math.Abs(c) > unit*unit) || !finite(c) }

// vanished ends the trial: the cosine of a denominator is zero or undefined.
func (c *core) vanished(quantity string, cosine float64) (trace.Reading, error) {
	switch {
	case !finite(cosine):
		return c.overflow(quantity, cosine)
	case c.last <= exact*c.first:
		return c.ended()
	}
	return c.broken(quantity, cosine)
}

// settled says whether a residual, beside the largest one so far, is zero to
// rounding at once, from a step that began with a residual far above that:
// what it is made of is then noise, and the next step would divide noise by
// noise.
func settled(now, before, peak float64) bool { return now <= 4*unit*peak && now <= 1e-8*before }
