package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var gcrEntry = Entry{
	Name: "gcr", Title: "generalised conjugate residuals, restarted",
	Source: "Eisenstat, Elman and Schultz, SIAM J. Numer. Anal. 20 (1983) 345–357",
	Params: []linear.Param{{Name: "m", Kind: linear.Int, Default: 30, Min: 1, Max: 500,
		Meaning: "restart length: directions in a cycle"}},
	Norm:      trace.TwoNorm,
	Products:  "1",
	Restarted: true,
	Monotone:  true,
	Memory: func(n int, v linear.Values) int64 {
		m := cycle(n, v)
		return vectors(2*m+2, n) + 48*int64(m)
	},
	New: func(v linear.Values) Solver { return &gcr{values: v} },
}

// gcr is GCR(m); M may change from step to step:
//
//	p = M⁻¹r,  q = A p,  h_i = q_iᵀq,  q −= h_i q_i,  p −= h_i p_i,  both over ‖q‖
//	γ = qᵀr,   x += γ p,  r −= γ q
//
// The q are orthonormal, so that ‖r‖ is the least over the cycle's space, as
// in GMRES(m), and x and r are at hand at every step. Where γ vanishes (qᵀr
// can, unless the symmetric part of A M⁻¹ is definite) the next direction is
// the same again and the cycle is at its end, where GMRES would go on. The
// restart measures b − Ax again.
type gcr struct {
	core
	values  linear.Values
	p, q    [][]float64 // m vectors of length n each; A p = q
	r       []float64   // length n
	k       int         // directions in the cycle
	opening float64     // ‖r‖ at the start of the cycle
	angle   float64     // of the direction that ended the cycle early; 1 before
}

func (s *gcr) Begin(p Problem) (trace.Reading, error) {
	*s = gcr{values: s.values, angle: 1}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	m := cycle(s.n, s.values)
	s.p, s.q, s.r = rows(m, s.n), rows(m, s.n), linear.Bulk[float64](s.n)
	s.opening = s.residual(s.r, p.X)
	return s.start(s.opening), nil
}

func (s *gcr) Step() (trace.Reading, error) {
	s.next()
	if (s.k == len(s.p) || s.angle < 1) && s.restart() {
		return s.ended()
	}
	p, q := s.p[s.k], s.q[s.k]
	s.m.Apply(p, s.r)
	s.a.Apply(q, p) // the product
	before := linear.Norm2(q)
	after := before
	if s.k > 0 {
		after = s.project(p, q)
	}
	if after < 0.1*math.Sqrt2/2*before && after > 0 {
		after = s.project(p, q)
	}
	if !finite(before) || !finite(after) {
		return s.overflow("|A inv(M) r|", before)
	}
	if after <= 8*float64(s.k+1)*unit*before {
		s.angle = cosine(after, before, 1)
		return s.reading(math.NaN(), math.NaN(), false), nil
	}
	return s.advance(after)
}

// advance takes the step along the new direction, with ‖q‖ = size.
func (s *gcr) advance(size float64) (trace.Reading, error) {
	p, q := s.p[s.k], s.q[s.k]
	linear.Scale(p, 1/size, p)
	linear.Scale(q, 1/size, q)
	gamma := linear.Dot(q, s.r)
	linear.Axpy(gamma, p, s.x)
	s.last = root(linear.AxpyDot(-gamma, q, s.r, s.r), s.r)
	s.k++
	return s.reading(math.NaN(), math.NaN(), s.last == 0), nil
}

// project removes the former q from q, and p with them; it returns ‖q‖.
func (s *gcr) project(p, q []float64) float64 {
	h := linear.Dot(s.q[0], q)
	for i := range s.k {
		linear.Axpy(-h, s.p[i], p)
		next := q
		if i+1 < s.k {
			next = s.q[i+1]
		}
		h = linear.AxpyDot(-h, s.q[i], q, next)
	}
	return root(h, q)
}

// restart measures the residual afresh and drops the directions. It says
// whether that is the end: a cycle that ended early and left the residual as
// it was is at the floor or, if its own r did not fall either, broke down.
func (s *gcr) restart() (end bool) {
	told := s.last
	s.last = linear.Residual(s.r, s.a, s.x, s.b) // one more product
	if !finite(s.last) {
		s.event(trace.NonFinite, "|b-Ax|", s.last)
	}
	factor := s.last / s.opening
	s.event(trace.Restart, "cycle factor", factor)
	stuck := s.angle < 1 && factor > 0.999
	if stuck && told > 0.999*s.opening {
		s.event(trace.Breakdown, "|A inv(M) r|", s.angle)
	}
	s.opening, s.k, s.angle = s.last, 0, 1
	return stuck || s.last == 0 || !finite(s.last)
}

func (s *gcr) Solution(dst []float64) { copy(dst, s.x) }
