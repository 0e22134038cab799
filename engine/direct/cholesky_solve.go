package direct

import "dwindle/engine/linear"

// Solve computes dst = A⁻¹ b, of length n each; b may be dst. Not for two
// goroutines at once.
func (c *Cholesky) Solve(dst, b []float64) {
	c.l.Order.Forward(c.work, b)
	for k := range c.l.up {
		c.forward(k)
	}
	for k := len(c.l.up) - 1; k >= 0; k-- {
		c.backward(k, c.l.width(k))
	}
	c.l.Order.Backward(dst, c.work)
}

// Bytes returns the memory of the factor, as Symbolic.Bytes predicts it.
func (c *Cholesky) Bytes() int64 {
	return 8*int64(len(c.val)) + 4*int64(len(c.l.rows)) + 4*int64(c.l.N) + 8*int64(len(c.work)) + 32*int64(len(c.l.up))
}

// Entries returns the entries of L, diagonal included.
func (c *Cholesky) Entries() int64 { return c.l.Entries }

// Pivots calls f with each pivot: the squares of the diagonal of L.
func (c *Cholesky) Pivots(f func(d float64)) {
	for k := range c.l.up {
		b := c.block(k)
		for i := range b.cols {
			f(b.val[i*b.cols+i] * b.val[i*b.cols+i])
		}
	}
}

func (c *Cholesky) block(k int) block {
	return block{c.val[c.l.valAt[k]:c.l.valAt[k+1]], c.l.width(k), c.l.height[k]}
}

// forward eliminates the unknowns of block k: y ← L⁻¹ y.
func (c *Cholesky) forward(k int) {
	b, y := c.block(k), c.work
	x := y[c.l.start[k]:c.l.start[k+1]]
	for i := range x {
		row := b.row(i)
		x[i] = (x[i] - product(row[:i], x[:i])) / row[i]
	}
	for i, r := range c.l.rowsOf(k)[b.cols:] {
		y[r] -= product(b.row(b.cols+i), x)
	}
}

// backward computes the first w unknowns of block k: y ← L⁻ᵀ y.
func (c *Cholesky) backward(k, w int) {
	b, y := c.block(k), c.work
	rows := c.l.rowsOf(k)
	x := y[c.l.start[k]:c.l.start[k+1]]
	for i := len(rows) - 1; i >= b.cols; i-- {
		takeFrom(x, y[rows[i]], b.row(i))
	}
	for i := w; i < b.cols; i++ {
		takeFrom(x[:w], x[i], b.row(i)[:w])
	}
	for i := w - 1; i >= 0; i-- {
		row := b.row(i)
		x[i] /= row[i]
		takeFrom(x[:i], x[i], row[:i])
	}
}

// takeFrom computes y ← y − a x.
func takeFrom(y []float64, a float64, x []float64) {
	if a == 0 {
		return
	}
	x = x[:len(y)]
	for k := range y {
		y[k] -= a * x[k]
	}
}

// Solver solves with a factorisation: dst = A⁻¹ b, of length n each.
type Solver interface {
	Solve(dst, b []float64)
}

// Refined solves with a factorisation and then corrects the answer by its
// residual, Steps times (Wilkinson 1963; one step in working precision makes
// small componentwise errors: Skeel, Math. Comp. 35 (1980) 817–832).
type Refined struct {
	A     linear.Applier // the matrix, as the residual needs it
	By    Solver
	Steps int
	r, d  []float64 // length n each
}

// Refine returns the refined solver for order n.
func Refine(a linear.Applier, by Solver, n, steps int) *Refined {
	return &Refined{A: a, By: by, Steps: steps, r: make([]float64, n), d: make([]float64, n)}
}

// Solve computes dst = A⁻¹ b. No overlap.
func (s *Refined) Solve(dst, b []float64) {
	s.By.Solve(dst, b)
	for range s.Steps {
		s.A.Apply(s.r, dst)
		linear.Lin(s.r, 1, b, -1, s.r)
		s.By.Solve(s.d, s.r)
		linear.Axpy(1, s.d, dst)
	}
}

// Beside returns the refined solver of another matrix of the same order that
// shares the scratch of s: the two must not be used at once.
func (s *Refined) Beside(a linear.Applier, by Solver) *Refined {
	return &Refined{A: a, By: by, Steps: s.Steps, r: s.r, d: s.d}
}
