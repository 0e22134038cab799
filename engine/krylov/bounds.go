package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/spectrum"
	"dwindle/engine/trace"
)

// How the ends of the spectrum are estimated for chebyshev.
const (
	boundSteps = 60   // most products that go into them
	boundLook  = 10   // products between two looks whether they have settled
	above      = 1.1  // times the largest Ritz value is the upper end
	below      = 0.9  // times the smallest Ritz value is the first lower end
	damping    = 0.75 // a fall by less than this power of the promised one is too slow
	visible    = 100  // the promised fall from which on it is held against the real one
	lowest     = 0.1  // of the lower end is the least it is lowered to at once
)

// bounds estimates the ends that are not given from the Ritz values of at most
// boundSteps steps of conjugate gradients, fewer where both have settled. The
// right-hand side is A times a random vector, so that the null space of a
// singular A, which the residual of a solvable system does not hold either, is
// not seen. From a random start the largest Ritz value of 60
// steps is on the average within 3 % of the largest eigenvalue for a million
// unknowns (Kuczyński and Woźniakowski, SIAM J. Matrix Anal. Appl. 13 (1992)
// 1094–1122), so that a tenth above it is safe. It works in r, z, d and q; ok
// is false where there are no bounds, and end is how the trial ends then.
func (s *chebyshev) bounds() (end trace.Reading, ok bool) {
	var t spectrum.Tridiagonal
	linear.Uniform(s.q, 1)
	s.a.Apply(s.r, s.q) // the product
	rho, beta := s.meet(), 0.0
	for k, first := 1, rho; k <= boundSteps; k++ {
		if !finite(rho) || rho < 0 {
			end, _ = s.refuse("r'inv(M)r", rho, s.r, s.z)
			return end, false
		}
		linear.Xpby(s.z, beta, s.d)
		dq := linear.ApplyDot(s.a, s.q, s.d) // the product
		if !finite(dq) {
			end, _ = s.overflow("p'Ap", dq)
			return end, false
		}
		if s.curv.watch(&s.core, s.d, dq); dq <= 0 {
			break
		}
		alpha := rho / dq
		linear.Axpy(-alpha, s.q, s.r)
		beta = 1 / rho
		rho = s.meet()
		beta *= rho
		if !t.AddCG(alpha, beta) || rho <= unit*unit*first || (k%boundLook == 0 && t.Extremes().Settled) {
			break
		}
	}
	x := t.Extremes()
	if s.lo == 0 {
		s.lo = below * x.Smallest
	}
	if s.hi == 0 {
		s.hi = above * x.Largest
	}
	return end, true
}

// meet computes z = M⁻¹r and returns rᵀz.
func (s *chebyshev) meet() float64 {
	if s.plain {
		return linear.Dot(s.r, s.r)
	}
	return s.precondition(s.z, s.r)
}

// widen lowers the lower end where the present polynomial, of degree k, shows
// that an eigenvalue lies below it: with the spectrum in [lo, hi], √(rᵀM⁻¹r)
// would have fallen by T_k(μ(0)), μ(λ) = (hi+lo−2λ)/(hi−lo), at least. The
// eigenvalue that explains the real fall F instead solves
//
//	T_k(μ(λ)) = T_k(μ(0)) / F
//
// size is √(rᵀM⁻¹r). A new polynomial begins.
func (s *chebyshev) widen(size float64) {
	k, half := float64(s.degree), (s.hi-s.lo)/2
	if k == 0 || half == 0 {
		return
	}
	promised := logChebyshev(k, (s.hi+s.lo)/(s.hi-s.lo))
	fall := math.Log(s.from / size)
	if promised < math.Log(visible) || fall > damping*promised {
		return
	}
	y := promised - fall // log T_k(μ(λ)), above zero
	mu := math.Cosh((y + math.Log1p(math.Sqrt(-math.Expm1(-2*y)))) / k)
	s.lo = max((s.hi+s.lo)/2-half*mu, lowest*s.lo)
	s.degree = 0
}

// logChebyshev returns log T_k(x) for x > 1: T_k(cosh a) = cosh ka.
func logChebyshev(k, x float64) float64 {
	a := k * math.Acosh(x)
	return a + math.Log1p(math.Exp(-2*a)) - math.Ln2
}
