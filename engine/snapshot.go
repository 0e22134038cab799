package engine

import (
	"time"

	"dwindle/engine/choose"
	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/report"
	"dwindle/engine/trace"
)

// Phase is where a session stands.
type Phase string

// The phases, in order.
const (
	Loading    Phase = "loading"    // reading the system
	Inspecting Phase = "inspecting" // establishing facts
	Ready      Phase = "ready"      // a line-up waits for Start
	Running    Phase = "running"    // trials go on
	Ended      Phase = "ended"      // every trial has ended
	Broken     Phase = "broken"     // Err says why
)

// Snapshot is a consistent view of a session at one moment. It shares the
// append-only records with the session and is cheap at any length.
type Snapshot struct {
	Phase    Phase
	Progress float64 // of loading, inspecting or a set-up: 0 to 1; negative if unknown
	Err      error   // in phase Broken

	System   report.System
	Settings report.Settings
	Machine  report.Machine
	Facts    *inspect.Facts // nil while loading; filled step by step, never changed in place
	Trials   []Trial        // in the order they were added
	Findings []diagnose.Finding
	Choice   choose.Choice
	// Recorded says that the session was read from a session file; ReadOnly
	// why no pairing can be added to it, empty where one can.
	Recorded  bool
	ReadOnly  string
	revived   bool          // it goes on beside what was recorded
	Recording string        // the file it is being written to, empty if none
	RecordErr error         // why that ended before its time
	Waiting   string        // in phase Ready: why the line-up was not started by itself
	Elapsed   time.Duration // since the session was opened, suspended time left out
	Version   int64         // changes whenever anything in the snapshot does, clocks of live trials included
}

// Trial is one trial as a snapshot shows it.
type Trial struct {
	ID      int // stable, from 1
	History trace.History
}

// Tag is the sign by which the trial goes on screens, in reports and on stderr.
func (t Trial) Tag() string { return trace.Tag(t.ID) }

// Unchanged says that nothing was added to what a session file told.
func (s Snapshot) Unchanged() bool { return s.Recorded && !s.revived }

// Live says whether any trial can still move without a command.
func (s Snapshot) Live() bool {
	for _, t := range s.Trials {
		if !t.History.Stop.Ended() && t.History.Stop != trace.Held {
			return true
		}
	}
	return s.Phase == Loading || s.Phase == Inspecting
}
