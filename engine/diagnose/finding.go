// Package diagnose turns facts and histories into findings. Each rule is one
// pure function in one file; it sees values only and cannot touch a solver.
package diagnose

import (
	"slices"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// Weight of a finding.
type Weight string

// The weights.
const (
	Blocker Weight = "blocker" // no answer can be trusted
	Drag    Weight = "drag"    // costs iterations, time or digits
	Note    Weight = "note"
)

// OnSystem is the subject of findings that concern no single pairing.
const OnSystem = "system"

// Evidence is one number behind a finding.
type Evidence struct {
	Quantity  string
	Value     float64
	Unit      string
	Iteration int   // -1 if it belongs to none
	Rows      []int // from 0
}

// Finding is something established about a trial or the system.
type Finding struct {
	Rule      string
	Weight    Weight
	Certainty inspect.Certainty
	Subject   string // OnSystem or a canonical pairing
	Claim     string // one sentence with its numbers
	Advice    string
	Try       []string // pairings this finding offers to start
	Evidence  []Evidence
	Also      []string // other pairings of which the same is said
	Outdone   bool     // of a trial that nobody asked for and another one has outdone
	// Predicts are the counts that this finding foresees for its tries, to be
	// held against what comes of them.
	Predicts []Predicted
}

// Of says whether the finding is about this pairing, alone or among others.
func (f Finding) Of(pairing string) bool {
	return f.Subject == pairing || slices.Contains(f.Also, pairing)
}

// Predicted is one number foreseen for a pairing.
type Predicted struct {
	Pairing  string
	Quantity string // "iterations"
	Value    float64
}

// Case is what the rules judge.
type Case struct {
	Facts  *inspect.Facts
	Trials []trace.History
	Tol    float64
	Race   bool   // the trials, today's aside, were entered by dwindle, not asked for
	StopBy string // the stopping rule of the session
	// Gain is what the recommended pairing gains over today's; zero where that is
	// not known.
	Gain   Gain
	Chosen string // the pairing that is recommended; empty where that is not known
}

// Rule is one entry of the catalogue.
type Rule struct {
	Name  string
	Judge func(Case) []Finding
}

// Gain is what a pairing gains over today's.
type Gain struct {
	Times       float64 // today's cost over that of the pairing; 0 where nothing is told
	ByWork      bool    // by counted work, for the clock does not tell them apart
	Today, Best float64 // seconds that the two cost
}
