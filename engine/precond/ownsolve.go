package precond

import (
	"context"
	"errors"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var ownSolveEntry = Entry{
	Name: "solve", Title: "your own M, a matrix, solved directly", Source: "given by the user",
	Params:      append([]linear.Param{{Name: "file", Kind: linear.Path, Meaning: "the matrix that is M"}}, exactParams...),
	Fixed:       true,
	Symmetric:   true,
	InUserUnits: true,
	Transposes:  true,
	Estimate:    ownEstimate,
	Build:       buildOwnSolve,
}

// buildOwnSolve reads M and factorises it.
func buildOwnSolve(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	m, err := own(s, v.Path("file"))
	if err != nil {
		return nil, trace.BuildNotes{}, err
	}
	return buildDirect(ctx, m, v, progress)
}

// buildDirect factorises a matrix completely: by Cholesky's method where it is
// symmetric and that goes through, else as LU.
func buildDirect(ctx context.Context, a *linear.CSR, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	s := linear.System{A: a}
	if a.Symmetric() {
		f, notes, err := buildCholesky(ctx, s, v, progress)
		var broke *Breakdown
		if !errors.As(err, &broke) {
			return f, notes, err
		}
	}
	return buildLU(ctx, s, v, progress)
}
