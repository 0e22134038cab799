package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var bicgstablEntry = Entry{
	Name: "bicgstabl", Title: "stabilised biconjugate gradients, minimal over l dimensions",
	Source: "Sleijpen and Fokkema, ETNA 1 (1993) 11–32",
	Params: []linear.Param{{Name: "l", Kind: linear.Int, Default: 2, Min: 1, Max: 8,
		Meaning: "degree of the residual minimisation in a step"}},
	Assumes:     linear.AssumesFixedM,
	Norm:        trace.TwoNorm,
	Products:    "2l",
	NoGuarantee: true,
	Memory: func(n int, v linear.Values) int64 {
		l := v.Int("l")
		return vectors(2*l+7, n) + int64(l+1)*(4*8+2*24+8*int64(l+1))
	},
	New: func(v linear.Values) Solver { return &bicgstabl{l: v.Int("l")} },
}

// bicgstabl is BiCGStab(l) for B = A M⁻¹, with the shadow vector r̂ = r₀. A
// step is l steps of BiCG,
//
//	for j = 0…l−1:  β = α r̂ᵀr_j / ρ,  u_i = r_i − β u_i (i ≤ j),  u_{j+1} = B u_j
//	                α = ρ / r̂ᵀu_{j+1},  r_i −= α u_{i+1} (i ≤ j),  r_{j+1} = B r_j
//
// and then the r₀ − Σ γ_j r_j of least length, by modified Gram–Schmidt. With
// l = 2 a pair of complex eigenvalues no longer stalls it, which is what
// happens to BiCGStab where A is close to skew. Where the r_j depend on each
// other to rounding, the step minimises over those that do not, and the next
// begins BiCG again.
type bicgstabl struct {
	core
	l                int
	r, u             [][]float64 // l+1 vectors of length n each: B^j r, B^j u
	shadow           []float64   // length n
	y, z, h          []float64   // x = guess + M⁻¹y; M⁻¹ of a vector; nil without a preconditioner
	sum              []float64   // where corrections go: y, or x without a preconditioner
	rho, alpha       float64
	omega            float64
	shadowNorm, peak float64
	tau              [][]float64 // (l+1) x (l+1), of Gram–Schmidt
	sigma            []float64   // l+1: ‖r_j‖²
	g, g1, g2        []float64   // l+1 each: γ, γ', γ''
}

func (s *bicgstabl) Begin(p Problem) (trace.Reading, error) {
	*s = bicgstabl{l: s.l}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	s.r, s.u, s.tau = rows(s.l+1, s.n), rows(s.l+1, s.n), rows(s.l+1, s.l+1)
	small := rows(4, s.l+1)
	s.sigma, s.g, s.g1, s.g2 = small[0], small[1], small[2], small[3]
	s.shadow = linear.Bulk[float64](s.n)
	if s.sum = s.x; !s.plain {
		s.y, s.z, s.h = linear.Bulk[float64](s.n), linear.Bulk[float64](s.n), linear.Bulk[float64](s.n)
		s.sum = s.y
	}
	res := s.residual(s.r[0], p.X)
	copy(s.shadow, s.r[0])
	s.rho, s.omega, s.shadowNorm, s.peak = 1, 1, res, res
	return s.start(res), nil
}

func (s *bicgstabl) Step() (trace.Reading, error) {
	s.next()
	s.rho *= -s.omega
	before := s.last
	for j := range s.l {
		if end, r := s.biorthogonal(j, before); end {
			return r, nil
		}
	}
	return s.minimise()
}

// biorthogonal makes step j of BiCG. It says whether that is the end.
func (s *bicgstabl) biorthogonal(j int, before float64) (bool, trace.Reading) {
	rho := linear.Dot(s.shadow, s.r[j])
	if c := cosine(rho, s.shadowNorm, linear.Norm2(s.r[j])); lost(c) {
		return over(s.vanished("rho", c))
	}
	beta := s.alpha * rho / s.rho
	for i := range j + 1 {
		linear.Xpby(s.r[i], -beta, s.u[i])
	}
	s.apply(s.u[j+1], s.u[j])
	su, uu := linear.Dot2(s.u[j+1], s.shadow, s.u[j+1])
	if c := cosine(su, s.shadowNorm, root(uu, s.u[j+1])); lost(c) {
		return over(s.vanished("rhat'u", c))
	}
	s.rho, s.alpha = rho, rho/su
	res := root(linear.AxpyDot(-s.alpha, s.u[1], s.r[0], s.r[0]), s.r[0])
	if !finite(s.alpha) || !finite(res) {
		return over(s.overflow("alpha", s.alpha))
	}
	linear.Axpy(s.alpha, s.u[0], s.sum)
	s.last, s.peak = res, max(s.peak, res)
	if settled(res, before, s.peak) {
		s.event(trace.HalfStep, "|r|/|r0|", res/s.first)
		return over(s.ended())
	}
	for i := 1; i <= j; i++ {
		linear.Axpy(-s.alpha, s.u[i+1], s.r[i])
	}
	s.apply(s.r[j+1], s.r[j])
	return false, trace.Reading{}
}

// over passes on the reading of a step that ends the trial.
func over(r trace.Reading, _ error) (bool, trace.Reading) { return true, r }

// minimise takes the combination of the r_j of least length.
func (s *bicgstabl) minimise() (trace.Reading, error) {
	d, c := s.project()
	if d == 0 || d == s.l && lost(c) {
		return s.vanished("omega", c)
	}
	s.combine(d)
	linear.Axpy(s.g[1], s.r[0], s.sum)
	for j := 1; j < d; j++ {
		linear.Axpy(s.g2[j], s.r[j], s.sum)
	}
	rr := 0.0
	for j := 1; j <= d; j++ {
		rr = linear.AxpyDot(-s.g1[j], s.r[j], s.r[0], s.r[0])
		linear.Axpy(-s.g[j], s.u[j], s.u[0])
	}
	s.last = root(rr, s.r[0])
	s.peak = max(s.peak, s.last)
	if s.omega = s.g[d]; d < s.l {
		s.rho, s.alpha, s.omega = 1, 0, 1 // BiCG begins again
	}
	return s.reading(math.NaN(), math.NaN(), s.last == 0), nil
}

// project makes r₁…r_l orthogonal and finds the components γ' of r₀ along
// them. Where one lies in the span of those before to rounding, it stops: d
// are independent. c is the cosine of the last component.
func (s *bicgstabl) project() (d int, c float64) {
	for j := 1; j <= s.l; j++ {
		size := linear.Norm2(s.r[j])
		for i := 1; i < j; i++ {
			s.tau[i][j] = linear.Dot(s.r[j], s.r[i]) / s.sigma[i]
			linear.Axpy(-s.tau[i][j], s.r[i], s.r[j])
		}
		var along float64
		along, s.sigma[j] = linear.Dot2(s.r[j], s.r[0], s.r[j])
		if rest := root(s.sigma[j], s.r[j]); rest <= 64*unit*size {
			return j - 1, c
		} else if c = cosine(along, rest, s.last); !finite(c) {
			return 0, c
		}
		s.g1[j] = along / s.sigma[j]
	}
	return s.l, c
}

// combine turns the γ' of the orthogonal vectors into the γ of the powers of
// B, over d of them, and γ" = those of the iterate.
func (s *bicgstabl) combine(d int) {
	for j := d; j >= 1; j-- {
		s.g[j] = s.g1[j]
		for i := j + 1; i <= d; i++ {
			s.g[j] -= s.tau[j][i] * s.g[i]
		}
	}
	for j := 1; j < d; j++ {
		s.g2[j] = s.g[j+1]
		for i := j + 1; i < d; i++ {
			s.g2[j] += s.tau[j][i] * s.g[i+1]
		}
	}
}

// apply computes dst = A M⁻¹x.
func (s *bicgstabl) apply(dst, x []float64) {
	if s.plain {
		s.a.Apply(dst, x)
		return
	}
	s.m.Apply(s.z, x)
	s.a.Apply(dst, s.z)
}

// Solution writes the iterate; with a preconditioner it is applied once.
func (s *bicgstabl) Solution(dst []float64) {
	copy(dst, s.x)
	if !s.plain {
		s.m.Apply(s.h, s.y)
		linear.Axpy(1, s.h, dst)
	}
}
