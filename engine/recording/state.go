package recording

import (
	"math"
	"time"

	"dwindle/engine/choose"
	"dwindle/engine/inspect"
	"dwindle/engine/report"
	"dwindle/engine/trace"
)

// State is what a file tells of a session. Findings and choice are not in it:
// whoever reads it judges anew.
type State struct {
	About   *About
	Facts   *inspect.Facts // nil before there are any
	Elapsed time.Duration
	Trials  []Trial // in the order they were added
	Answer  *Answer // nil where it was not asked for
}

// Trial is one trial under its number.
type Trial struct {
	ID      int // from 1
	History trace.History
}

// Residual is the true residual of the trial of a pairing, +Inf if there is none.
func (s *State) Residual(pairing string) float64 {
	for _, t := range s.Trials {
		if t.History.Pairing == pairing {
			return t.History.TrueResidual
		}
	}
	return math.Inf(1)
}

// Answer is the solution of one trial.
type Answer struct {
	Pairing string
	X       []float64 // n, in the user's rows
}

// About is what is known of a session besides its facts and trials.
type About struct {
	Version, Command, Toolchain string
	Machine                     report.Machine
	Settings                    report.Settings
	System                      report.System
	Source                      string // a sample, or the file's name; its path where that may be told
	Ruled                       []choose.Ruled
	Asked                       Asked
}

// Asked are the options of a session that decide its outcome; no path unless
// it may be told. What each means is told at engine.Options.
type Asked struct {
	Pairs, FieldTols                                     []string
	Today, Goal, Columns, StopRule                       string
	RHS, Guess, Null, Coordinates, Split, Labels, Fields string
	Dofs, Iterations                                     int
	Tol, Seconds, TrialSeconds                           float64
	Identify, Vectors                                    bool
}
