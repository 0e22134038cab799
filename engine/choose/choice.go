// Package choose makes the line-up from the facts and ranks what was run.
// It is pure: candidates come to it as values.
package choose

import "dwindle/engine/diagnose"

// Candidate is a pairing that could be run, as the catalogues describe it.
type Candidate struct {
	Pairing   string // canonical
	Solver    string // bare names
	Precond   string
	Preps     []string
	Memory    int64  // bytes of solver, preconditioner and preparations; -1: not predicted
	Refused   string // why it cannot run here; empty if it can
	Symmetric bool   // the solver assumes A symmetric
	Definite  bool   // the solver assumes A positive definite
	SPDM      bool   // the solver assumes M symmetric positive definite
	Baseline  bool   // naive, kept for comparison only
	Direct    bool   // one step with an exact factorisation
	Cause     string // why it is refused, in words that many share; empty: Refused says it
	// SymmetricA and DefiniteA say what the preconditioner assumes of A.
	SymmetricA, DefiniteA bool
	Summary               string // one line for lists
}

// Ranked is one trial in the ranking.
type Ranked struct {
	Pairing string
	// Seconds are the own seconds to tolerance, set-up included, as trials are
	// compared by (costs); what this one took is in its history.
	Seconds    float64
	Today      bool    // the user's code runs this one now
	Setup      float64 // of which set-up
	Runs       int     // the iterations are those of the median of so many runs
	Setups     int     // and what solvers share of the set-up is the median of so many builds; 0: this run's
	Iterations int
	Memory     int64
	Work       float64 // numbers touched, counted: what ranks where the clock cannot
	Reached    bool    // it converged; otherwise Seconds is NaN
	BreakEven  float64 // right-hand sides from which it beats the cheapest set-up; NaN if never or not needed
	Cheapest   string  // the pairing with the cheapest set-up, which BreakEven is told against
	// For is the predicted seconds for each of Sides right-hand sides solved
	// one after the other with one set-up; NaN where not reached.
	For       [len(Sides)]float64
	Low, High float64 // range of Seconds thought likely; NaN where not reached
	Expected  float64 // where not reached: the seconds it takes by its last prediction; NaN if none
	Beyond    float64 // where not reached: the iterations it would take by it, more than it may; NaN
	two       bool    // it keeps x in two doubles
	shaky     bool    // it factorised a matrix that is singular to rounding: its x holds what rounding made of it
	Safe      bool    // it cannot fail on a matrix of this kind, and nothing went wrong on the way
}

// Sides are the numbers of right-hand sides a ranking is told for.
var Sides = [...]int{1, 10, 1000}

// Ruled is a pairing that was ruled out, and why.
type Ruled struct{ Pairing, Reason string }

// Outcome holds a prediction against what came of it.
type Outcome struct {
	Pairing   string
	What      string // what was predicted, such as "iterations, told at half time"
	Predicted float64
	Came      float64
}

// Choice is the recommendation.
type Choice struct {
	Pairing string // empty: none
	Ranked  []Ranked
	Reasons []string // where Pairing is empty: what can be had instead, if anything
	Doubts  []string
	Goal    string        // what Ranked goes by; empty: Seconds
	Gain    diagnose.Gain // over today's pairing
	// Settings says the choice in the terms of its methods, a line each, ready
	// to be carried into any code.
	Settings []string
	RuledOut []Ruled   // pairings that cannot run here, with the reason, grouped
	Outcomes []Outcome // predictions kept beside their outcomes
}
