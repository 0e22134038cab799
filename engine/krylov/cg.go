package krylov

import (
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var cgEntry = Entry{
	Name: "cg", Title: "conjugate gradients",
	Source:   "Hestenes and Stiefel, J. Res. Nat. Bur. Standards 49 (1952) 409–436",
	Assumes:  linear.AssumesSymmetric | linear.AssumesDefinite | linear.AssumesFixedM | linear.AssumesSymmetricM,
	Norm:     trace.TwoNorm,
	Products: "1",
	Energy:   true,
	Lanczos:  true,
	Memory:   func(n int, _ linear.Values) int64 { return vectors(5, n) },
	New:      func(linear.Values) Solver { return &cg{} },
}

// cg is the preconditioned conjugate gradient method:
//
//	p_k = z_k + β_k p_{k−1}            z_k = M⁻¹ r_k
//	α_k = r_kᵀz_k / p_kᵀA p_k
//	x_{k+1} = x_k + α_k p_k
//	r_{k+1} = r_k − α_k A p_k
//	β_{k+1} = r_{k+1}ᵀz_{k+1} / r_kᵀz_k
//
// The update of x waits for the next step, where it shares a pass over memory
// with the new direction; until then p and q = A p are those of the last step.
type cg struct {
	core
	curv             curvature
	r, z, p, q       []float64 // length n; z is r without a preconditioner
	rho, alpha, beta float64   // rᵀz, and the α and β that x and p wait for
	indefinite       bool      // rᵀz < 0 has been reported
}

func (s *cg) Begin(p Problem) (trace.Reading, error) {
	*s = cg{}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	s.r, s.p, s.q = linear.Bulk[float64](s.n), linear.Bulk[float64](s.n), linear.Bulk[float64](s.n)
	res := s.residual(s.r, p.X)
	s.z = s.r
	if s.plain {
		s.rho = linear.Dot(s.r, s.r)
	} else if s.z = linear.Bulk[float64](s.n); finite(res) && res > 0 {
		s.rho = s.precondition(s.z, s.r)
		s.watchM(res)
	}
	return s.start(res), nil
}

func (s *cg) Step() (trace.Reading, error) {
	s.next()
	if s.rho == 0 || !finite(s.rho) {
		return s.stuck()
	}
	linear.StepDirection(s.x, s.alpha, s.p, s.z, s.beta)
	s.alpha = 0
	pq := linear.ApplyDot(s.a, s.q, s.p) // the product
	if !finite(pq) {
		return s.overflow("p'Ap", pq)
	}
	s.curv.watch(&s.core, s.p, pq)
	if pq == 0 {
		return s.broken("p'Ap", 0)
	}
	alpha := s.rho / pq
	if !finite(alpha) {
		return s.overflow("alpha", alpha)
	}
	rr := linear.AxpyDot(-alpha, s.q, s.r, s.r)
	res := root(rr, s.r)
	if !finite(res) {
		return s.overflow("|r|", res)
	}
	s.alpha, s.last = alpha, res
	if res == 0 {
		s.beta = 0
		return s.reading(alpha, 0, true), nil
	}
	rho := rr
	if !s.plain {
		rho = s.precondition(s.z, s.r) // the preconditioner
	}
	s.beta, s.rho = rho/s.rho, rho
	s.watchM(res)
	return s.reading(alpha, s.beta, false), nil
}

// watchM reports the first rᵀM⁻¹r below zero, relative to ‖r‖‖M⁻¹r‖.
func (s *cg) watchM(res float64) {
	if s.rho < 0 && !s.indefinite {
		s.indefinite = true
		s.event(trace.PrecondIndefinite, "r'inv(M)r", cosine(s.rho, res, linear.Norm2(s.z)))
	}
}

// stuck ends a trial whose rᵀz is zero or undefined.
func (s *cg) stuck() (trace.Reading, error) {
	switch {
	case !finite(s.rho):
		return s.overflow("r'inv(M)r", s.rho)
	case s.last <= exact*s.first:
		return s.ended()
	}
	return s.broken("r'inv(M)r", 0)
}

// Solution writes x_k, the waiting update included.
func (s *cg) Solution(dst []float64) {
	if s.alpha == 0 {
		copy(dst, s.x)
		return
	}
	linear.Lin(dst, 1, s.x, s.alpha, s.p)
}

// Curvature shows the direction of the last step and its product.
func (s *cg) Curvature() (p, q []float64) { return s.p, s.q }
