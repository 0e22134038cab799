package precond

import "dwindle/engine/linear"

// scatter subtracts t times the entries from..to of a from y, at their
// columns.
func scatter(y []float64, t float64, a *linear.CSR, from, to int) {
	cols, vals := a.Col[from:to], a.Val[from:to]
	vals = vals[:len(cols)]
	for k, c := range cols {
		y[uint32(c)] -= vals[k] * t
	}
}

// ApplyT computes dst = M⁻ᵀ x = L⁻ᵀ D⁻¹ R⁻ᵀ x; the rows of the factors are the
// columns of their transposes and are scattered in order.
func (f *factors) ApplyT(dst, x []float64) {
	switch {
	case f.self:
		f.Apply(dst, x)
		return
	case f.down != nil:
		f.up.Forward(dst, x)
		f.down.Backward(dst, dst, f.inverse)
		return
	}
	copy(dst, x)
	for i := range dst {
		scatter(dst, dst[i], f.upper, f.upper.Ptr[i], f.upper.Ptr[i+1])
	}
	for i := len(dst) - 1; i >= 0; i-- {
		dst[i] *= f.inverse[i]
	}
	for i := len(dst) - 1; i >= 0; i-- {
		scatter(dst, dst[i], f.lower, f.lower.Ptr[i], f.lower.Ptr[i+1])
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
		scatter(dst, dst[i], s.a, s.diag[i]+1, s.a.Ptr[i+1])
	}
	for i := len(dst) - 1; i >= 0; i-- {
		z := dst[i]
		for k := s.a.Ptr[i]; k < s.diag[i]; k++ {
			j := s.a.Col[k]
			dst[j] -= s.inverse[j] * s.a.Val[k] * z
		}
	}
}
