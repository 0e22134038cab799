package krylov

import (
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var bicgEntry = Entry{
	Name: "bicg", Title: "biconjugate gradients",
	Source:      "Fletcher, Lecture Notes in Mathematics 506 (1976) 73–89",
	Needs:       linear.NeedsTranspose | linear.NeedsTransposeM,
	Assumes:     linear.AssumesFixedM,
	Norm:        trace.TwoNorm,
	Products:    "2, one with the transpose",
	NoGuarantee: true,
	Memory:      func(n int, _ linear.Values) int64 { return vectors(9, n) },
	New:         func(linear.Values) Solver { return &bicg{} },
}

// bicg is the biconjugate gradient method with the shadow residual r̂₀ = r₀:
//
//	p = z + β p,  p̂ = ẑ + β p̂     z = M⁻¹r,  ẑ = M⁻ᵀr̂
//	α = r̂ᵀz / p̂ᵀA p
//	x += α p,  r −= α A p,  r̂ −= α Aᵀp̂
//	β = r̂ᵀz new / old
//
// On a symmetric positive definite A with such an M it is the conjugate
// gradient method, at twice the cost.
type bicg struct {
	core
	adjoint
	r, z, p, q     []float64 // length n; z is r without a preconditioner
	rh, zh, ph, qh []float64 // their shadows
	rho, beta      float64   // r̂ᵀz, and the β that the directions wait for
	angle          float64   // the cosine between r̂ and z
}

func (s *bicg) Begin(p Problem) (trace.Reading, error) {
	*s = bicg{}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	var err error
	if s.adjoint, err = newAdjoint(p); err != nil {
		return trace.Reading{}, err
	}
	for _, v := range []*[]float64{&s.r, &s.p, &s.q, &s.rh, &s.ph, &s.qh} {
		*v = linear.Bulk[float64](s.n)
	}
	s.z, s.zh = s.r, s.rh
	if !s.plain {
		s.z, s.zh = linear.Bulk[float64](s.n), linear.Bulk[float64](s.n)
	}
	res := s.residual(s.r, p.X)
	copy(s.rh, s.r)
	if finite(res) && res > 0 {
		s.meet(res)
	}
	return s.start(res), nil
}

func (s *bicg) Step() (trace.Reading, error) {
	s.next()
	if lost(s.angle) {
		return s.vanished("rho", s.angle)
	}
	linear.Xpby(s.z, s.beta, s.p)
	linear.Xpby(s.zh, s.beta, s.ph)
	s.a.Apply(s.q, s.p)     // the product
	s.at.ApplyT(s.qh, s.ph) // the product with the transpose
	pq, qq := linear.Dot2(s.q, s.ph, s.q)
	if c := cosine(pq, linear.Norm2(s.ph), root(qq, s.q)); lost(c) {
		return s.vanished("phat'Ap", c)
	}
	alpha := s.rho / pq
	res := root(linear.AxpyDot(-alpha, s.q, s.r, s.r), s.r)
	if !finite(alpha) || !finite(res) {
		return s.overflow("alpha", alpha)
	}
	linear.Axpy(alpha, s.p, s.x)
	linear.Axpy(-alpha, s.qh, s.rh)
	s.last, s.beta = res, 0
	if res > 0 {
		s.meet(res)
	}
	return s.reading(alpha, s.beta, res == 0), nil
}

// meet computes z, ẑ and ρ = r̂ᵀz, the cosine of ρ, and β. res is ‖r‖.
func (s *bicg) meet(res float64) {
	old := s.rho
	size, shadow := res, linear.Norm2(s.rh)
	if s.plain {
		s.rho = linear.Dot(s.rh, s.r)
	} else {
		s.m.Apply(s.z, s.r)
		s.mt.ApplyT(s.zh, s.rh)
		var zz float64
		s.rho, zz = linear.Dot2(s.z, s.rh, s.z)
		size = root(zz, s.z)
	}
	s.angle = cosine(s.rho, shadow, size)
	if old != 0 {
		s.beta = s.rho / old
	}
}

func (s *bicg) Solution(dst []float64) { copy(dst, s.x) }
