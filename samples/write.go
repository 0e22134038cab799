package samples

import (
	"io"

	"dwindle/engine/linear"
)

// Write writes the system's matrix as a Matrix Market file, one triangle of
// it where it is exactly symmetric.
func Write(w io.Writer, s linear.System) error {
	a := s.Matrix()
	return linear.WriteMatrixMarket(w, a, a.ExactlySymmetric(), comment(s))
}

// WriteRHS writes the sample's own right-hand side as a Matrix Market array.
func WriteRHS(w io.Writer, s linear.System) error {
	return linear.WriteVector(w, s.B, comment(s))
}

func comment(s linear.System) []string { return []string{"dwindle " + s.Name} }
