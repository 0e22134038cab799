package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var lsmrEntry = Entry{
	Name: "lsmr", Title: "least squares by minimal residual of the normal equations",
	Source:   "Fong and Saunders, SIAM J. Sci. Comput. 33 (2011) 2950–2971",
	Needs:    linear.NeedsTranspose | linear.NeedsTransposeM,
	Assumes:  linear.AssumesFixedM,
	Norm:     trace.NormalEquationNorm,
	Products: "2, one with the transpose",
	Monotone: true,
	Memory:   func(n int, _ linear.Values) int64 { return vectors(8, n) },
	New:      func(linear.Values) Solver { return &lsmr{} },
}

// lsmr is minres on CᵀC y = Cᵀb with C = A M⁻¹, x = M⁻¹y, by the Golub–Kahan
// process and two rotations a step: ‖Cᵀr‖₂, which it watches, cannot grow, and
// neither can ‖r‖₂ (Fong and Saunders, section 4).
//
//	ρ_k = √(ᾱ_k² + β_{k+1}²),  c = ᾱ_k/ρ_k,  s = β_{k+1}/ρ_k
//	θ_{k+1} = s α_{k+1},  ᾱ_{k+1} = c α_{k+1}
//	θ̄_k = s̄ ρ_k,  ρ̄_k = √((c̄ρ_k)² + θ_{k+1}²),  c̄ ← c̄ρ_k/ρ̄_k,  s̄ ← θ_{k+1}/ρ̄_k
//	ζ_k = c̄ ζ̄_k,  ζ̄_{k+1} = −s̄ ζ̄_k,  ‖Cᵀr_k‖ = |ζ̄_{k+1}|
//	h_k = M⁻¹v_k − (θ_k/ρ_{k−1}) h_{k−1}
//	h̄_k = h_k − (θ̄_kρ_k/(ρ_{k−1}ρ̄_{k−1})) h̄_{k−1},  x += ζ_k/(ρ_kρ̄_k) h̄_k
type lsmr struct {
	core
	bidiagonal
	h, hBar           []float64 // length n
	aBar, theta       float64   // ᾱ_k and θ_k
	rho, rhoBar       float64   // of the last step
	cBar, sBar, zeBar float64   // the last rotation of the second kind, and ζ̄_k
}

func (s *lsmr) Begin(p Problem) (trace.Reading, error) {
	*s = lsmr{rho: 1, rhoBar: 1, cBar: 1}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	res, err := s.open(&s.core, p)
	if err != nil {
		return trace.Reading{}, err
	}
	s.h, s.hBar = linear.Bulk[float64](s.n), linear.Bulk[float64](s.n)
	if !finite(res) || res == 0 {
		return s.start(res), nil
	}
	s.left() // the first product with the transpose
	s.aBar, s.zeBar = s.alpha, s.alpha*s.beta
	return s.start(s.zeBar), nil
}

func (s *lsmr) Step() (trace.Reading, error) {
	s.next()
	half := s.right() // the product
	if !finite(s.beta) {
		return s.overflow("|Av|", s.beta)
	}
	linear.Xpby(half, -s.theta/s.rho, s.h)
	if s.alpha = 0; s.beta > 0 {
		s.left() // the product with the transpose
	}
	if !finite(s.alpha) {
		return s.overflow("|A'u|", s.alpha)
	}
	rho := math.Hypot(s.aBar, s.beta)
	theta := s.beta / rho * s.alpha
	rhoBar := math.Hypot(s.cBar*rho, theta)
	if rho == 0 || rhoBar == 0 {
		return s.broken("rho", 0)
	}
	linear.Xpby(s.h, -s.sBar*rho*rho/(s.rho*s.rhoBar), s.hBar)
	s.aBar = s.aBar / rho * s.alpha
	s.cBar, s.sBar = s.cBar*rho/rhoBar, theta/rhoBar
	linear.Axpy(s.cBar*s.zeBar/(rho*rhoBar), s.hBar, s.x)
	s.rho, s.rhoBar, s.theta = rho, rhoBar, theta
	s.zeBar *= -s.sBar
	s.last = math.Abs(s.zeBar)
	return s.reading(math.NaN(), math.NaN(), s.last == 0), nil
}

func (s *lsmr) Solution(dst []float64) { copy(dst, s.x) }
