package krylov

import (
	"fmt"
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

const (
	unit  = 0x1p-53 // unit roundoff u of a double
	exact = 1e-100  // a residual this small against the first is zero but for its name
)

// core is what every solver of this package shares: the operators, the
// iterate, the count of steps and the events of the present step.
type core struct {
	a     linear.Operator
	m     linear.Applier
	b     []float64 // length n, the caller's
	x     []float64 // length n
	n     int
	plain bool    // M is the identity
	iter  uint32  // steps begun
	first float64 // the first residual
	last  float64 // the residual of the iterate that Solution gives
	ev    [4]trace.Event
	nev   int
}

// begin checks the shapes, takes the operators and copies the guess.
func (c *core) begin(p Problem) error {
	rows, cols := p.A.Dims()
	if rows != cols || len(p.B) != rows || (p.X != nil && len(p.X) != rows) {
		return fmt.Errorf("krylov: a %d x %d matrix with a right-hand side of length %d and a guess of length %d",
			rows, cols, len(p.B), len(p.X))
	}
	_, plain := linear.As[linear.Identity](p.M)
	*c = core{a: p.A, m: p.M, b: p.B, n: rows, plain: plain, x: linear.Bulk[float64](rows)}
	copy(c.x, p.X)
	return nil
}

// residual writes b − A x to r and returns its 2-norm. A nil guess costs no
// product.
func (c *core) residual(r, guess []float64) float64 {
	if guess == nil {
		copy(r, c.b)
		return linear.Norm2(r)
	}
	return linear.Residual(r, c.a, c.x, c.b)
}

// precondition writes M⁻¹ r to z and returns rᵀ z.
func (c *core) precondition(z, r []float64) float64 { return linear.ApplyDot(c.m, z, r) }

// next opens a step.
func (c *core) next() {
	c.iter++
	c.nev = 0
}

// event records what happened; there is room for four in a step.
func (c *core) event(kind trace.Kind, quantity string, value float64) *trace.Event {
	e := &c.ev[c.nev]
	*e = trace.Event{Iter: c.iter, Kind: kind, Quantity: quantity, Value: value}
	c.nev++
	return e
}

// reading reports the step.
func (c *core) reading(alpha, beta float64, done bool) trace.Reading {
	r := trace.Reading{Residual: c.last, Alpha: alpha, Beta: beta, Done: done}
	if c.nev > 0 {
		r.Events = c.ev[:c.nev]
	}
	return r
}

// start reports the first residual.
func (c *core) start(res float64) trace.Reading {
	if !finite(res) {
		c.event(trace.NonFinite, "|b-Ax|", res)
	}
	c.first, c.last = res, res
	return c.reading(math.NaN(), math.NaN(), res == 0 || !finite(res))
}

// broken ends the trial: quantity vanished, with its normalised value. The
// iterate stays the last one.
func (c *core) broken(quantity string, value float64) (trace.Reading, error) {
	c.event(trace.Breakdown, quantity, value)
	return c.ended()
}

// overflow ends the trial: quantity is not a finite number.
func (c *core) overflow(quantity string, value float64) (trace.Reading, error) {
	c.event(trace.NonFinite, quantity, value)
	return c.ended()
}

// refuse ends the trial because rz = rᵀz with z = M⁻¹r is not positive, and
// the method takes its square root.
func (c *core) refuse(quantity string, rz float64, r, z []float64) (trace.Reading, error) {
	if !finite(rz) {
		return c.overflow(quantity, rz)
	}
	value := cosine(rz, linear.Norm2(r), linear.Norm2(z))
	if rz < 0 {
		c.event(trace.PrecondIndefinite, quantity, value)
	}
	return c.broken(quantity, value)
}

// ended ends the trial with the last iterate.
func (c *core) ended() (trace.Reading, error) {
	return c.reading(math.NaN(), math.NaN(), true), nil
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }

// root returns ‖r‖₂ from rᵀr, measured again where the squares over- or
// underflowed.
func root(rr float64, r []float64) float64 {
	if rr > 1e-280 && rr < 1e300 {
		return math.Sqrt(rr)
	}
	return linear.Norm2(r)
}

// cosine returns xy/(‖x‖‖y‖), 0 where a vector is 0.
func cosine(xy, x, y float64) float64 {
	if x == 0 || y == 0 {
		return 0
	}
	return xy / x / y
}

// vectors returns the bytes of k vectors of length n.
func vectors(k, n int) int64 { return 8 * int64(k) * int64(n) }
