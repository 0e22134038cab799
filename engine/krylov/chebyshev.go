package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var chebyshevEntry = Entry{
	Name: "chebyshev", Title: "Chebyshev semi-iteration",
	Source: "Golub and Varga, Numer. Math. 3 (1961) 147–156; Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. (2003), section 12.3",
	Params: []linear.Param{
		{Name: "lo", Kind: linear.Real, Quiet: true, Min: 0, Max: 1e300, Meaning: "lower bound of the spectrum of inv(M)A; 0 = estimate"},
		{Name: "hi", Kind: linear.Real, Quiet: true, Min: 0, Max: 1e300, Meaning: "upper bound of the spectrum of inv(M)A; 0 = estimate"},
	},
	Assumes:     linear.AssumesSymmetric | linear.AssumesDefinite | linear.AssumesFixedM | linear.AssumesSymmetricM,
	Norm:        trace.TwoNorm,
	Products:    "1",
	NoGuarantee: true,
	Memory:      func(n int, _ linear.Values) int64 { return vectors(5, n) },
	New:         func(v linear.Values) Solver { return &chebyshev{givenLo: v.Real("lo"), givenHi: v.Real("hi")} },
}

// chebyshev takes the residual polynomial that is smallest on [lo, hi], the
// Chebyshev polynomial moved there and scaled to 1 at zero. With the centre θ
// and the half width δ, and t = δρ in Saad's letters:
//
//	z = M⁻¹ r,  d = (t d + 2 z) / (2θ − t),  t ← δ²/(2θ − t)    (d = z/θ, t = δ²/θ first)
//	x += d,  r −= A d
//
// Bounds that are not given are estimated in Begin, see bounds, and then the
// one dot product of a step watches the lower end: lying too high it only slows
// the method down, and it is lowered when that shows (Hageman and Young, Applied
// Iterative Methods, 1981, chapter 5). An upper end that lies too low makes the
// method diverge.
type chebyshev struct {
	core
	curv             curvature
	r, z, d, q       []float64 // length n; z is r without a preconditioner
	givenLo, givenHi float64
	lo, hi           float64
	t                float64
	degree           int     // steps of the present polynomial
	from             float64 // √(rᵀM⁻¹r) at its start
}

func (s *chebyshev) Begin(p Problem) (trace.Reading, error) {
	*s = chebyshev{givenLo: s.givenLo, givenHi: s.givenHi}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	s.r, s.d, s.q = linear.Bulk[float64](s.n), linear.Bulk[float64](s.n), linear.Bulk[float64](s.n)
	s.z = s.r
	if !s.plain {
		s.z = linear.Bulk[float64](s.n)
	}
	res := s.residual(s.r, p.X)
	rd := s.start(res)
	if rd.Done {
		return rd, nil
	}
	s.lo, s.hi = s.givenLo, s.givenHi
	if s.lo == 0 || s.hi == 0 {
		if end, ok := s.bounds(); !ok {
			return end, nil
		}
		s.residual(s.r, p.X)
	}
	if !(s.lo > 0 && s.lo <= s.hi) {
		return s.broken("lo/hi", s.lo/s.hi)
	}
	return s.reading(math.NaN(), math.NaN(), false), nil
}

func (s *chebyshev) Step() (trace.Reading, error) {
	s.next()
	rz := s.meet() // the preconditioner
	if rz < 0 || !finite(rz) {
		return s.refuse("r'inv(M)r", rz, s.r, s.z)
	}
	size := root(rz, s.r)
	if s.givenLo == 0 {
		s.widen(size)
	}
	centre, half := (s.hi+s.lo)/2, (s.hi-s.lo)/2
	if s.degree == 0 {
		s.from = size
		linear.Scale(s.d, 1/centre, s.z)
		s.t = half * half / centre
	} else {
		linear.Lin(s.d, s.t/(2*centre-s.t), s.d, 2/(2*centre-s.t), s.z)
		s.t = half * half / (2*centre - s.t)
	}
	s.a.Apply(s.q, s.d) // the product
	res := root(linear.AxpyDot(-1, s.q, s.r, s.r), s.r)
	if !finite(res) {
		return s.overflow("|r|", res)
	}
	linear.Axpy(1, s.d, s.x)
	s.last = res
	s.degree++
	return s.reading(math.NaN(), math.NaN(), res == 0), nil
}

func (s *chebyshev) Solution(dst []float64) { copy(dst, s.x) }

// Curvature shows the direction of the last event of curvature, found while
// the bounds were estimated.
func (s *chebyshev) Curvature() (p, q []float64) { return s.d, s.q }
