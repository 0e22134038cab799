// Package krylov holds the iterative solvers, one file each, and their
// catalogue. Solvers only iterate: the runner owns convergence, limits,
// statistics and time, and counts products through wrappers.
package krylov

import (
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// Problem is what a solver works on. All vectors have length n.
type Problem struct {
	A linear.Operator
	M linear.Applier // applies M⁻¹; never nil (identity for none)
	B []float64      // right-hand side, not changed
	X []float64      // starting guess, not changed; nil is zero
	// Near are vectors that A maps nearly to zero, of length n and not
	// changed, for methods that take them out; nil if none are known.
	Near [][]float64
}

// Solver iterates. Its fields are exactly the state between two calls.
type Solver interface {
	// Begin allocates everything and measures the first residual.
	Begin(Problem) (trace.Reading, error)
	// Step makes one iteration and allocates nothing (next to nothing in the
	// restart of a Dense method). It must not be called
	// after a reading with Done. A step that finds it cannot be made leaves
	// the iterate as it was and says so with Done; Residual is always that of
	// the iterate which Solution gives. Reading.Events is overwritten by the
	// next call.
	Step() (trace.Reading, error)
	// Solution writes the current iterate to dst (length n) and changes
	// nothing. In the middle of a cycle a restarted method applies M⁻¹ once.
	Solution(dst []float64)
}

// Curver is the ability of a solver that divides by a curvature to show the
// direction p and q = A p of its last step (views, not to be changed).
type Curver interface {
	Curvature() (p, q []float64)
}

// Watched returns what Reading.Residual measures with those parameters.
func (e Entry) Watched(v linear.Values) trace.Norm {
	if e.NormOf != nil {
		return e.NormOf(v)
	}
	return e.Norm
}

// InTwoDoubles says whether the solver keeps x in two doubles with those
// parameters. It then has the ability Tailer and needs the entries of A.
func (e Entry) InTwoDoubles(v linear.Values) bool { return e.TwoDoubles != nil && e.TwoDoubles(v) }

// Entry is one solver of the catalogue.
type Entry struct {
	Name, Title string
	Source      string // the paper or book the recurrence is taken from
	Params      []linear.Param
	Needs       linear.Has
	Assumes     linear.Assume
	Norm        trace.Norm                         // what Reading.Residual measures
	NormOf      func(linear.Values) trace.Norm     // the same where a parameter decides; nil elsewhere
	Products    string                             // per step, for display
	Restarted   bool                               // works in cycles
	Dense       bool                               // a restart solves a small dense eigenproblem, which allocates a little
	Monotone    bool                               // ‖r‖ cannot grow
	TwoDoubles  func(linear.Values) bool           // whether x is kept in two doubles; nil: never
	Energy      bool                               // ‖e‖_A cannot grow when A is definite
	Lanczos     bool                               // Alpha, Beta are those of CG and give the Lanczos matrix of M⁻¹A
	Tridiagonal bool                               // Alpha, Beta are the entries of the Lanczos matrix themselves: α_k on its diagonal, β_{k+1} beside it
	Baseline    bool                               // kept for comparison, never recommended
	NoGuarantee bool                               // the residual may grow without bound (may be judged diverged)
	Memory      func(n int, v linear.Values) int64 // bytes of work vectors
	New         func(linear.Values) Solver
}
