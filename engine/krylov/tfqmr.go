package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var tfqmrEntry = Entry{
	Name: "tfqmr", Title: "quasi-minimal residual without transposes",
	Source:   "Freund, SIAM J. Sci. Comput. 14 (1993) 470–482",
	Assumes:  linear.AssumesFixedM,
	Norm:     trace.TwoNorm,
	Products: "2",
	Memory:   func(n int, _ linear.Values) int64 { return vectors(11, n) },
	New:      func(linear.Values) Solver { return &tfqmr{} },
}

// tfqmr is TFQMR, preconditioned from the right, with the shadow vector
// r̂ = r₀. A step is two of the paper's, m = 2k−1 and 2k, over one α of CGS:
//
//	α = r̂ᵀw / r̂ᵀv,  y' = y − α v
//	for y, then y':
//	  w −= α A M⁻¹y,  θ = ‖w‖/τ,  c² = 1/(1 + θ²)
//	  d = M⁻¹y + (θ²η)_old/α d,  η = c²α,  τ = τ θ c
//	  x += η d,  r = (1 − c²) r + c² w
//	β = r̂ᵀw new / old,  y = w + β y',  v = A M⁻¹y + β (A M⁻¹y' + β v)
//
// The paper has no r, only τ √(m+1) ≥ ‖r‖; its line above follows from those
// of w and d and costs one vector, so that the number watched is ‖r‖ itself.
type tfqmr struct {
	core
	r, shadow, w, d, v []float64 // length n
	y, u, y2, u2       []float64 // the two y of a step, and A M⁻¹ of them
	h                  []float64 // M⁻¹ of the y at hand; nil without a preconditioner
	tau, drag          float64   // τ and θ²η of the last half step
	size               float64   // ‖w‖
	rho, alpha, beta   float64
	angle, shadowNorm  float64 // the cosine of ρ; ‖r̂‖
}

func (s *tfqmr) Begin(p Problem) (trace.Reading, error) {
	*s = tfqmr{}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	for _, v := range []*[]float64{&s.r, &s.shadow, &s.w, &s.d, &s.v, &s.y, &s.u, &s.y2, &s.u2} {
		*v = linear.Bulk[float64](s.n)
	}
	if !s.plain {
		s.h = linear.Bulk[float64](s.n)
	}
	res := s.residual(s.r, p.X)
	copy(s.shadow, s.r)
	copy(s.w, s.r)
	s.rho, s.shadowNorm, s.tau, s.angle = linear.Dot(s.r, s.r), res, res, 1
	return s.start(res), nil
}

func (s *tfqmr) Step() (trace.Reading, error) {
	s.next()
	if lost(s.angle) {
		return s.vanished("rho", s.angle)
	}
	linear.Lin(s.y, 1, s.w, s.beta, s.y2)
	h := s.apply(s.u, s.y) // the first product
	linear.Lin(s.v, s.beta*s.beta, s.v, s.beta, s.u2)
	linear.Axpy(1, s.u, s.v)
	rv, vv := linear.Dot2(s.v, s.shadow, s.v)
	if c := cosine(rv, s.shadowNorm, root(vv, s.v)); lost(c) {
		return s.vanished("rhat'v", c)
	}
	s.alpha = s.rho / rv
	if done, r := s.half(h, s.u); done {
		return r, nil
	}
	linear.Lin(s.y2, 1, s.y, -s.alpha, s.v)
	h = s.apply(s.u2, s.y2) // the second product
	if done, r := s.half(h, s.u2); done {
		return r, nil
	}
	rho := linear.Dot(s.shadow, s.w)
	s.beta, s.angle = rho/s.rho, cosine(rho, s.shadowNorm, s.size)
	s.rho = rho
	return s.reading(s.alpha, s.beta, false), nil
}

// half makes one step of the paper, with h = M⁻¹y and u = A h. It says whether
// that is the end.
func (s *tfqmr) half(h, u []float64) (bool, trace.Reading) {
	s.size = root(linear.AxpyDot(-s.alpha, u, s.w, s.w), s.w)
	if !finite(s.alpha) || !finite(s.size) {
		r, _ := s.overflow("alpha", s.alpha)
		return true, r
	}
	theta := s.size / s.tau
	c := 1 / math.Hypot(1, theta)
	linear.Lin(s.d, 1, h, s.drag/s.alpha, s.d)
	eta := c * c * s.alpha
	linear.Axpy(eta, s.d, s.x)
	sine := theta * c
	s.last = root(linear.LinDot(s.r, sine*sine, s.r, c*c, s.w), s.r)
	s.tau *= sine
	s.drag = sine * sine * s.alpha // θ²η
	return s.tau == 0, s.reading(s.alpha, math.NaN(), true)
}

// apply computes dst = A M⁻¹y and returns M⁻¹y.
func (s *tfqmr) apply(dst, y []float64) []float64 {
	h := y
	if !s.plain {
		h = s.h
		s.m.Apply(h, y)
	}
	s.a.Apply(dst, h)
	return h
}

func (s *tfqmr) Solution(dst []float64) { copy(dst, s.x) }
