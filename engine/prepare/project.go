package prepare

import (
	"context"
	"errors"
	"math"

	"dwindle/engine/linear"
)

var projectEntry = Entry{
	Name:     "project",
	Title:    "solve for the reachable part of b",
	Source:   "orthogonal projection onto the complement of the known left null vectors",
	Needs:    linear.NeedsEntries,
	Projects: true,
	Rounds:   true,
	Estimate: func(a *linear.CSR, _ linear.Values) int64 { return int64(a.NRows)*24 + a.Bytes() },
	Apply:    applyProject,
}

// same is the way back where the unknowns are unchanged.
type same struct{}

// Solution copies x.
func (same) Solution(dst, x []float64) { copy(dst, x) }

// Guess copies x.
func (same) Guess(dst, x []float64) { copy(dst, x) }

// Row returns i.
func (same) Row(i int) int { return i }

// applyProject replaces b by its part orthogonal to the left null vectors that
// can be seen without a factorisation: constants per component whose columns
// sum to zero, and empty rows; and to those that were found by factorising,
// where A maps them to zero to rounding from the left as well. A is not changed.
func applyProject(ctx context.Context, s linear.System, _ linear.Values) (linear.System, Back, error) {
	a := s.Matrix()
	if a == nil {
		return s, nil, errors.New("project needs the entries of the matrix")
	}
	null := knownNullOf(s, a)
	if null.order() == 0 {
		return s, nil, errors.New("project knows no null vector: no component of the matrix has columns that all sum to zero, no row is empty, and factorising has shown none")
	}
	b := make([]float64, len(s.B))
	null.project(b, s.B)
	s.B = b
	return s, same{}, ctx.Err()
}

const (
	leftNull = 1e-10 // of ‖Aᵀv‖ over ‖|Aᵀ||v|‖, up to which v is a left null vector
	newPart  = 1e-6  // of a vector beside those already known, from which it is a new one
)

// beside returns an orthonormal basis of what the vectors add to the null
// space that is seen; at is the transpose of A. Those that it does not map to
// zero are left out.
func beside(seen *linear.NullSpace, at *linear.CSR, vectors [][]float64) (basis [][]float64) {
	for _, v := range vectors {
		w := make([]float64, len(v))
		copy(w, v)
		size := linear.Norm2(w)
		if len(seen.Size) > 0 {
			seen.Project(w, w)
		}
		remove(w, basis)
		part := linear.Norm2(w)
		if !(part > newPart*size) {
			continue
		}
		linear.Scale(w, 1/part, w)
		if annihilated(at, w) {
			basis = append(basis, w)
		}
	}
	return basis
}

// annihilated says whether Aᵀv is small beside the sizes of the terms that its
// entries are sums of.
func annihilated(at *linear.CSR, v []float64) bool {
	got, could := 0.0, 0.0
	for i := range v {
		cols, vals := at.Row(i)
		sum, size := 0.0, 0.0
		for k, j := range cols {
			sum += vals[k] * v[j]
			size += math.Abs(vals[k] * v[j])
		}
		got, could = got+sum*sum, could+size*size
	}
	return math.Sqrt(got) <= leftNull*math.Sqrt(could)
}

// remove takes the parts along an orthonormal basis out of b; the second pass
// takes what rounding left in the first.
func remove(b []float64, basis [][]float64) {
	for range 2 {
		for _, v := range basis {
			linear.Axpy(-linear.Dot(v, b), v, b)
		}
	}
}
