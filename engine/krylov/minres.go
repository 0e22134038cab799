package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var minresEntry = Entry{
	Name: "minres", Title: "minimal residual",
	Source:      "Paige and Saunders, SIAM J. Numer. Anal. 12 (1975) 617–629",
	Assumes:     linear.AssumesSymmetric | linear.AssumesFixedM | linear.AssumesSymmetricM,
	Norm:        trace.PrecondNorm,
	Products:    "1",
	Monotone:    true,
	Tridiagonal: true,
	Memory:      func(n int, _ linear.Values) int64 { return vectors(7, n) },
	New:         func(linear.Values) Solver { return &minres{} },
}

// minres minimises √(rᵀM⁻¹r) over the Krylov space of M⁻¹A, for symmetric A,
// definite or not, and symmetric positive definite M. givens turns the
// tridiagonal matrix of the Lanczos process into R, and the directions follow
// from γ_k w_k = v_k − δ_k w_{k−1} − ε_k w_{k−2}. They are kept as β_k γ_k w_k,
// so that z_k = β_k v_k enters unscaled.
type minres struct {
	core
	lanczos
	g       givens
	w, wOld []float64 // β γ w of the last two steps, length n
	s, sOld float64   // their β γ; 1 before there is one
	size    float64   // largest |α| and β so far: the scale of T
}

func (s *minres) Begin(p Problem) (trace.Reading, error) {
	*s = minres{s: 1, sOld: 1}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	s.w, s.wOld = linear.Bulk[float64](s.n), linear.Bulk[float64](s.n)
	if end, ok := s.open(&s.core, p.X); !ok {
		return end, nil
	}
	s.g = newGivens(s.beta)
	return s.start(s.beta), nil
}

func (s *minres) Step() (trace.Reading, error) {
	s.next()
	alpha, beta, z, end, ok := s.extend(&s.core)
	if !ok {
		return end, nil
	}
	s.size = max(s.size, math.Abs(alpha), beta)
	step := s.g.turn(alpha, beta)
	if s.g.gamma <= 16*unit*s.size { // T is singular: nothing more of b is in reach
		return s.reading(alpha, beta, true), nil
	}
	s.move(step)
	s.last = s.g.rest
	s.advance(z, beta, s.plain)
	exhausted := beta <= 16*unit*s.size
	return s.reading(alpha, beta, exhausted || s.last == 0), nil
}

// move makes w_k and takes the step along it.
func (s *minres) move(step float64) {
	scale := s.beta * s.g.gamma
	linear.Recur(s.wOld, s.z, -s.g.eps*s.beta/s.sOld, s.w, -s.g.delta*s.beta/s.s)
	linear.Axpy(step/scale, s.wOld, s.x)
	s.w, s.wOld = s.wOld, s.w
	s.s, s.sOld = scale, s.s
}

func (s *minres) Solution(dst []float64) { copy(dst, s.x) }
