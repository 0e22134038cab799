package prepare

import (
	"context"
	"errors"

	"dwindle/engine/linear"
)

var projectEntry = Entry{
	Name:     "project",
	Title:    "solve for the reachable part of b",
	Source:   "orthogonal projection onto the complement of the known left null vectors",
	Needs:    linear.NeedsEntries,
	Projects: true,
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
// sum to zero, and empty rows. A is not changed.
func applyProject(ctx context.Context, s linear.System, _ linear.Values) (linear.System, Back, error) {
	a := s.Matrix()
	if a == nil {
		return s, nil, errors.New("project needs the entries of the matrix")
	}
	at := a
	if !a.ExactlySymmetric() {
		at = a.Transpose()
	}
	null := linear.LeftNull(a, at, linear.FindComponents(a), s.Delta())
	if len(null.Size) == 0 {
		return s, nil, errors.New("project knows no null vector: no component of the matrix has columns that all sum to zero, and no row is empty")
	}
	b := make([]float64, len(s.B))
	null.Project(b, s.B)
	s.B = b
	return s, same{}, ctx.Err()
}
