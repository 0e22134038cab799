package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// arnoldi is a cycle of GMRES and of its relatives: an orthonormal basis v of
// the space, grown by one vector a step by modified Gram–Schmidt,
//
//	w = A z_k,  h_i = v_iᵀw,  w −= h_i v_i
//
// and the least-squares problem over it. ‖w‖ within rounding of zero is the
// happy breakdown: the space is exhausted and holds the solution, unless R is
// singular; then its last column is dropped.
type arnoldi struct {
	core
	length  int  // of a cycle
	v       span // length+1 vectors of length n
	h       hessenberg
	spent   bool    // the cycle exhausted its space
	lost    float64 // then R's last diagonal entry over size, if R is singular; else 1
	opening float64 // the residual at the start of the cycle
	size    float64 // largest ‖A z‖ of the cycle: the scale of H
}

// arnoldiBytes returns the memory of a basis, slice headers included.
func arnoldiBytes(m, n int) int64 { return vectors(m+2, n) + 24*int64(m+1) + hessenbergBytes(m) }

// prepare allocates for cycles of the length.
func (s *arnoldi) prepare(length int) {
	s.length = length
	s.v = rows(length+1, s.n)
	s.h = newHessenberg(length)
}

// open starts a cycle: v₀ holds the residual of norm res.
func (s *arnoldi) open(res float64) {
	s.opening, s.size, s.spent, s.lost = res, 0, false, 1
	s.h.start(res)
	if res > 0 {
		linear.Scale(s.v[0], 1/res, s.v[0])
	}
}

// full says whether the cycle cannot grow.
func (s *arnoldi) full() bool { return s.h.k == s.length || s.spent }

// extend takes A z_k, which lies in v_{k+1}, into the basis.
func (s *arnoldi) extend() (trace.Reading, error) {
	k := s.h.k
	w := s.v[k+1]
	before, after := s.v.orthogonalise(w, s.h.column(), k)
	if !finite(before) || !finite(after) {
		return s.overflow("|A inv(M) v|", before)
	}
	s.size = max(s.size, before)
	zero := 8 * float64(k+1) * unit // rounding left by k+1 projections
	s.spent = after <= zero*before
	if d := s.h.rotate(); s.spent && d <= zero*s.size {
		s.lost = cosine(d, s.size, 1)
		if k == 0 {
			return s.broken("R(k,k)", s.lost)
		}
		return s.reading(math.NaN(), math.NaN(), false), nil
	}
	s.last = s.h.accept()
	if !s.spent {
		linear.Scale(w, 1/after, w)
	}
	return s.reading(math.NaN(), math.NaN(), false), nil
}

// close ends a cycle whose correction is in x and whose residual, measured
// afresh in v₀, has norm res, and opens the next. It says whether that is the
// end: an exhausted cycle that did not halve the residual is at the floor or,
// if R was singular, broke down.
func (s *arnoldi) close(res float64) (end bool) {
	if !finite(res) {
		s.event(trace.NonFinite, "|b-Ax|", res)
	}
	factor := res / s.opening
	s.event(trace.Restart, "cycle factor", factor)
	floor := s.spent && factor > 0.5
	if floor && s.lost < 1 {
		s.event(trace.Breakdown, "R(k,k)", s.lost)
	}
	end = floor || res == 0 || !finite(res)
	s.last = res
	s.open(res)
	return end
}
