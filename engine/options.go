package engine

import (
	"io"
	"time"
)

// Options decide what a session does. The zero value of each field asks for
// the default.
type Options struct {
	Pairs        []string // the line-up; none: made from the facts
	Today        string   // the pairing the user's code runs now
	RHS          string   // FILE[:COL], ones, made or unit:ROW; empty: see the design of the command line
	Guess        string   // FILE[:COL]
	Tol          float64  // 1e-8
	StopRule     string   // rhs (default), initial, backward or absolute
	Iterations   int      // per trial: 10 n, at most 100 000
	Seconds      float64  // wall time of the run; 0 is no limit
	TrialSeconds float64  // own time of a trial; 0 is no limit
	Threads      int      // 0: see machine.go
	Memory       int64    // bytes for all live trials together; 0: see machine.go
	Identify     bool     // name the file's path in reports
	Interactive  bool     // the line-up starts by itself only if its estimated work is small
	Command      string   // as the user typed it, for the report
	Version      string
	Stdin        io.Reader            // for source "-"
	Clock        func() time.Duration // injected by tests; nil is the machine's
}
