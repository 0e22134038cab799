package krylov

import (
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var cgnrEntry = Entry{
	Name: "cgnr", Title: "conjugate gradients on the normal equations, residual",
	Source:   "Hestenes and Stiefel, J. Res. Nat. Bur. Standards 49 (1952) 409–436, section 10; Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. (2003), section 8.3",
	Needs:    linear.NeedsTranspose | linear.NeedsTransposeM,
	Assumes:  linear.AssumesFixedM,
	Norm:     trace.TwoNorm,
	Products: "2, one with the transpose",
	Monotone: true,
	Memory:   func(n int, _ linear.Values) int64 { return vectors(6, n) },
	New:      func(linear.Values) Solver { return &cgnr{} },
}

// cgnr is the conjugate gradient method on CᵀC y = Cᵀb with C = A M⁻¹ and
// x = M⁻¹y, without forming either: ‖r‖₂ is minimal over the Krylov space of
// CᵀC, whose condition number is that of C squared.
//
//	z = Cᵀr,  β = ‖z‖² new/old,  p = z + β p
//	u = M⁻¹p,  q = A u,  α = ‖z‖²/‖q‖²
//	x += α u,  r −= α q
type cgnr struct {
	core
	normal
	r, p, q, z []float64 // length n
	rho        float64   // ‖z‖² of the last step; 0 before the first
}

func (s *cgnr) Begin(p Problem) (trace.Reading, error) {
	*s = cgnr{}
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

func (s *cgnr) Step() (trace.Reading, error) {
	s.next()
	s.backward(s.z, s.r, s.q) // the product with the transpose
	rho := linear.Dot(s.z, s.z)
	if !finite(rho) {
		return s.overflow("|A'r|", rho)
	}
	if rho == 0 { // the least-squares solution: nothing more of b is in reach
		return s.ended()
	}
	beta := 0.0
	if s.rho != 0 {
		beta = rho / s.rho
	}
	linear.Xpby(s.z, beta, s.p)
	u := s.forward(s.q, s.p) // the product
	qq := linear.Dot(s.q, s.q)
	if qq == 0 {
		return s.broken("|Ap|", 0)
	}
	alpha := rho / qq
	res := root(linear.AxpyDot(-alpha, s.q, s.r, s.r), s.r)
	if !finite(alpha) || !finite(res) {
		return s.overflow("|Ap|", qq)
	}
	linear.Axpy(alpha, u, s.x)
	s.rho, s.last = rho, res
	return s.reading(alpha, beta, res == 0), nil
}

func (s *cgnr) Solution(dst []float64) { copy(dst, s.x) }
