package direct

import (
	"context"
	"math"

	"dwindle/engine/linear"
)

// Inertia counts the eigenvalues of a symmetric matrix by their sign, read off
// the pivots (Sylvester's law). Zero counts those that vanish or whose sign may
// be rounding: with any of them the other two are lower bounds.
type Inertia struct{ Negative, Positive, Zero int }

// LDL is P D A D Pᵀ = L B Lᵀ with powers of two in D, unit lower triangular L
// and a block diagonal B of orders 1 and 2.
type LDL struct {
	Inertia  Inertia
	MinPivot float64 // smallest and largest eigenvalue of B in magnitude,
	MaxPivot float64 // in the units of the scaled matrix, whose largest entries are near 1
	Delayed  int     // columns that were passed on to the front above for want of a stable pivot
	ZeroRow  int     // the original row of the first pivot that vanishes; −1 if none
	order    linear.Permutation
	scale    []float64 // diagonal of D in the original order
	nodes    []ldlNode
	work     []float64
	entries  int64
}

// ldlNode is what one front eliminated.
type ldlNode struct {
	rows []int32   // places: the pivots in their order, then the rows they reach
	d, e []float64 // diagonal of B; entry below it, not 0 in the first column of a block of order 2
	l    []float64 // column t: entries t+1 to len(rows)
}

// threshold is the least size of a pivot relative to its column.
const threshold = 0.01

// FactorLDL factorises a symmetric, in general indefinite matrix by the
// multifrontal method (Duff and Reid 1983). Within a front, pivots of order 1
// and 2 are taken in the manner of Bunch and Kaufman (Math. Comp. 31 (1977))
// where no multiplier exceeds 1/0.01; a column without one is delayed to the
// front above, where it is complete with more rows. A is first scaled by
// powers of two, which rounds nothing. Pivots that vanish to rounding are
// counted, not divided by: Solve then leaves their unknowns at zero. Of a
// matrix symmetric to rounding only, one of each two entries is used.
//
// sym must come from Analyse(a, …); it predicts entries, work and memory for
// the case without delays. The factor is the same for every number of threads.
func FactorLDL(ctx context.Context, a *linear.CSR, sym *Symbolic, progress func(float64)) (*LDL, error) {
	s := equilibrated(a)
	f := &ldlWork{l: sym.lay(patternOf(a)), a: symmetricEntries{a: a, s: s}, place: sym.Order.Inverse(),
		local: make([]int32, sym.N), updates: make([]frontUpdate, len(sym.up)),
		out: &LDL{order: sym.Order, scale: s.d, work: make([]float64, sym.N), nodes: make([]ldlNode, len(sym.up)),
			ZeroRow: -1, MinPivot: math.Inf(1)}}
	done, told := 0.0, 0.0
	for k := range sym.up {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		if err := f.node(ctx, k); err != nil {
			return nil, err
		}
		done += float64(sym.height[k]) * float64(sym.height[k]) * float64(f.l.width(k))
		if share := done / sym.Work; progress != nil && share > told+0.01 && share < 1 {
			told = share
			progress(share)
		}
	}
	f.out.settle(a, f.doubts)
	return f.out, nil
}

// equilibrated returns D A D with powers of two in D that bring the largest
// entry of each nonzero row near 1: a few sweeps of d_i ← d_i/√(largest entry
// of row i) (Ruiz 2001), on exponents.
func equilibrated(a *linear.CSR) *scaled {
	n := a.NRows
	s := &scaled{a: a, exp: make([]int, n), d: make([]float64, n)}
	e := make([]float64, n)
	for range 8 {
		for i := range n {
			largest := math.Inf(-1)
			cols, vals := a.Row(i)
			for k, j := range cols {
				if vals[k] != 0 {
					largest = max(largest, math.Log2(math.Abs(vals[k]))+e[i]+e[j])
				}
			}
			if !math.IsInf(largest, 0) {
				e[i] -= largest / 2
			}
		}
	}
	for i, v := range e {
		s.exp[i] = int(math.Round(min(max(v, -500), 500)))
		s.d[i] = math.Ldexp(1, s.exp[i])
	}
	return s
}

// Entries returns the entries of L and B.
func (f *LDL) Entries() int64 { return f.entries }

// Bytes returns the memory of the factor.
func (f *LDL) Bytes() int64 {
	total := 4*int64(len(f.order)) + 16*int64(len(f.work))
	for k := range f.nodes {
		n := &f.nodes[k]
		total += 4*int64(len(n.rows)) + 8*int64(len(n.l)+2*len(n.d)) + 96
	}
	return total
}

// Solve computes dst = A⁻¹ b, of length n each; b may be dst. Not for two
// goroutines at once.
func (f *LDL) Solve(dst, b []float64) {
	y := f.work
	for p, i := range f.order {
		y[p] = f.scale[i] * b[i]
	}
	for k := range f.nodes {
		f.nodes[k].forward(y)
	}
	for k := len(f.nodes) - 1; k >= 0; k-- {
		f.nodes[k].backward(y)
	}
	for p, i := range f.order {
		dst[i] = f.scale[i] * y[p]
	}
}

// forward computes y ← B⁻¹ L⁻¹ y on the pivots of the node.
func (n *ldlNode) forward(y []float64) {
	at := 0
	for t := range n.d {
		below := n.rows[t+1:]
		col := n.l[at : at+len(below)]
		at += len(below)
		x := y[n.rows[t]]
		if x == 0 {
			continue
		}
		for i, r := range below {
			y[r] -= col[i] * x
		}
	}
	for t := 0; t < len(n.d); t++ {
		p := n.rows[t]
		switch {
		case n.e[t] != 0:
			q := n.rows[t+1]
			y[p], y[q] = pair{n.d[t], n.e[t], n.d[t+1]}.solve(y[p], y[q])
			t++
		case n.d[t] == 0:
			y[p] = 0
		default:
			y[p] /= n.d[t]
		}
	}
}

// backward computes y ← L⁻ᵀ y on the pivots of the node.
func (n *ldlNode) backward(y []float64) {
	at := len(n.l)
	for t := len(n.d) - 1; t >= 0; t-- {
		below := n.rows[t+1:]
		at -= len(below)
		col := n.l[at : at+len(below)]
		s := y[n.rows[t]]
		for i, r := range below {
			s -= col[i] * y[r]
		}
		y[n.rows[t]] = s
	}
}
