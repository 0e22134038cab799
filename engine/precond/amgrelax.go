package precond

import (
	"math"

	"dwindle/engine/linear"
)

// relaxParts bounds the number of blocks of a sweep, relaxRows their length
// from below. Both are fixed, so that results do not depend on the threads.
const (
	relaxParts = 32
	relaxRows  = 2048
)

// relaxation is Gauss–Seidel within fixed blocks of rows and Jacobi between
// them. With D, L, U the diagonal and the triangles of the diagonal blocks and
// O the rest of A, a sweep down solves (D + E + L) d = b − A x for the change
// d of x, a sweep up (D + E + U) d = b − A x. E is diagonal and no larger than
// it must be for the sweeps to converge whenever A is positive definite:
//
//	e_i = max(0, 1.05 o_i − d_i)/2,  o_i = Σ_j |o_ij|
//
// (Baker, Falgout, Kolev and Yang 2011, sections 3 and 6). For this E the sum
// M + Mᵀ − A = D + 2E − O is positive definite by its row sums.
type relaxation struct {
	a       *linear.CSR
	inverse []float64 // 1/(d_i + e_i), length n
	rows    int       // rows of a block
	parts   int

	dst, x, b                                 []float64 // operands of the sweep under way
	firstPart, downPart, upPart, residualPart func(part int)
}

// blockRows returns the block length for order n.
func blockRows(n int) int { return max(relaxRows, (n+relaxParts-1)/relaxParts) }

// newRelaxation prepares sweeps in blocks of so many rows.
func newRelaxation(a *linear.CSR, diag []float64, rows int) *relaxation {
	s := &relaxation{a: a, inverse: make([]float64, a.NRows), rows: rows}
	s.parts = (a.NRows + s.rows - 1) / s.rows
	s.firstPart, s.downPart, s.upPart, s.residualPart = s.firstRows, s.downRows, s.upRows, s.residualRows
	linear.Parallel(s.parts, func(part int) {
		lo, hi := s.block(part)
		for i := lo; i < hi; i++ {
			outside := 0.0
			cols, vals := a.Row(i)
			for k := 0; k < len(cols) && int(cols[k]) < lo; k++ {
				outside += math.Abs(vals[k])
			}
			for k := len(cols) - 1; k >= 0 && int(cols[k]) >= hi; k-- {
				outside += math.Abs(vals[k])
			}
			s.inverse[i] = 1 / (diag[i] + max(0, 1.05*outside-diag[i])/2)
		}
	})
	return s
}

func (s *relaxation) block(part int) (lo, hi int) {
	lo = part * s.rows
	return lo, min(lo+s.rows, s.a.NRows)
}

func (s *relaxation) run(do func(part int), dst, x, b []float64) {
	s.dst, s.x, s.b = dst, x, b
	linear.Parallel(s.parts, do)
	s.dst, s.x, s.b = nil, nil, nil
}

// first sweeps down from a zero guess: dst = (D + E + L)⁻¹ b.
func (s *relaxation) first(dst, b []float64) { s.run(s.firstPart, dst, nil, b) }

// down sweeps down once more: dst = x + (D + E + L)⁻¹ (b − A x). The three do
// not overlap.
func (s *relaxation) down(dst, x, b []float64) { s.run(s.downPart, dst, x, b) }

// up sweeps up: dst = x + (D + E + U)⁻¹ (b − A x). The three do not overlap.
func (s *relaxation) up(dst, x, b []float64) { s.run(s.upPart, dst, x, b) }

// residual computes dst = b − A x.
func (s *relaxation) residual(dst, x, b []float64) { s.run(s.residualPart, dst, x, b) }

func (s *relaxation) firstRows(part int) {
	lo, hi := s.block(part)
	ptr, b, dst, inverse := s.a.Ptr, s.b, s.dst, s.inverse
	for i := lo; i < hi; i++ {
		cols, vals := s.a.Col[ptr[i]:ptr[i+1]], s.a.Val[ptr[i]:ptr[i+1]]
		vals = vals[:len(cols)]
		t := b[i]
		for k, c := range cols {
			if int(c) >= i {
				break
			}
			if int(c) >= lo {
				t -= vals[k] * dst[uint32(c)]
			}
		}
		dst[i] = t * inverse[i]
	}
}

func (s *relaxation) downRows(part int) {
	lo, hi := s.block(part)
	ptr, b, dst, x, inverse := s.a.Ptr, s.b, s.dst, s.x, s.inverse
	for i := lo; i < hi; i++ {
		cols, vals := s.a.Col[ptr[i]:ptr[i+1]], s.a.Val[ptr[i]:ptr[i+1]]
		vals = vals[:len(cols)]
		t := b[i]
		for k, c := range cols {
			v := x
			if int(c) >= lo && int(c) < i {
				v = dst
			}
			t -= vals[k] * v[uint32(c)]
		}
		dst[i] = x[i] + t*inverse[i]
	}
}

func (s *relaxation) upRows(part int) {
	lo, hi := s.block(part)
	ptr, b, dst, x, inverse := s.a.Ptr, s.b, s.dst, s.x, s.inverse
	for i := hi - 1; i >= lo; i-- {
		cols, vals := s.a.Col[ptr[i]:ptr[i+1]], s.a.Val[ptr[i]:ptr[i+1]]
		vals = vals[:len(cols)]
		t := b[i]
		for k, c := range cols {
			v := x
			if int(c) > i && int(c) < hi {
				v = dst
			}
			t -= vals[k] * v[uint32(c)]
		}
		dst[i] = x[i] + t*inverse[i]
	}
}

func (s *relaxation) residualRows(part int) {
	lo, hi := s.block(part)
	ptr, b, dst, x := s.a.Ptr, s.b, s.dst, s.x
	for i := lo; i < hi; i++ {
		cols, vals := s.a.Col[ptr[i]:ptr[i+1]], s.a.Val[ptr[i]:ptr[i+1]]
		vals = vals[:len(cols)]
		t := b[i]
		for k, c := range cols {
			t -= vals[k] * x[uint32(c)]
		}
		dst[i] = t
	}
}

func (s *relaxation) bytes() int64 { return 8 * int64(len(s.inverse)) }
