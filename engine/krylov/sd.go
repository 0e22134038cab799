package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var sdEntry = Entry{
	Name: "sd", Title: "steepest descent",
	Source:   "Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. (2003), section 5.3.1",
	Assumes:  linear.AssumesSymmetric | linear.AssumesDefinite | linear.AssumesSymmetricM,
	Norm:     trace.TwoNorm,
	Products: "1",
	Energy:   true,
	Baseline: true,
	Memory:   func(n int, _ linear.Values) int64 { return vectors(4, n) },
	New:      func(linear.Values) Solver { return &sd{} },
}

// sd is preconditioned steepest descent:
//
//	z = M⁻¹ r,  α = rᵀz / zᵀA z,  x += α z,  r −= α A z
type sd struct {
	core
	curv       curvature
	r, z, q    []float64 // length n
	indefinite bool      // rᵀz < 0 has been reported
}

func (s *sd) Begin(p Problem) (trace.Reading, error) {
	*s = sd{}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	s.r, s.z, s.q = linear.Bulk[float64](s.n), linear.Bulk[float64](s.n), linear.Bulk[float64](s.n)
	return s.start(s.residual(s.r, p.X)), nil
}

func (s *sd) Step() (trace.Reading, error) {
	s.next()
	rz := s.precondition(s.z, s.r) // the preconditioner
	if done, r := s.judge(rz); done {
		return r, nil
	}
	zq := linear.ApplyDot(s.a, s.q, s.z) // the product
	if !finite(zq) {
		return s.overflow("z'Az", zq)
	}
	s.curv.watch(&s.core, s.z, zq)
	if zq == 0 {
		return s.broken("z'Az", 0)
	}
	alpha := rz / zq
	if !finite(alpha) {
		return s.overflow("alpha", alpha)
	}
	res := root(linear.AxpyDot(-alpha, s.q, s.r, s.r), s.r)
	if !finite(res) {
		return s.overflow("|r|", res)
	}
	linear.Axpy(alpha, s.z, s.x)
	s.last = res
	return s.reading(alpha, math.NaN(), res == 0), nil
}

// judge ends the trial when rᵀz is zero or undefined, and reports the first
// one below zero, relative to ‖r‖‖z‖.
func (s *sd) judge(rz float64) (bool, trace.Reading) {
	var r trace.Reading
	switch {
	case !finite(rz):
		r, _ = s.overflow("r'inv(M)r", rz)
	case rz == 0 && s.last <= exact*s.first:
		r, _ = s.ended()
	case rz == 0:
		r, _ = s.broken("r'inv(M)r", 0)
	default:
		if rz < 0 && !s.indefinite {
			s.indefinite = true
			s.event(trace.PrecondIndefinite, "r'inv(M)r", cosine(rz, s.last, linear.Norm2(s.z)))
		}
		return false, r
	}
	return true, r
}

func (s *sd) Solution(dst []float64) { copy(dst, s.x) }

// Curvature shows the direction of the last step and its product.
func (s *sd) Curvature() (p, q []float64) { return s.z, s.q }
