package precond

import (
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// lowerUnit solves rows lo to hi of L y = x for unit lower triangular L, whose
// strict lower part is l and whose earlier rows are solved. y may be x.
func lowerUnit(l *linear.CSR, y, x []float64, lo, hi int) {
	ends := l.Ptr[lo+1 : hi+1]
	start := l.Ptr[lo]
	x = x[lo:hi]
	x = x[:len(ends)]
	out := y[lo:hi]
	out = out[:len(ends)]
	for i, end := range ends {
		cols, vals := l.Col[start:end], l.Val[start:end]
		vals = vals[:len(cols)]
		t := x[i]
		for k, c := range cols {
			t -= vals[k] * y[uint32(c)]
		}
		out[i] = t
		start = end
	}
}

// upperScaled solves rows hi−1 down to lo of U z = y for U = D (I + D⁻¹R) as
// z_i = y_i/d_i − Σ r_ij z_j, where r holds the strict upper part already
// divided by the pivots of its rows and the later rows are solved. z may be y.
func upperScaled(r *linear.CSR, inverse, z, y []float64, lo, hi int) {
	starts := r.Ptr[lo:hi]
	inverse, y = inverse[lo:hi], y[lo:hi]
	inverse, y = inverse[:len(starts)], y[:len(starts)]
	out := z[lo:hi]
	out = out[:len(starts)]
	end := r.Ptr[hi]
	for i := len(starts) - 1; i >= 0; i-- {
		start := starts[i]
		cols, vals := r.Col[start:end], r.Val[start:end]
		vals = vals[:len(cols)]
		t := y[i] * inverse[i]
		for k, c := range cols {
			t -= vals[k] * z[uint32(c)]
		}
		out[i] = t
		end = start
	}
}

// factors is a preconditioner M = L D R with unit lower L and unit upper R:
// the incomplete factorisations end as one.
type factors struct {
	lower, upper *linear.CSR // strict parts of L and R, rows ascending
	inverse      []float64   // 1/d_i, length n
	self         bool        // R = Lᵀ: M is symmetric
}

// Apply computes dst = R⁻¹ D⁻¹ L⁻¹ x.
func (f *factors) Apply(dst, x []float64) {
	lowerUnit(f.lower, dst, x, 0, len(dst))
	upperScaled(f.upper, f.inverse, dst, dst, 0, len(dst))
}

// Product computes dst = M x = L D R x, the way opposite to Apply; dst and x do
// not overlap. It is for looking at factors, not for iterating.
func (f *factors) Product(dst, x []float64) {
	f.upper.Apply(dst, x)
	for i := range dst {
		dst[i] = (dst[i] + x[i]) / f.inverse[i]
	}
	y := make([]float64, len(dst))
	f.lower.Apply(y, dst)
	linear.Axpy(1, y, dst)
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
	return f.lower.Bytes() + f.upper.Bytes() + 8*int64(len(f.inverse))
}

// factorBytes returns what factors with so many entries below and above the
// diagonal will take.
func factorBytes(n, lower, upper int) int64 {
	return triangleBytes(n, lower) + triangleBytes(n, upper) + 8*int64(n)
}
