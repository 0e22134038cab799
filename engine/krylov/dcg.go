package krylov

import (
	"errors"
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var dcgEntry = Entry{
	Name: "dcg", Title: "deflated conjugate gradients",
	Source: "Saad, Yeung, Erhel and Guyomarc'h, SIAM J. Sci. Comput. 21 (2000) 1909–1926; Wu and Simon, SIAM J. Matrix Anal. Appl. 22 (2000) 602–616",
	Params: []linear.Param{
		{Name: "k", Kind: linear.Int, Default: 4, Min: 1, Max: 100, Meaning: "vectors taken out, at most"},
		{Name: "space", Kind: linear.Choice, Quiet: true, Choices: []string{"ritz", "given"},
			Meaning: "the smallest Ritz vectors, found first, or the first of the near-null vectors given"},
	},
	Assumes:  linear.AssumesSymmetric | linear.AssumesDefinite | linear.AssumesFixedM | linear.AssumesSymmetricM,
	Norm:     trace.TwoNorm,
	Products: "1, after the set-up",
	Energy:   true,
	Memory: func(n int, v linear.Values) int64 {
		return vectors(5+2*(ritzSpace(v.Int("k"), n)+1), n)
	},
	New: func(v linear.Values) Solver { return &dcg{k: v.Int("k"), given: v.Choice("space") == "given"} },
}

const (
	projectFall  = 1e-3 // a fall of the residual after which it is projected again
	projectSteps = 50   // and the most steps between two projections
)

// dcg is the conjugate gradient method with a space W taken out, WᵀA W = I:
// that of the k smallest Ritz vectors of M⁻¹A, or of near-null vectors given. The residual is made orthogonal to W
// first, and every direction conjugate to it:
//
//	x += W Wᵀr,  r −= A W Wᵀr
//	p = z + β p − W (A W)ᵀz        z = M⁻¹ r
//	α = rᵀz / pᵀA p,  x += α p,  r −= α A p
//
// The iteration then sees the rest of the spectrum alone. Rounding brings W
// back into r, so that the first line is repeated after some steps. Any W is
// valid: the better its vectors, the fewer the steps, and without any this is
// cg. Begin finds them, see smallestRitz and conjugateNear, and its products count.
type dcg struct {
	core
	curv       curvature
	k          int
	given      bool        // W is made from the near-null vectors of the problem
	w, aw      [][]float64 // W and A W, at most k vectors of length n
	r, z, p, q []float64   // length n; z is r without a preconditioner
	rho        float64     // rᵀz of the last step; 0 before the first
	projected  float64     // ‖r‖ at the last projection; 0 before the first
	since      int         // steps since
	indefinite bool        // rᵀz < 0 has been reported
}

func (s *dcg) Begin(p Problem) (trace.Reading, error) {
	*s = dcg{k: s.k, given: s.given}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	s.r, s.p, s.q = linear.Bulk[float64](s.n), linear.Bulk[float64](s.n), linear.Bulk[float64](s.n)
	s.z = s.r
	if !s.plain {
		s.z = linear.Bulk[float64](s.n)
	}
	if rd := s.start(s.residual(s.r, p.X)); rd.Done {
		return rd, nil
	}
	if s.given {
		s.w, s.aw = conjugateNear(&s.core, p.Near, s.k)
		if len(s.w) == 0 {
			return trace.Reading{}, errors.New("no near-null vector is given that A maps to more than rounding")
		}
		return s.reading(math.NaN(), math.NaN(), false), nil
	}
	w, aw, bad := smallestRitz(&s.core, s.k)
	if bad < 0 {
		s.indefinite = true
		s.event(trace.PrecondIndefinite, "r'inv(M)r", bad)
	}
	s.w, s.aw = w, aw
	return s.reading(math.NaN(), math.NaN(), false), nil
}

func (s *dcg) Step() (trace.Reading, error) {
	s.next()
	s.project()
	if s.last == 0 {
		return s.reading(math.NaN(), math.NaN(), true), nil
	}
	rho := s.last * s.last
	if !s.plain {
		rho = s.precondition(s.z, s.r) // the preconditioner
	}
	if rho == 0 || !finite(rho) {
		return s.stuck(rho)
	}
	beta := 0.0
	if s.rho != 0 {
		beta = rho / s.rho
	}
	s.direct(beta)
	pq := linear.ApplyDot(s.a, s.q, s.p) // the product
	if !finite(pq) {
		return s.overflow("p'Ap", pq)
	}
	s.watchM(rho)
	s.curv.watch(&s.core, s.p, pq)
	if pq == 0 {
		return s.broken("p'Ap", 0)
	}
	alpha := rho / pq
	res := root(linear.AxpyDot(-alpha, s.q, s.r, s.r), s.r)
	if !finite(alpha) || !finite(res) {
		return s.overflow("alpha", alpha)
	}
	linear.Axpy(alpha, s.p, s.x)
	s.rho, s.last = rho, res
	s.since++
	return s.reading(alpha, beta, res == 0), nil
}

// direct makes p = z + β p − W (A W)ᵀz.
func (s *dcg) direct(beta float64) {
	linear.Xpby(s.z, beta, s.p)
	for i, w := range s.w {
		linear.Axpy(-linear.Dot(s.aw[i], s.z), w, s.p)
	}
}

// project makes the residual orthogonal to W where it is time to.
func (s *dcg) project() {
	if len(s.w) == 0 || s.since < projectSteps && s.last > projectFall*s.projected && s.projected > 0 {
		return
	}
	for i, w := range s.w {
		y := linear.Dot(w, s.r)
		linear.Axpy(y, w, s.x)
		linear.Axpy(-y, s.aw[i], s.r)
	}
	s.last = linear.Norm2(s.r)
	s.projected, s.since = s.last, 0
}

// watchM reports the first rᵀM⁻¹r below zero, relative to ‖r‖‖M⁻¹r‖.
func (s *dcg) watchM(rho float64) {
	if rho < 0 && !s.indefinite {
		s.indefinite = true
		s.event(trace.PrecondIndefinite, "r'inv(M)r", cosine(rho, s.last, linear.Norm2(s.z)))
	}
}

// stuck ends a trial whose rᵀz is zero or undefined.
func (s *dcg) stuck(rho float64) (trace.Reading, error) {
	switch {
	case !finite(rho):
		return s.overflow("r'inv(M)r", rho)
	case s.last <= exact*s.first:
		return s.ended()
	}
	return s.broken("r'inv(M)r", 0)
}

func (s *dcg) Solution(dst []float64) { copy(dst, s.x) }

// Curvature shows the direction of the last step and its product.
func (s *dcg) Curvature() (p, q []float64) { return s.p, s.q }
