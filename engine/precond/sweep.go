package precond

import "dwindle/engine/linear"

// lowerUnit solves L y = x for unit lower triangular L, whose strict lower
// part is l. y may be x.
func lowerUnit(l *linear.CSR, y, x []float64) {
	ptr := l.Ptr[:len(y)+1]
	x = x[:len(y)]
	start := ptr[0]
	for i := range y {
		end := ptr[i+1]
		cols, vals := l.Col[start:end], l.Val[start:end]
		vals = vals[:len(cols)]
		t := x[i]
		for k, c := range cols {
			t -= vals[k] * y[uint32(c)]
		}
		y[i] = t
		start = end
	}
}

// upperScaled solves U z = y for U = D (I + D⁻¹R) as z_i = y_i/d_i −
// Σ r_ij z_j, where r holds the strict upper part already divided by the
// pivots of its rows. z may be y.
func upperScaled(r *linear.CSR, inverse, z, y []float64) {
	n := len(z)
	ptr := r.Ptr[:n+1]
	inverse, y = inverse[:n], y[:n]
	end := ptr[n]
	for i := n - 1; i >= 0; i-- {
		start := ptr[i]
		cols, vals := r.Col[start:end], r.Val[start:end]
		vals = vals[:len(cols)]
		t := y[i] * inverse[i]
		for k, c := range cols {
			t -= vals[k] * z[uint32(c)]
		}
		z[i] = t
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
	lowerUnit(f.lower, dst, x)
	upperScaled(f.upper, f.inverse, dst, dst)
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
