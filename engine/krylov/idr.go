package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var idrEntry = Entry{
	Name: "idr", Title: "induced dimension reduction",
	Source: "van Gijzen and Sonneveld, ACM Trans. Math. Softw. 38 (2011) 5:1–19",
	Params: []linear.Param{{Name: "s", Kind: linear.Int, Default: 4, Min: 1, Max: 32,
		Meaning: "dimension of the shadow space"}},
	Assumes:     linear.AssumesFixedM,
	Norm:        trace.TwoNorm,
	Products:    "s+1",
	NoGuarantee: true,
	Memory: func(n int, v linear.Values) int64 {
		s := min(n, v.Int("s"))
		return vectors(3*s+4, n) + int64(s)*(4*24+8*int64(s)+16)
	},
	New: func(v linear.Values) Solver { return &idr{want: v.Int("s")} },
}

// idrSeed starts the sequence that the shadow space is made of.
const idrSeed = 1

// idrAngle is the κ of the paper: the least cosine between t and r for which ω
// is taken as it minimises.
const idrAngle = 0.7

// idr is IDR(s), the variant with bi-orthogonal vectors, preconditioned from
// the right. The residuals are forced into spaces of falling dimension,
// G_j = (I − ω_j A M⁻¹)(G_{j−1} ∩ P⊥), with the s columns p of P random. A step
// fills one of them, with s + 1 products:
//
//	f = Pᵀr;  for k = 1…s:
//	  c from L c = f (rows k…s),  v = r − Σ c_i g_i,  u = Σ c_i u_i + ω M⁻¹v,  g = A u
//	  g −= (p_iᵀg/L_ii) g_i,  u −= (p_iᵀg/L_ii) u_i (i < k);  L_ik = p_iᵀg (i ≥ k)
//	  β = f_k/L_kk,  r −= β g,  x += β u,  f −= β L_k
//	t = A M⁻¹r,  ω = tᵀr/tᵀt,  r −= ω t,  x += ω M⁻¹r
//
// In exact arithmetic it ends within n + n/s products. ω is enlarged where t
// and r are close to perpendicular (Sleijpen and van der Vorst 1995).
type idr struct {
	core
	want    int
	p, g, u [][]float64 // s vectors of length n each
	l       [][]float64 // s x s, lower triangular
	f, c    []float64   // length s
	r, v, h []float64   // length n; v is also t; h is M⁻¹v, v's place without a preconditioner
	omega   float64
}

func (s *idr) Begin(p Problem) (trace.Reading, error) {
	*s = idr{want: s.want}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	dim := min(s.n, s.want)
	s.p, s.g, s.u, s.l = rows(dim, s.n), rows(dim, s.n), rows(dim, s.n), rows(dim, dim)
	s.f, s.c = make([]float64, dim), make([]float64, dim)
	s.r, s.v = linear.Bulk[float64](s.n), linear.Bulk[float64](s.n)
	if s.h = s.v; !s.plain {
		s.h = linear.Bulk[float64](s.n)
	}
	s.shadows()
	s.omega = 1
	return s.start(s.residual(s.r, p.X)), nil
}

// shadows fills P with orthonormal random vectors.
func (s *idr) shadows() {
	for i, v := range s.p {
		s.l[i][i] = 1
		linear.Uniform(v, idrSeed+uint64(i)<<32)
		for range 2 {
			for _, w := range s.p[:i] {
				linear.Axpy(-linear.Dot(w, v), w, v)
			}
		}
		linear.Scale(v, 1/linear.Norm2(v), v)
	}
}

func (s *idr) Step() (trace.Reading, error) {
	s.next()
	for i, p := range s.p {
		s.f[i] = linear.Dot(p, s.r)
	}
	for k := range s.p {
		s.direction(k)
		s.a.Apply(s.g[k], s.u[k]) // a product
		s.biorthogonalise(k)
		if c := cosine(s.l[k][k], linear.Norm2(s.g[k]), 1); lost(c) {
			return s.vanished("p'g", c)
		}
		beta := s.f[k] / s.l[k][k]
		res := root(linear.AxpyDot(-beta, s.g[k], s.r, s.r), s.r)
		if !finite(beta) || !finite(res) {
			return s.overflow("beta", beta)
		}
		linear.Axpy(beta, s.u[k], s.x)
		if s.last = res; res == 0 {
			return s.ended()
		}
		for i := k; i < len(s.p); i++ {
			s.f[i] -= beta * s.l[i][k]
		}
	}
	return s.reduce()
}

// direction makes u_k from the part of r that is perpendicular to p_k…p_s.
func (s *idr) direction(k int) {
	copy(s.v, s.r)
	for i := k; i < len(s.c); i++ {
		c := s.f[i]
		for j := k; j < i; j++ {
			c -= s.l[i][j] * s.c[j]
		}
		s.c[i] = c / s.l[i][i]
		linear.Axpy(-s.c[i], s.g[i], s.v)
	}
	if !s.plain {
		s.m.Apply(s.h, s.v)
	}
	linear.Lin(s.u[k], s.c[k], s.u[k], s.omega, s.h)
	for i := k + 1; i < len(s.c); i++ {
		linear.Axpy(s.c[i], s.u[i], s.u[k])
	}
}

// biorthogonalise makes g_k perpendicular to p_1…p_{k−1}, and u_k with it, and
// fills column k of L.
func (s *idr) biorthogonalise(k int) {
	for i := range k {
		a := linear.Dot(s.p[i], s.g[k]) / s.l[i][i]
		linear.Axpy(-a, s.g[i], s.g[k])
		linear.Axpy(-a, s.u[i], s.u[k])
	}
	for i := k; i < len(s.p); i++ {
		s.l[i][k] = linear.Dot(s.p[i], s.g[k])
	}
}

// reduce enters the next space: the last product of the step.
func (s *idr) reduce() (trace.Reading, error) {
	h := s.r
	if !s.plain {
		h = s.h
		s.m.Apply(h, s.r)
	}
	s.a.Apply(s.v, h)
	tr, tt := linear.Dot2(s.v, s.r, s.v)
	c := cosine(tr, root(tt, s.v), s.last)
	if lost(c) {
		return s.vanished("omega", c)
	}
	omega := tr / tt
	if a := math.Abs(c); a < idrAngle {
		omega *= idrAngle / a
	}
	if !finite(omega) {
		return s.overflow("omega", omega)
	}
	linear.Axpy(omega, h, s.x) // before r, which h may be, moves on
	res := root(linear.AxpyDot(-omega, s.v, s.r, s.r), s.r)
	s.omega, s.last = omega, res
	return s.reading(math.NaN(), math.NaN(), res == 0), nil
}

func (s *idr) Solution(dst []float64) { copy(dst, s.x) }
