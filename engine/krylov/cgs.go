package krylov

import (
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var cgsEntry = Entry{
	Name: "cgs", Title: "conjugate gradients squared",
	Source:      "Sonneveld, SIAM J. Sci. Stat. Comput. 10 (1989) 36–52",
	Assumes:     linear.AssumesFixedM,
	Norm:        trace.TwoNorm,
	Products:    "2",
	NoGuarantee: true,
	Memory:      func(n int, _ linear.Values) int64 { return vectors(9, n) },
	New:         func(linear.Values) Solver { return &cgs{} },
}

// cgs is CGS, preconditioned from the right, with the shadow vector r̂ = r₀:
//
//	u = r + β q,  p = u + β (q + β p),  v = A M⁻¹p,  α = r̂ᵀr / r̂ᵀv
//	q = u − α v,  x += α M⁻¹(u + q),    r −= α A M⁻¹(u + q)
//	β = r̂ᵀr new / old
//
// Its residual polynomial is the square of BiCG's, so that a residual of BiCG
// which grows grows here twice as far, and x loses that many digits.
type cgs struct {
	core
	r, shadow, p, q, v []float64 // length n
	u, t               []float64 // u, later u + q; A M⁻¹(u + q)
	h                  []float64 // M⁻¹ of p, later of u + q; nil without a preconditioner
	rho, beta          float64
	angle              float64 // the cosine of ρ
	shadowNorm         float64
}

func (s *cgs) Begin(p Problem) (trace.Reading, error) {
	*s = cgs{}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	for _, v := range []*[]float64{&s.r, &s.shadow, &s.p, &s.q, &s.v, &s.u, &s.t} {
		*v = linear.Bulk[float64](s.n)
	}
	if !s.plain {
		s.h = linear.Bulk[float64](s.n)
	}
	res := s.residual(s.r, p.X)
	copy(s.shadow, s.r)
	s.rho, s.shadowNorm, s.angle = linear.Dot(s.r, s.r), res, 1
	return s.start(res), nil
}

func (s *cgs) Step() (trace.Reading, error) {
	s.next()
	if lost(s.angle) {
		return s.vanished("rho", s.angle)
	}
	linear.Lin(s.u, 1, s.r, s.beta, s.q)
	linear.Lin(s.p, s.beta*s.beta, s.p, s.beta, s.q)
	linear.Axpy(1, s.u, s.p)
	s.a.Apply(s.v, s.solved(s.p)) // the first product
	rv, vv := linear.Dot2(s.v, s.shadow, s.v)
	if c := cosine(rv, s.shadowNorm, root(vv, s.v)); lost(c) {
		return s.vanished("rhat'v", c)
	}
	alpha := s.rho / rv
	linear.Lin(s.q, 1, s.u, -alpha, s.v)
	linear.Axpy(1, s.q, s.u)
	h := s.solved(s.u)
	s.a.Apply(s.t, h) // the second product
	rr, rho := linear.AxpyDot2(-alpha, s.t, s.r, s.shadow)
	res := root(rr, s.r)
	if !finite(alpha) || !finite(res) {
		return s.overflow("alpha", alpha)
	}
	linear.Axpy(alpha, h, s.x)
	s.beta, s.angle = rho/s.rho, cosine(rho, s.shadowNorm, res)
	s.rho, s.last = rho, res
	return s.reading(alpha, s.beta, res == 0), nil
}

// solved returns M⁻¹x: x itself without a preconditioner, else in h.
func (s *cgs) solved(x []float64) []float64 {
	if s.plain {
		return x
	}
	s.m.Apply(s.h, x)
	return s.h
}

func (s *cgs) Solution(dst []float64) { copy(dst, s.x) }
