package precond

import (
	"context"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var sgsEntry = Entry{
	Name: "sgs", Title: "symmetric Gauss-Seidel",
	Source:    "Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. (2003), section 10.2",
	Needs:     linear.NeedsEntries | linear.NeedsDiagonal,
	Fixed:     true,
	Symmetric: true, Transposes: true,
	Estimate: ssorEntry.Estimate,
	Build:    buildSGS,
}

// buildSGS is the symmetric relaxation without a factor: ω = 1.
func buildSGS(ctx context.Context, s linear.System, _ linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	return makeSSOR(ctx, s, "sgs", 1, progress)
}
