package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// outsideAssumptions: a solver that assumes a symmetric or positive definite
// A runs on one that is not, by the facts alone.
var outsideAssumptions = Rule{"outside-assumptions", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		f, ok := assumption(c.Facts, h)
		if !ok {
			continue
		}
		f.Subject, f.Weight = h.Pairing, Blocker
		if solved(h) {
			f.Weight = Drag
			f.Claim += fmt.Sprintf("; it reached %s here, by no guarantee", num(h.TrueResidual))
		}
		f.Try = instead(c.Facts)
		out = append(out, f)
	}
	return out
}}

func assumption(f *inspect.Facts, h trace.History) (Finding, bool) {
	_, solver, _ := cut(h.Pairing)
	switch {
	case h.SymmetricA && f.Symmetric.Answer == inspect.No:
		return Finding{Certainty: f.Symmetric.Certainty,
			Claim:  fmt.Sprintf("%s needs a symmetric A; %s", solver, f.Symmetric.Why),
			Advice: "use a method for nonsymmetric A, or find out why A should have been symmetric",
			Evidence: []Evidence{{Quantity: "max |a_ij - a_ji| relative", Value: f.Symmetric.Value,
				Iteration: none, Rows: f.Symmetric.Rows}}}, true
	case h.DefiniteA && f.PositiveDefinite.Answer == inspect.No && f.NegativeDefinite.Answer != inspect.Yes && !semidefinite(f):
		return Finding{Certainty: f.PositiveDefinite.Certainty,
			Claim:  fmt.Sprintf("%s needs a positive definite A; %s", solver, f.PositiveDefinite.Why),
			Advice: "use minres, or gmres with a preconditioner; cg has no guarantee here",
			Evidence: []Evidence{{Quantity: "value behind it", Value: f.PositiveDefinite.Value,
				Iteration: none, Rows: f.PositiveDefinite.Rows}}}, true
	}
	return Finding{}, false
}

// semidefinite says that A is at worst singular: cg works wherever b is in
// reach.
func semidefinite(f *inspect.Facts) bool { return f.Semidefinite.Answer == inspect.Yes }

// instead names pairings that the facts allow.
func instead(f *inspect.Facts) []string {
	diag := f.DiagZero+f.DiagMissing == 0
	switch {
	case f.Symmetric.Answer == inspect.Yes && diag:
		return []string{"minres+none", "gmres:30+ilu:0"}
	case f.Symmetric.Answer == inspect.Yes:
		return []string{"minres+none", "scale/minres+none"}
	case diag:
		return []string{"gmres:30+ilu:0", "bicgstab+ilu:0"}
	}
	return []string{"scale/gmres:100+none"}
}
