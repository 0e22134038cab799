package precond

import (
	"context"
	"fmt"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var givenEntry = Entry{
	Name: "given", Title: "your own M⁻¹, a matrix", Source: "given by the user",
	Params:      []linear.Param{{Name: "file", Kind: linear.Path, Meaning: "the matrix that is M⁻¹"}},
	Fixed:       true,
	Symmetric:   true,
	InUserUnits: true,
	Transposes:  true,
	Estimate:    ownEstimate,
	Build:       buildGiven,
}

// buildGiven reads M⁻¹ and applies it as it stands.
func buildGiven(_ context.Context, s linear.System, v linear.Values, _ func(float64)) (linear.Applier, trace.BuildNotes, error) {
	m, err := own(s, v.Path("file"))
	if err != nil {
		return nil, trace.BuildNotes{}, err
	}
	return m, trace.BuildNotes{Entries: int64(m.Entries()), Fill: fillOf(s, m.Entries()), Bytes: m.Bytes(),
		Symmetric: m.Symmetric()}, nil
}

// own reads a matrix of the user's own, of the system's order.
func own(s linear.System, path string) (*linear.CSR, error) {
	if s.Open == nil {
		return nil, fmt.Errorf("no file can be read here")
	}
	m, err := s.Open(path)
	if err != nil {
		return nil, err
	}
	if m.NRows != s.N() {
		return nil, fmt.Errorf("%s has %d rows, A has %d", path, m.NRows, s.N())
	}
	return m, nil
}

// ownEstimate supposes that the user's matrix is about as dense as A.
func ownEstimate(a *linear.CSR, _ linear.Values) (int64, bool) { return 2 * a.Bytes(), false }

// fillOf relates entries to those of A; 0 where A has none to count.
func fillOf(s linear.System, entries int) float64 {
	a := s.Matrix()
	if a == nil || a.Entries() == 0 {
		return 0
	}
	return float64(entries) / float64(a.Entries())
}
