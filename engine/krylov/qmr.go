package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var qmrEntry = Entry{
	Name: "qmr", Title: "quasi-minimal residual",
	Source: "Freund and Nachtigal, Numer. Math. 60 (1991) 315–339; the coupled two-term form, " +
		"without look-ahead: SIAM J. Sci. Comput. 15 (1994) 313–337",
	Needs:    linear.NeedsTranspose | linear.NeedsTransposeM,
	Assumes:  linear.AssumesFixedM,
	Norm:     trace.TwoNorm,
	Products: "2, one with the transpose",
	Memory:   func(n int, _ linear.Values) int64 { return vectors(10, n) },
	New:      func(linear.Values) Solver { return &qmr{} },
}

// qmr is QMR in coupled two-term recurrences, preconditioned from the right,
// with w₁ ∥ r₀ on the left. The vectors v are of unit length, and so are the
// z = M⁻ᵀw:
//
//	δ = zᵀv,  p = M⁻¹v − (ξδ/ε) p,  q = z − (ρδ/ε) q,  ε = qᵀA p,  β = ε/δ
//	ρ v = A p − β v,  ξ w = Aᵀq − β w     (ρ and ξ make v and z unit vectors)
//	θ = ρ/(γ_old |β|),  γ = 1/√(1 + θ²),  η = −η (ρ_old/β)(γ/γ_old)²
//	d = η p + (θ_old γ)² d,  x += d,  r −= A d
//
// A d follows the same recurrence from A p, so that the number watched is ‖r‖
// itself, not the bound that the quasi-residual gives.
type qmr struct {
	core
	adjoint
	r, v, w, z     []float64 // length n; z is w without a preconditioner
	p, q, d, ad, t []float64 // A d; t is M⁻¹v, then A p, then Aᵀq
	rho, xi        float64   // lengths of v and z before they were made units
	epsilon        float64
	theta, gamma   float64
	eta            float64
}

func (s *qmr) Begin(p Problem) (trace.Reading, error) {
	*s = qmr{}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	var err error
	if s.adjoint, err = newAdjoint(p); err != nil {
		return trace.Reading{}, err
	}
	for _, v := range []*[]float64{&s.r, &s.v, &s.w, &s.p, &s.q, &s.d, &s.ad, &s.t} {
		*v = linear.Bulk[float64](s.n)
	}
	if s.z = s.w; !s.plain {
		s.z = linear.Bulk[float64](s.n)
	}
	res := s.residual(s.r, p.X)
	s.gamma, s.eta, s.epsilon = 1, -1, 1
	if finite(res) && res > 0 {
		copy(s.v, s.r)
		copy(s.w, s.r)
		s.rho, s.xi = res, s.lengthOfZ()
	}
	return s.start(res), nil
}

// lengthOfZ computes z = M⁻ᵀw and returns its length.
func (s *qmr) lengthOfZ() float64 {
	if !s.plain {
		s.mt.ApplyT(s.z, s.w)
	}
	return linear.Norm2(s.z)
}

func (s *qmr) Step() (trace.Reading, error) {
	s.next()
	if !(s.xi > 0) || !finite(s.xi) {
		return s.vanished("xi", s.xi)
	}
	s.normalise()
	delta := linear.Dot(s.z, s.v)
	if lost(delta) {
		return s.vanished("delta", delta)
	}
	s.turn(delta)
	s.a.Apply(s.t, s.p) // the product
	pq, tt := linear.Dot2(s.t, s.q, s.t)
	if c := cosine(pq, linear.Norm2(s.q), root(tt, s.t)); lost(c) {
		return s.vanished("epsilon", c)
	}
	beta := pq / delta
	rho := root(linear.LinDot(s.v, 1, s.t, -beta, s.v), s.v)
	if !finite(beta) || !finite(rho) {
		return s.overflow("beta", beta)
	}
	s.epsilon = pq
	s.advance(beta, rho)
	s.at.ApplyT(s.t, s.q) // the product with the transpose
	linear.Xpby(s.t, -beta, s.w)
	s.rho, s.xi = rho, s.lengthOfZ()
	return s.reading(math.NaN(), math.NaN(), s.last == 0 || rho == 0), nil
}

// normalise makes v and z, and w with it, unit vectors.
func (s *qmr) normalise() {
	linear.Scale(s.v, 1/s.rho, s.v)
	linear.Scale(s.z, 1/s.xi, s.z)
	if !s.plain {
		linear.Scale(s.w, 1/s.xi, s.w)
	}
}

// turn makes the directions p and q.
func (s *qmr) turn(delta float64) {
	h := s.v
	if !s.plain {
		h = s.t
		s.m.Apply(h, s.v)
	}
	old, first := delta/s.epsilon, s.iter == 1
	if first {
		old = 0
	}
	linear.Xpby(h, -s.xi*old, s.p)
	linear.Xpby(s.z, -s.rho*old, s.q)
}

// advance takes the step of β, with ‖v‖ = rho before it is made a unit.
func (s *qmr) advance(beta, rho float64) {
	theta := rho / (s.gamma * math.Abs(beta))
	gamma := 1 / math.Hypot(1, theta)
	s.eta *= -s.rho / beta * (gamma / s.gamma) * (gamma / s.gamma)
	keep := s.theta * gamma * s.theta * gamma
	linear.Lin(s.d, s.eta, s.p, keep, s.d)
	linear.Lin(s.ad, s.eta, s.t, keep, s.ad)
	linear.Axpy(1, s.d, s.x)
	s.last = root(linear.AxpyDot(-1, s.ad, s.r, s.r), s.r)
	s.theta, s.gamma = theta, gamma
}

func (s *qmr) Solution(dst []float64) { copy(dst, s.x) }
