package prepare

import (
	"slices"

	"dwindle/engine/linear"
)

// knownNull is what is known of the left null space of a matrix: vectors that
// its sums show, and beside them an orthonormal basis of those that were found
// by factorising.
type knownNull struct {
	sums  *linear.NullSpace
	found [][]float64
}

// knownNullOf collects it; vectors of the system that the transpose of A does
// not map to zero are left out.
func knownNullOf(s linear.System, a *linear.CSR) knownNull {
	at := a
	if !a.ExactlySymmetric() {
		at = a.Transpose()
	}
	sums := linear.LeftNull(a, at, linear.FindComponents(a), s.Delta())
	return knownNull{sums, beside(sums, at, slices.Concat(s.Null, s.LeftNull))}
}

// order is the dimension.
func (l knownNull) order() int { return len(l.sums.Size) + len(l.found) }

// project computes dst = b minus its part in the null space. No overlap.
func (l knownNull) project(dst, b []float64) {
	l.sums.Project(dst, b)
	remove(dst, l.found)
}

// OutOfReach returns the part of b that no x reaches, as far as the left null
// space of A is known from its sums and from the vectors of the system, and the
// dimension of what is known of it. The part is nil where that is nothing, or
// there is no b.
func OutOfReach(s linear.System) (part []float64, dimension int) {
	a := s.Matrix()
	if a == nil {
		return nil, 0
	}
	l := knownNullOf(s, a)
	if l.order() == 0 || len(s.B) != a.NRows {
		return nil, l.order()
	}
	part = make([]float64, len(s.B))
	l.project(part, s.B)
	linear.Lin(part, 1, s.B, -1, part)
	return part, l.order()
}
