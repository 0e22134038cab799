package krylov

import (
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var cgneEntry = Entry{
	Name: "cgne", Title: "conjugate gradients on the normal equations, error",
	Source:   "Craig, J. Math. and Phys. 34 (1955) 64–73; Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. (2003), section 8.3",
	Needs:    linear.NeedsTranspose | linear.NeedsTransposeM,
	Assumes:  linear.AssumesFixedM,
	Norm:     trace.TwoNorm,
	Products: "2, one with the transpose",
	Memory:   func(n int, _ linear.Values) int64 { return vectors(6, n) },
	New:      func(linear.Values) Solver { return &cgne{} },
}

// cgne is the conjugate gradient method on C Cᵀw = b with C = A M⁻¹ and
// x = M⁻¹Cᵀw (Craig's method): ‖y − y_k‖₂ for y = M x is minimal over the
// Krylov space, while ‖r‖₂ may rise.
//
//	β = ‖r‖² new/old,  p = Cᵀr + β p,  α = ‖r‖²/‖p‖²
//	u = M⁻¹p,  x += α u,  r −= α A u
type cgne struct {
	core
	normal
	r, p, q, z []float64 // length n
	rho        float64   // ‖r‖² of the step before; 0 before the first
}

func (s *cgne) Begin(p Problem) (trace.Reading, error) {
	*s = cgne{}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	var err error
	if s.normal, err = newNormal(p, s.n); err != nil {
		return trace.Reading{}, err
	}
	s.r, s.p, s.q, s.z = linear.Bulk[float64](s.n), linear.Bulk[float64](s.n), linear.Bulk[float64](s.n), linear.Bulk[float64](s.n)
	return s.start(s.residual(s.r, p.X)), nil
}

func (s *cgne) Step() (trace.Reading, error) {
	s.next()
	s.backward(s.z, s.r, s.q) // the product with the transpose
	rho := s.last * s.last
	beta := 0.0
	if s.rho != 0 {
		beta = rho / s.rho
	}
	linear.Xpby(s.z, beta, s.p)
	pp := linear.Dot(s.p, s.p)
	if !finite(pp) {
		return s.overflow("|p|", pp)
	}
	if pp == 0 {
		return s.stuck()
	}
	alpha := rho / pp
	u := s.forward(s.q, s.p) // the product
	res := root(linear.AxpyDot(-alpha, s.q, s.r, s.r), s.r)
	if !finite(alpha) || !finite(res) {
		return s.overflow("|r|", res)
	}
	linear.Axpy(alpha, u, s.x)
	s.rho, s.last = rho, res
	return s.reading(alpha, beta, res == 0), nil
}

// stuck ends a trial whose direction is zero.
func (s *cgne) stuck() (trace.Reading, error) {
	if s.last <= exact*s.first {
		return s.ended()
	}
	return s.broken("|p|", 0)
}

func (s *cgne) Solution(dst []float64) { copy(dst, s.x) }
