package precond

import "dwindle/engine/linear"

// scatter subtracts t times the values from y, at their columns.
func scatter[T linear.Stored](y []float64, t float64, cols []int32, vals []T) {
	vals = vals[:len(cols)]
	for k, c := range cols {
		y[uint32(c)] -= float64(vals[k]) * t
	}
}

// ApplyT computes dst = M⁻ᵀ x = L⁻ᵀ D⁻¹ R⁻ᵀ x.
func (f *factors) ApplyT(dst, x []float64) {
	switch {
	case f.self:
		f.Apply(dst, x)
	case f.down != nil:
		f.up.Forward(dst, x)
		f.down.Backward(dst, dst, f.inverse)
	case f.below != nil:
		columnSweeps(*f.below, *f.above, f.inverse, dst, x)
	default:
		columnSweeps(rowsOf(f.lower), rowsOf(f.upper), f.inverse, dst, x)
	}
}

// columnSweeps computes y = L⁻ᵀ D⁻¹ R⁻ᵀ x: the rows of the factors are the
// columns of their transposes and are scattered in order.
func columnSweeps[T linear.Stored](l, r triangleRows[T], inverse, y, x []float64) {
	copy(y, x)
	for i := range y {
		from, to := r.ptr[i], r.ptr[i+1]
		scatter(y, y[i], r.col[from:to], r.val[from:to])
	}
	for i := range y {
		y[i] *= inverse[i]
	}
	for i := len(y) - 1; i >= 0; i-- {
		from, to := l.ptr[i], l.ptr[i+1]
		scatter(y, y[i], l.col[from:to], l.val[from:to])
	}
}

// ApplyT computes dst = M⁻ᵀ x with Mᵀ = (D + ωUᵀ) D⁻¹ (D + ωLᵀ) / (ω(2−ω)):
// both sweeps scatter the rows of A.
func (s *ssor) ApplyT(dst, x []float64) {
	if s.self {
		s.Apply(dst, x)
		return
	}
	for i := range dst {
		dst[i] = (2 - s.omega) * x[i]
	}
	for i := range dst {
		dst[i] *= s.inverse[i]
		from, to := s.diag[i]+1, s.a.Ptr[i+1]
		scatter(dst, dst[i], s.a.Col[from:to], s.a.Val[from:to])
	}
	for i := len(dst) - 1; i >= 0; i-- {
		z := dst[i]
		for k := s.a.Ptr[i]; k < s.diag[i]; k++ {
			j := s.a.Col[k]
			dst[j] -= s.inverse[j] * s.a.Val[k] * z
		}
	}
}
