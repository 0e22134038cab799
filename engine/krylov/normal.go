package krylov

import "dwindle/engine/linear"

// normal applies C = A M⁻¹ and Cᵀ = M⁻ᵀAᵀ for the methods that work on the
// normal equations of C y = b, x = M⁻¹y.
type normal struct {
	adjoint
	op   Problem
	half []float64 // M⁻¹v, length n; nil without a preconditioner
}

func newNormal(p Problem, n int) (normal, error) {
	t, err := newAdjoint(p)
	s := normal{adjoint: t, op: p}
	if err == nil && t.mt != nil {
		s.half = linear.Bulk[float64](n)
	}
	return s, err
}

// forward computes dst = A M⁻¹v and returns M⁻¹v, which is v itself without a
// preconditioner.
func (s *normal) forward(dst, v []float64) (half []float64) {
	half = s.back(v)
	s.op.A.Apply(dst, half)
	return half
}

// back returns M⁻¹v, the step in x that belongs to v. It is overwritten by the
// next call.
func (s *normal) back(v []float64) []float64 {
	if s.mt == nil {
		return v
	}
	s.op.M.Apply(s.half, v)
	return s.half
}

// backward computes dst = M⁻ᵀAᵀv; scratch is overwritten.
func (s *normal) backward(dst, v, scratch []float64) {
	if s.mt == nil {
		s.at.ApplyT(dst, v)
		return
	}
	s.at.ApplyT(scratch, v)
	s.mt.ApplyT(dst, scratch)
}
