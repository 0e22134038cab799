package precond

import (
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// lowerUnit solves L y = x for unit lower triangular L, whose strict lower
// part is l. y may be x.
func lowerUnit(l *linear.CSR, y, x []float64) {
	cols := l.Col
	vals := l.Val[:len(cols)]
	ends := l.Ptr[1:]
	x, y = x[:len(ends)], y[:len(ends)]
	k := 0
	for i, end := range ends {
		end = min(end, len(cols)) // no change; it spares the compiler a check an entry
		t := x[i]
		for ; k < end; k++ {
			t -= float64(vals[k] * y[uint32(cols[k])])
		}
		y[i] = t
	}
}

// upperScaled solves U z = y for U = D (I + D⁻¹R), from the last row to the
// first, as z_i = y_i/d_i − Σ r_ij z_j, where r holds the strict upper part
// already divided by the pivots of its rows. The farthest column comes first,
// since the nearest is known last. z may be y.
func upperScaled(r *linear.CSR, inverse, z, y []float64) {
	cols := r.Col
	vals := r.Val[:len(cols)]
	starts := r.Ptr[:r.NRows]
	inverse, y, z = inverse[:len(starts)], y[:len(starts)], z[:len(starts)]
	k := len(cols) - 1
	for i := len(starts) - 1; i >= 0; i-- {
		start := max(starts[i], 0) // no change; as above
		t := float64(y[i] * inverse[i])
		for ; k >= start; k-- {
			t -= float64(vals[k] * z[uint32(cols[k])])
		}
		z[i] = t
	}
}

// bandsFrom is the order from which factors may be stored by their diagonals;
// smaller ones stay in the cache.
const bandsFrom = 10_000

// factors is a preconditioner M = L D R with unit lower L and unit upper R:
// the incomplete factorisations end as one. Its triangles are stored by rows,
// or both by diagonals where that pays; either way gives the same bits.
type factors struct {
	lower, upper *linear.CSR   // strict parts of L and R, rows ascending; nil where diagonals serve
	down, up     *linear.Bands // strict parts of L and Rᵀ, nil where rows serve
	inverse      []float64     // 1/d_i, length n
	self         bool          // R = Lᵀ: M is symmetric
	entries      int           // of both strict parts
}

// settle stores the finished triangles for their sweeps; the upper one may be
// missing where it is the transpose of the lower.
func (f *factors) settle() {
	f.entries = 2 * f.lower.Entries()
	if !f.self {
		f.entries = f.lower.Entries() + f.upper.Entries()
	}
	if len(f.inverse) >= bandsFrom {
		down := linear.BandsOf(f.lower)
		up := down
		if !f.self && down != nil {
			up = linear.BandsOf(f.upper)
		}
		if up != nil {
			f.down, f.up, f.lower, f.upper = down, up, nil, nil
			return
		}
	}
	if f.upper == nil {
		f.upper = f.lower.Transpose()
	}
}

// Apply computes dst = R⁻¹ D⁻¹ L⁻¹ x.
func (f *factors) Apply(dst, x []float64) {
	if f.down != nil {
		f.down.Forward(dst, x)
		f.up.Backward(dst, dst, f.inverse)
		return
	}
	lowerUnit(f.lower, dst, x)
	upperScaled(f.upper, f.inverse, dst, dst)
}

// built ends the build of factors.
func built(f *factors, notes trace.BuildNotes, err error) (linear.Applier, trace.BuildNotes, error) {
	if err != nil {
		return nil, notes, err
	}
	return f, notes, nil
}

// ApplyDot computes dst = M⁻¹ x and returns xᵀ dst.
func (f *factors) ApplyDot(dst, x []float64) float64 {
	f.Apply(dst, x)
	return linear.Dot(x, dst)
}

// bytes returns the memory of the factors.
func (f *factors) bytes() int64 {
	if f.down == nil {
		return f.lower.Bytes() + f.upper.Bytes() + 8*int64(len(f.inverse))
	}
	bytes := f.down.Bytes() + 8*int64(len(f.inverse))
	if !f.self {
		bytes += f.up.Bytes()
	}
	return bytes
}

// factorBytes returns what factors with so many entries below and above the
// diagonal will take, stored by rows; by diagonals it is less.
func factorBytes(n, lower, upper int) int64 {
	return triangleBytes(n, lower) + triangleBytes(n, upper) + 8*int64(n)
}
