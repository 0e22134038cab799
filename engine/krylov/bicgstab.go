package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var bicgstabEntry = Entry{
	Name: "bicgstab", Title: "stabilised biconjugate gradients",
	Source:      "van der Vorst, SIAM J. Sci. Stat. Comput. 13 (1992) 631–644",
	Assumes:     linear.AssumesFixedM,
	Norm:        trace.TwoNorm,
	Products:    "2",
	NoGuarantee: true,
	Memory:      func(n int, _ linear.Values) int64 { return vectors(8, n) },
	New:         func(linear.Values) Solver { return &bicgstab{} },
}

// bicgstab is BiCGStab, preconditioned from the right, with the shadow vector
// r̂ = r₀:
//
//	p = r + β (p − ω v),   v = A M⁻¹p,   α = r̂ᵀr / r̂ᵀv
//	s = r − α v,           t = A M⁻¹s,   ω = tᵀs / tᵀt
//	x += α M⁻¹p + ω M⁻¹s,  r = s − ω t,  β = (r̂ᵀr_new / r̂ᵀr) (α/ω)
//
// Its α and β are those of BiCG.
type bicgstab struct {
	core
	r, shadow, p, v, t []float64 // length n; s lies in r
	ph, sh             []float64 // M⁻¹p, M⁻¹s; p and r without a preconditioner
	rho, beta, omega   float64
	shadowNorm         float64
	peak               float64 // largest ‖r‖ so far
}

func (s *bicgstab) Begin(p Problem) (trace.Reading, error) {
	*s = bicgstab{}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	for _, v := range []*[]float64{&s.r, &s.shadow, &s.p, &s.v, &s.t} {
		*v = linear.Bulk[float64](s.n)
	}
	s.ph, s.sh = s.p, s.r
	if !s.plain {
		s.ph, s.sh = linear.Bulk[float64](s.n), linear.Bulk[float64](s.n)
	}
	res := s.residual(s.r, p.X)
	copy(s.shadow, s.r)
	s.rho, s.shadowNorm, s.peak = linear.Dot(s.r, s.r), res, res
	return s.start(res), nil
}

func (s *bicgstab) Step() (trace.Reading, error) {
	s.next()
	if c := cosine(s.rho, s.shadowNorm, s.last); lost(c) {
		return s.vanished("rho", c)
	}
	linear.Recur(s.p, s.r, s.beta, s.v, -s.beta*s.omega)
	s.apply(s.v, s.ph, s.p) // the first product
	rv, vv := linear.Dot2(s.v, s.shadow, s.v)
	if c := cosine(rv, s.shadowNorm, root(vv, s.v)); lost(c) {
		return s.vanished("rhat'v", c)
	}
	alpha := s.rho / rv
	half := root(linear.AxpyDot(-alpha, s.v, s.r, s.r), s.r)
	s.peak = max(s.peak, half)
	switch {
	case !finite(alpha) || !finite(half):
		return s.overflow("alpha", alpha)
	case settled(half, s.last, s.peak):
		return s.halfStep(alpha, half)
	}
	s.apply(s.t, s.sh, s.r) // the second product
	ts, tt := linear.Dot2(s.t, s.r, s.t)
	if c := cosine(ts, root(tt, s.t), half); lost(c) {
		linear.Axpy(alpha, s.ph, s.x)
		s.last = half
		return s.vanished("omega", c)
	}
	return s.finish(alpha, ts/tt, half)
}

// finish takes the whole step: x, the new residual and β.
func (s *bicgstab) finish(alpha, omega, half float64) (trace.Reading, error) {
	if !finite(omega) {
		return s.overflow("omega", omega)
	}
	linear.Axpy2(s.x, alpha, s.ph, omega, s.sh)
	rr, rho := linear.AxpyDot2(-omega, s.t, s.r, s.shadow)
	res := root(rr, s.r) // at most 2‖s‖, since ‖ωt‖ ≤ ‖s‖
	s.beta = rho / s.rho * (alpha / omega)
	s.rho, s.omega, s.last, s.peak = rho, omega, res, max(s.peak, res)
	return s.reading(alpha, s.beta, res == 0), nil
}

// apply computes dst = A M⁻¹x and leaves M⁻¹x in h (h is x without M).
func (s *bicgstab) apply(dst, h, x []float64) {
	if !s.plain {
		s.m.Apply(h, x)
	}
	s.a.Apply(dst, h)
}

// halfStep ends the trial with the solution that the half step found: ‖s‖ is
// zero to rounding while ‖r‖ was not, so that ω would be 0/0.
func (s *bicgstab) halfStep(alpha, half float64) (trace.Reading, error) {
	linear.Axpy(alpha, s.ph, s.x)
	s.event(trace.HalfStep, "|s|/|r0|", half/s.first)
	s.last = half
	return s.reading(alpha, math.NaN(), true), nil
}

func (s *bicgstab) Solution(dst []float64) { copy(dst, s.x) }
