package precond

import (
	"context"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var noneEntry = Entry{
	Name: "none", Title: "no preconditioner",
	Source:    "M = I",
	Fixed:     true,
	Symmetric: true, Transposes: true,
	Estimate: func(*linear.CSR, linear.Values) (int64, bool) { return 0, true },
	Build:    buildNone,
}

// buildNone returns the identity.
func buildNone(_ context.Context, _ linear.System, _ linear.Values, _ func(float64)) (linear.Applier, trace.BuildNotes, error) {
	return linear.Identity{}, trace.BuildNotes{Symmetric: true, Definite: true}, nil
}
