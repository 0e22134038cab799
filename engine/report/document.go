// Package report writes what a session found: text, JSON, CSV, Markdown and
// the solution. The writers are pure: a document in, bytes out.
package report

import (
	"time"

	"dwindle/engine/choose"
	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// Document is everything a report can say.
type Document struct {
	Version   string
	Command   string // the exact command to repeat the run
	Machine   Machine
	Settings  Settings
	System    System
	Facts     *inspect.Facts
	Trials    []trace.History
	Findings  []diagnose.Finding
	Choice    choose.Choice
	Elapsed   time.Duration
	Vectors   []Vector  // behind findings and ends, where they were asked for
	Toolchain string    // what built the program, such as "go1.26.8 linux/amd64"
	Recorded  bool      // all of it was read from a session file
	Solution  []float64 // of the chosen pairing, or of the best trial; nil if none
}

// Machine is where it ran. Nothing in it names the host or the user.
type Machine struct {
	CPU         string
	Threads     int
	MemoryLimit int64 // bytes
}

// Settings are the options that decide the outcome.
type Settings struct {
	Tol        float64
	StopRule   string  // rhs, initial, backward or absolute
	Iterations int     // per trial; 0 is the default
	Seconds    float64 // of the run; 0 is no limit
	Seed       int
	FieldTols  string // what must hold of fields as well: NAME=TOL, ...; empty for nothing
}

// System is the system's name and fingerprint.
type System struct {
	Name        string
	Unknowns    int
	Entries     int
	RHS         string // file, embedded, ones, made or unit
	Digits      int
	Fingerprint string // sha256 of pattern, values and b, hexadecimal
}
