package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var richardsonEntry = Entry{
	Name: "richardson", Title: "Richardson's stationary iteration",
	Source: "Richardson, Phil. Trans. Roy. Soc. A 210 (1911) 307–357; Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. (2003), section 4.2; " +
		"in two doubles: Demmel, Hida, Kahan, Li, Mukherjee and Riedy, ACM Trans. Math. Softw. 32 (2006) 325–351",
	Params: []linear.Param{
		{Name: "omega", Kind: linear.Real, Default: 1, Min: 1e-12, Max: 1e12, Meaning: "step length"},
		{Name: "parts", Kind: linear.Int, Quiet: true, Default: 1, Min: 1, Max: 2,
			Meaning: "doubles that each unknown is kept in; with 2, b-Ax is evaluated in twice the working precision"},
	},
	Assumes:     linear.AssumesFixedM,
	Norm:        trace.TwoNorm,
	Products:    "1",
	NoGuarantee: true,
	TwoDoubles:  inTwo,
	Memory: func(n int, v linear.Values) int64 {
		if inTwo(v) {
			return vectors(6, n)
		}
		return vectors(4, n)
	},
	New: func(v linear.Values) Solver {
		if inTwo(v) {
			return &refinement{omega: v.Real("omega")}
		}
		return &richardson{omega: v.Real("omega")}
	},
}

// inTwo says whether x is to be kept in two doubles.
func inTwo(v linear.Values) bool { return v.Int("parts") == 2 }

// richardson is the stationary iteration
//
//	x += ω z,  r −= ω A z,  z = M⁻¹ r
//
// which converges from every guess exactly where ρ(I − ωM⁻¹A) < 1. The
// preconditioner makes it the method of Jacobi, Gauss and Seidel or successive
// over-relaxation; with an exact factorisation and ω = 1 it is the direct
// solve in one step, and iterative refinement after that.
type richardson struct {
	core
	omega   float64
	r, z, q []float64 // length n; z is r without a preconditioner
}

func (s *richardson) Begin(p Problem) (trace.Reading, error) {
	*s = richardson{omega: s.omega}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	s.r, s.q = linear.Bulk[float64](s.n), linear.Bulk[float64](s.n)
	s.z = s.r
	if !s.plain {
		s.z = linear.Bulk[float64](s.n)
	}
	return s.start(s.residual(s.r, p.X)), nil
}

func (s *richardson) Step() (trace.Reading, error) {
	s.next()
	if !s.plain {
		s.m.Apply(s.z, s.r) // the preconditioner
	}
	s.a.Apply(s.q, s.z) // the product
	res := root(linear.LinDot(s.q, 1, s.r, -s.omega, s.q), s.q)
	if !finite(res) {
		return s.overflow("|r|", res)
	}
	linear.Axpy(s.omega, s.z, s.x)
	s.r, s.q = s.q, s.r
	if s.plain {
		s.z = s.r
	}
	s.last = res
	return s.reading(math.NaN(), math.NaN(), res == 0), nil
}

func (s *richardson) Solution(dst []float64) { copy(dst, s.x) }
