package run

import (
	"context"
	"math"

	"dwindle/engine/linear"
)

// counted counts the uses of what it wraps and keeps its abilities. While a
// context is set and done it answers with a number that is not one, which
// every method takes for the end: so a long Begin can be cancelled.
type counted struct {
	inner linear.Applier
	n     int // order
	uses  uint32
	ctx   context.Context // during Begin; nil afterwards
}

func (c *counted) Apply(dst, x []float64) {
	c.uses++
	if c.cancelled() {
		dst[0] = math.NaN()
		return
	}
	c.inner.Apply(dst, x)
}

func (c *counted) cancelled() bool { return c.ctx != nil && c.ctx.Err() != nil }

func (c *counted) Dims() (rows, cols int) { return c.n, c.n }

func (c *counted) Unwrap() any { return c.inner }

// ApplyDot counts and passes on; As finds it only where inner has it.
func (c *counted) ApplyDot(dst, x []float64) float64 {
	c.uses++
	if c.cancelled() {
		dst[0] = math.NaN()
		return math.NaN()
	}
	return linear.ApplyDot(c.inner, dst, x)
}

// ApplyT counts and passes on; As finds it only where inner has it.
func (c *counted) ApplyT(dst, x []float64) {
	c.uses++
	t, _ := linear.As[linear.Transposer](c.inner)
	t.ApplyT(dst, x)
}

// PairResidual counts and passes on; As finds it only where inner has it.
func (c *counted) PairResidual(dst, x, low, b []float64) float64 {
	c.uses++
	if c.cancelled() {
		dst[0] = math.NaN()
		return math.NaN()
	}
	r, _ := linear.As[linear.Refiner](c.inner)
	return r.PairResidual(dst, x, low, b)
}

// Lacks answers linear.As for the abilities that count.
func (c *counted) Lacks(want any) bool {
	var has bool
	switch want.(type) {
	case *linear.DotApplier:
		_, has = linear.As[linear.DotApplier](c.inner)
	case *linear.Refiner:
		_, has = linear.As[linear.Refiner](c.inner)
	case *linear.Transposer:
		_, has = linear.As[linear.Transposer](c.inner)
	default:
		return false
	}
	return !has
}
