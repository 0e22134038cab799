package krylov

import (
	"errors"
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// Tailer is the ability of a solver that keeps its iterate in two doubles to
// write the lower ones to dst (length n). Solution gives the upper: the sum
// rounded to double.
type Tailer interface{ Tail(dst []float64) }

// refinement is Richardson's iteration with x kept in two doubles:
//
//	z = M⁻¹ r,  x + x₂ += ω z,  r = b − A (x + x₂)
//
// where x + x₂ is the unevaluated sum and r is evaluated in twice the working
// precision before it is rounded. With an exact factorisation and ω = 1 it is
// iterative refinement (Wilkinson, Rounding Errors in Algebraic Processes
// (1963), chapter 3) with extra precise iterates (Demmel, Hida, Kahan, Li,
// Mukherjee and Riedy, ACM Trans. Math. Softw. 32 (2006) 325–351): where it
// contracts, the residual goes on falling until x has about 32 digits less
// those that the condition of A takes, far below what any x in one double
// leaves. The residual is measured at every step, so that a reading is no
// recurrence's.
type refinement struct {
	core
	omega  float64
	twice  linear.Refiner
	low    []float64 // x₂, length n
	x1, x2 []float64 // where the next x and x₂ are made, length n
	r, z   []float64 // length n; z is r without a preconditioner
}

// errNoEntries says that the products alone are known.
var errNoEntries = errors.New("krylov: a residual in twice the working precision needs the entries of A")

func (s *refinement) Begin(p Problem) (trace.Reading, error) {
	*s = refinement{omega: s.omega}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	var ok bool
	if s.twice, ok = linear.As[linear.Refiner](s.a); !ok {
		return trace.Reading{}, errNoEntries
	}
	s.low, s.r = linear.Bulk[float64](s.n), linear.Bulk[float64](s.n)
	s.x1, s.x2 = linear.Bulk[float64](s.n), linear.Bulk[float64](s.n)
	s.z = s.r
	if !s.plain {
		s.z = linear.Bulk[float64](s.n)
	}
	if p.X == nil {
		return s.start(s.residual(s.r, nil)), nil
	}
	return s.start(s.twice.PairResidual(s.r, s.x, s.low, s.b)), nil
}

func (s *refinement) Step() (trace.Reading, error) {
	s.next()
	if !s.plain {
		s.m.Apply(s.z, s.r) // the preconditioner
	}
	linear.PairAxpy(s.x1, s.x2, s.omega, s.z, s.x, s.low)
	res := s.twice.PairResidual(s.r, s.x1, s.x2, s.b) // the product
	if !finite(res) {
		return s.overflow("|b-Ax|", res)
	}
	s.x, s.x1 = s.x1, s.x
	s.low, s.x2 = s.x2, s.low
	s.last = res
	return s.reading(math.NaN(), math.NaN(), res == 0), nil
}

func (s *refinement) Solution(dst []float64) { copy(dst, s.x) }

func (s *refinement) Tail(dst []float64) { copy(dst, s.low) }
