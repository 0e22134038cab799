package precond

import (
	"math"
	"slices"

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

	excess []float64 // e_i, length n; nil where all are zero
	border [][]int32 // rows of each block with entries outside it

	dst, x, b, r                                          []float64 // operands of the sweep under way
	startPart, borderPart, downPart, upPart, residualPart func(part int)
}

// blockRows returns the block length for order n.
func blockRows(n int) int { return max(relaxRows, (n+relaxParts-1)/relaxParts) }

// newRelaxation prepares sweeps in blocks of so many rows.
func newRelaxation(a *linear.CSR, diag []float64, rows int) *relaxation {
	s := &relaxation{a: a, inverse: linear.Bulk[float64](a.NRows), rows: rows}
	s.parts = (a.NRows + s.rows - 1) / s.rows
	s.border = make([][]int32, s.parts)
	s.startPart, s.borderPart = s.startRows, s.borderRows
	s.downPart, s.upPart, s.residualPart = s.downRows, s.upRows, s.residualRows
	excess := make([]float64, s.parts) // the largest of each part
	linear.Parallel(s.parts, func(part int) {
		lo, hi := s.block(part)
		for i := lo; i < hi; i++ {
			e := max(0, 1.05*s.outside(part, i, lo, hi)-diag[i]) / 2
			excess[part] = max(excess[part], e)
			s.inverse[i] = 1 / (diag[i] + e)
		}
	})
	if s.parts > 0 && slices.Max(excess) > 0 {
		s.excess = linear.Bulk[float64](a.NRows)
		for i, v := range s.inverse {
			s.excess[i] = 1/v - diag[i]
		}
	}
	return s
}

// outside returns the sum of the sizes of row i outside its block, and lists
// the row if it has such entries.
func (s *relaxation) outside(part, i, lo, hi int) float64 {
	cols, vals := s.a.Row(i)
	if len(cols) == 0 || int(cols[0]) >= lo && int(cols[len(cols)-1]) < hi {
		return 0
	}
	s.border[part] = append(s.border[part], int32(i))
	sum := 0.0
	for k, c := range cols {
		if int(c) < lo || int(c) >= hi {
			sum += math.Abs(vals[k])
		}
	}
	return sum
}

func (s *relaxation) block(part int) (lo, hi int) {
	lo = part * s.rows
	return lo, min(lo+s.rows, s.a.NRows)
}

func (s *relaxation) run(do func(part int)) { linear.Parallel(s.parts, do) }

// release lets go of the operands.
func (s *relaxation) release() { s.dst, s.x, s.b, s.r = nil, nil, nil, nil }

// first sweeps down from a zero guess, dst = (D + E + L)⁻¹ b, and computes
// the residual r = b − A dst in the same pass.
func (s *relaxation) first(dst, r, b []float64) {
	s.dst, s.r, s.b = dst, r, b
	s.run(s.startPart)
	s.run(s.borderPart)
	s.release()
}

// down sweeps down once more: dst = x + (D + E + L)⁻¹ (b − A x). The three do
// not overlap.
func (s *relaxation) down(dst, x, b []float64) {
	s.dst, s.x, s.b = dst, x, b
	s.run(s.downPart)
	s.release()
}

// up sweeps up: dst = x + (D + E + U)⁻¹ (b − A x). The three do not overlap.
func (s *relaxation) up(dst, x, b []float64) {
	s.dst, s.x, s.b = dst, x, b
	s.run(s.upPart)
	s.release()
}

// residual computes dst = b − A x.
func (s *relaxation) residual(dst, x, b []float64) {
	s.dst, s.x, s.b = dst, x, b
	s.run(s.residualPart)
	s.release()
}

func (s *relaxation) bytes() int64 {
	total := 8 * int64(len(s.inverse)+len(s.excess))
	for _, rows := range s.border {
		total += 4 * int64(cap(rows))
	}
	return total
}
