package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var fcgEntry = Entry{
	Name: "fcg", Title: "flexible conjugate gradients",
	Source: "Notay, SIAM J. Sci. Comput. 22 (2000) 1444–1460",
	Params: []linear.Param{{Name: "m", Kind: linear.Int, Default: 1,
		Min: 1, Max: 100, Meaning: "most directions kept"}},
	Assumes:  linear.AssumesSymmetric | linear.AssumesDefinite | linear.AssumesSymmetricM,
	Norm:     trace.TwoNorm,
	Products: "1",
	Energy:   true,
	Memory:   func(n int, v linear.Values) int64 { return vectors(3+2*v.Int("m"), n) },
	New:      func(v linear.Values) Solver { return &fcg{kept: v.Int("m")} },
}

// fcg is the conjugate gradient method for a preconditioner that may change
// from step to step. Each direction is made conjugate to the m_k last ones by
// their products, with Notay's m_k = max(1, k mod (m+1)):
//
//	p_k = z_k − Σ (z_kᵀA p_i / p_iᵀA p_i) p_i        z_k = M_k⁻¹ r_k
//	α_k = r_kᵀp_k / p_kᵀA p_k,  x += α p,  r −= α A p
//
// Every step is exact along its direction, so the energy norm of the error
// cannot grow on a positive definite A, whatever M does. With a fixed M and
// m = 1 the iterates are those of cg, at one dot product more.
type fcg struct {
	core
	curv curvature
	kept int         // m
	r, z []float64   // length n; z is r without a preconditioner
	p, q [][]float64 // the last m directions and their products, length n each
	pq   []float64   // pᵀA p of each, length m
	at   int         // where the newest stands
	have int         // how many of them are conjugated against: m_k

	indefinite bool // rᵀz < 0 has been reported
}

func (s *fcg) Begin(p Problem) (trace.Reading, error) {
	*s = fcg{kept: s.kept, at: -1}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	s.r = linear.Bulk[float64](s.n)
	s.z = s.r
	if !s.plain {
		s.z = linear.Bulk[float64](s.n)
	}
	s.p, s.q, s.pq = arrays(s.kept, s.n), arrays(s.kept, s.n), make([]float64, s.kept)
	return s.start(s.residual(s.r, p.X)), nil
}

// arrays returns k vectors of length n.
func arrays(k, n int) [][]float64 {
	v := make([][]float64, k)
	for i := range v {
		v[i] = linear.Bulk[float64](n)
	}
	return v
}

func (s *fcg) Step() (trace.Reading, error) {
	s.next()
	if !s.plain {
		s.m.Apply(s.z, s.r) // the preconditioner
	}
	s.direct()
	p, q := s.p[s.at], s.q[s.at]
	pq := linear.ApplyDot(s.a, q, p) // the product
	if !finite(pq) {
		return s.overflow("p'Ap", pq)
	}
	s.curv.watch(&s.core, p, pq)
	pr := linear.Dot(p, s.r)
	s.watchM(pr)
	switch {
	case pr == 0 && s.last <= exact*s.first:
		return s.ended()
	case pr == 0:
		return s.broken("r'p", 0)
	case pq == 0:
		return s.broken("p'Ap", 0)
	}
	alpha := pr / pq
	res := root(linear.AxpyDot(-alpha, q, s.r, s.r), s.r)
	if !finite(alpha) || !finite(res) {
		return s.overflow("alpha", alpha)
	}
	linear.Axpy(alpha, p, s.x)
	s.pq[s.at], s.last = pq, res
	return s.reading(alpha, math.NaN(), res == 0), nil
}

// direct makes the next direction from z. The one that gives its place to it
// is conjugated against first, and the rest from the newest back.
func (s *fcg) direct() {
	k := int(s.iter) - 1
	if s.have = 0; k > 0 {
		s.have = max(1, k%(s.kept+1))
	}
	next := (s.at + 1) % s.kept
	beta := 0.0
	if s.have == s.kept {
		beta = -linear.Dot(s.z, s.q[next]) / s.pq[next]
	}
	old := s.at
	linear.Xpby(s.z, beta, s.p[next])
	for i := 0; i < s.have && i < s.kept-1; i++ {
		at := (old - i + s.kept) % s.kept
		linear.Axpy(-linear.Dot(s.z, s.q[at])/s.pq[at], s.p[at], s.p[next])
	}
	s.at = next
}

// watchM reports the first rᵀM⁻¹r below zero, relative to ‖r‖‖M⁻¹r‖; r is
// orthogonal to the earlier directions, so rᵀp has its sign.
func (s *fcg) watchM(pr float64) {
	if pr >= 0 || s.indefinite || s.plain {
		return
	}
	if rz := linear.Dot(s.r, s.z); rz < 0 {
		s.indefinite = true
		s.event(trace.PrecondIndefinite, "r'inv(M)r", cosine(rz, s.last, linear.Norm2(s.z)))
	}
}

func (s *fcg) Solution(dst []float64) { copy(dst, s.x) }

// Curvature shows the direction of the last step and its product.
func (s *fcg) Curvature() (p, q []float64) { return s.p[s.at], s.q[s.at] }
