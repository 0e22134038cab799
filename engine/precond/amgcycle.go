package precond

import (
	"context"
	"fmt"
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// coarsest is the order up to which a level is factored densely; maxLevels
// bounds the depth.
const (
	coarsest  = 300
	maxLevels = 40
)

// coarsening makes the prolongation from the next coarser level to that of a,
// with the inverse diagonal it needs anyway; nil where there is none.
type coarsening interface {
	prolongation(a *linear.CSR, diag []float64) *linear.CSR
}

// cycle is one multigrid cycle from a zero guess, which makes a symmetric
// preconditioner: smoothing after the correction is the transpose of that
// before it.
type cycle struct {
	levels []*level
	bottom *semidefinite // nil: the coarsest level is only smoothed
	sweeps int           // smoothing steps before and after, at least 1
	visits int           // of the next level: 1 V, 2 W
}

// level is one operator of the hierarchy with its transfers and work vectors.
type level struct {
	a     *linear.CSR
	p, r  *linear.CSR // prolongation from the next level, and its transpose; nil on the coarsest
	relax *relaxation
	b     []float64 // right-hand side, length n; nil on the finest
	x     []float64 // solution, length n; nil on the finest
	u, t  []float64 // iterate and residual, length n

	target []float64 // operands of prolong under way
	source []float64
	adding func(part int)
}

// newCycle builds the levels: A_c = Pᵀ A P until the order is small or the
// coarsening stalls.
func newCycle(ctx context.Context, a *linear.CSR, how coarsening, progress func(float64)) (*cycle, error) {
	c := &cycle{sweeps: 1, visits: 1}
	n := a.NRows
	for {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		l, diag, err := newLevel(a, len(c.levels))
		if err != nil {
			return nil, err
		}
		c.levels = append(c.levels, l)
		report(progress, 1-0.9*float64(a.NRows)/float64(n+1))
		if a.NRows <= coarsest {
			c.bottom, err = factorSemidefinite(a)
			return c, err
		}
		if len(c.levels) == maxLevels {
			return c, nil
		}
		p := how.prolongation(a, diag)
		if p == nil || p.NCols == 0 || 10*p.NCols > 9*a.NRows {
			return c, nil
		}
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		l.join(p)
		a = linear.Galerkin(l.r, a, p)
	}
}

func report(progress func(float64), done float64) {
	if progress != nil {
		progress(done)
	}
}

func newLevel(a *linear.CSR, depth int) (*level, []float64, error) {
	n := a.NRows
	diag := linear.Bulk[float64](n)
	linear.Parallel((n+relaxRows-1)/relaxRows, func(part int) {
		for i := part * relaxRows; i < min((part+1)*relaxRows, n); i++ {
			diag[i] = a.At(i, i)
		}
	})
	for i, d := range diag {
		if !(d > 0) || math.IsInf(1/d, 0) {
			return nil, nil, badDiagonal(i, d, depth)
		}
	}
	l := &level{a: a, relax: newRelaxation(a, diag, blockRows(n)), u: linear.Bulk[float64](n), t: linear.Bulk[float64](n)}
	if depth > 0 {
		l.b, l.x = linear.Bulk[float64](n), linear.Bulk[float64](n)
	}
	return l, diag, nil
}

// join couples the level to the next coarser one.
func (l *level) join(p *linear.CSR) {
	l.p, l.r, l.adding = p, p.Transpose(), l.addRows
}

// prolong adds P times the solution of the next level to u.
func (c *cycle) prolong(depth int, u []float64) {
	l := c.levels[depth]
	l.target, l.source = u, c.levels[depth+1].x
	linear.Parallel(l.relax.parts, l.adding)
	l.target, l.source = nil, nil
}

func (l *level) addRows(part int) {
	lo, hi := l.relax.block(part)
	u, x, ptr := l.target, l.source, l.p.Ptr
	for i := lo; i < hi; i++ {
		cols, vals := l.p.Col[ptr[i]:ptr[i+1]], l.p.Val[ptr[i]:ptr[i+1]]
		vals = vals[:len(cols)]
		t := u[i]
		for k, c := range cols {
			t += vals[k] * x[uint32(c)]
		}
		u[i] = t
	}
}

func badDiagonal(row int, d float64, depth int) error {
	if depth == 0 {
		return &Breakdown{Method: "amg", Row: row, Pivot: d, Why: "the diagonal entry is not positive"}
	}
	if d <= 0 {
		return &Breakdown{Method: "amg", Row: -1, Pivot: d, Why: "a diagonal entry of a coarse operator is not positive, " + indefinite}
	}
	return &Breakdown{Method: "amg", Row: -1, Pivot: d, Why: "a coarse operator overflows"}
}

// indefinite ends the reasons why a hierarchy cannot be built.
const indefinite = "so A is not positive definite, or too near to singular for its rounding"

// Apply computes dst = M⁻¹ x: one cycle.
func (c *cycle) Apply(dst, x []float64) { c.solve(0, dst, x) }

// ApplyDot computes dst = M⁻¹ x and returns xᵀ dst.
func (c *cycle) ApplyDot(dst, x []float64) float64 {
	c.solve(0, dst, x)
	return linear.Dot(x, dst)
}

// solve computes x ≈ A⁻¹ b on the level from a zero guess.
func (c *cycle) solve(depth int, x, b []float64) {
	l := c.levels[depth]
	if depth == len(c.levels)-1 && c.bottom != nil {
		c.bottom.Apply(x, b)
		return
	}
	u, other := l.u, x
	l.relax.first(u, l.t, b)
	for k := 1; k < c.sweeps; k++ {
		l.relax.down(other, u, b)
		u, other = other, u
	}
	if c.sweeps > 1 {
		l.relax.residual(l.t, u, b)
	}
	if depth < len(c.levels)-1 {
		c.correct(depth, u, b)
	}
	for k := 0; k < c.sweeps; k++ {
		l.relax.up(other, u, b)
		u, other = other, u
	}
	if &u[0] != &x[0] {
		copy(x, u)
	}
}

// correct adds the coarse correction, visits times: u += P A_c⁻¹ Pᵀ r with the
// residual r = b − A u, which the level's t holds at the start. An exact
// correction is not repeated.
func (c *cycle) correct(depth int, u, b []float64) {
	l, next := c.levels[depth], c.levels[depth+1]
	visits := c.visits
	if depth == len(c.levels)-2 && c.bottom != nil {
		visits = 1
	}
	for k := 0; k < visits; k++ {
		if k > 0 {
			l.relax.residual(l.t, u, b)
		}
		l.r.Apply(next.b, l.t)
		c.solve(depth+1, next.x, next.b)
		c.prolong(depth, u)
	}
}

// note tells size and memory of the hierarchy.
func (c *cycle) note(notes *trace.BuildNotes) {
	for depth, l := range c.levels {
		n := l.a.NRows
		notes.Levels = append(notes.Levels, trace.Level{Unknowns: n, Entries: int64(l.a.Entries())})
		notes.Entries += int64(l.a.Entries())
		notes.Bytes += l.relax.bytes() + 16*int64(n)
		if depth > 0 {
			notes.Bytes += l.a.Bytes() + 16*int64(n)
		}
		if l.p != nil {
			notes.Bytes += l.p.Bytes() + l.r.Bytes()
		}
	}
	last := c.levels[len(c.levels)-1].a
	if c.bottom == nil {
		notes.Remarks = append(notes.Remarks, fmt.Sprintf("Coarsening ends at %d unknowns; that level is only smoothed.", last.NRows))
	} else {
		notes.Bytes += c.bottom.bytes()
	}
	if c.bottom != nil && c.bottom.replaced > 0 {
		notes.Replaced = c.bottom.replaced
		notes.Remarks = append(notes.Remarks, fmt.Sprintf(
			"%d of %d pivots on the coarsest level are zero to rounding and left out: A looks singular.", notes.Replaced, last.NRows))
	}
	notes.Fill = float64(notes.Entries) / float64(max(1, c.levels[0].a.Entries()))
}
