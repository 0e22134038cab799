package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var lsqrEntry = Entry{
	Name: "lsqr", Title: "least squares by QR of a bidiagonal matrix",
	Source:   "Paige and Saunders, ACM Trans. Math. Softw. 8 (1982) 43–71",
	Needs:    linear.NeedsTranspose | linear.NeedsTransposeM,
	Assumes:  linear.AssumesFixedM,
	Norm:     trace.TwoNorm,
	Products: "2, one with the transpose",
	Monotone: true,
	Memory:   func(n int, _ linear.Values) int64 { return vectors(7, n) },
	New:      func(linear.Values) Solver { return &lsqr{} },
}

// lsqr minimises ‖b − A x‖₂ over the space of cgnr, whose iterates it has in
// exact arithmetic, by a QR factorisation of the lower bidiagonal matrix of
// the Golub–Kahan process for C = A M⁻¹. It never forms the squares of cgnr:
//
//	ρ_k = √(ρ̄_k² + β_{k+1}²),  c = ρ̄_k/ρ_k,  s = β_{k+1}/ρ_k
//	θ_{k+1} = s α_{k+1},  ρ̄_{k+1} = −c α_{k+1}
//	φ_k = c φ̄_k,  φ̄_{k+1} = s φ̄_k = ‖r_k‖
//	d_k = M⁻¹v_k − (θ_k/ρ_{k−1}) d_{k−1},  x += (φ_k/ρ_k) d_k
type lsqr struct {
	core
	bidiagonal
	d    []float64 // the direction of x, length n
	c, s float64   // the last rotation
	rho  float64   // ρ of the last step
	rest float64   // φ̄
}

func (s *lsqr) Begin(p Problem) (trace.Reading, error) {
	*s = lsqr{c: -1, rho: 1}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	res, err := s.open(&s.core, p)
	if err != nil {
		return trace.Reading{}, err
	}
	s.d, s.rest = linear.Bulk[float64](s.n), res
	return s.start(res), nil
}

func (s *lsqr) Step() (trace.Reading, error) {
	s.next()
	s.left() // the product with the transpose
	if !finite(s.alpha) {
		return s.overflow("|A'u|", s.alpha)
	}
	if s.alpha == 0 { // the least-squares solution: nothing more of b is in reach
		return s.ended()
	}
	half := s.right() // the product
	if !finite(s.beta) {
		return s.overflow("|Av|", s.beta)
	}
	theta, rhoBar := s.s*s.alpha, -s.c*s.alpha
	rho := math.Hypot(rhoBar, s.beta)
	if rho == 0 {
		return s.broken("rho", 0)
	}
	linear.Xpby(half, -theta/s.rho, s.d)
	s.c, s.s = rhoBar/rho, s.beta/rho
	linear.Axpy(s.c*s.rest/rho, s.d, s.x)
	s.rho = rho
	s.rest *= s.s
	s.last = s.rest
	return s.reading(math.NaN(), math.NaN(), s.rest == 0), nil
}

func (s *lsqr) Solution(dst []float64) { copy(dst, s.x) }
