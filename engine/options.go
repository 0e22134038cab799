package engine

import (
	"errors"
	"fmt"
	"io"
	"math"
	"slices"
	"time"

	"dwindle/engine/choose"
	"dwindle/engine/linear"
	"dwindle/engine/load"
	"dwindle/engine/run"
)

// Options decide what a session does. The zero value of each field asks for
// the default.
type Options struct {
	Pairs        []string             // the line-up; none: made from the facts
	Today        string               // the pairing the user's code runs now
	RHS          string               // FILE[:COL], ones, made or unit:ROW; empty: the file's own, else ones, else made
	Guess        string               // FILE[:COL]
	Dofs         int                  // unknowns of a node that stand next to each other
	Null         string               // FILE of near-null vectors, one a column
	Coordinates  string               // FILE of the nodes' coordinates, one node a row
	Split        string               // FILE with a number a row: not 0 where the unknown belongs to the second block
	Labels       string               // FILE with a label a row
	Fields       string               // FILE with a field name a row
	FieldTols    []string             // NAME=TOL: what must hold for one field as well
	Goal         string               // what the choice goes by: seconds (default), memory or robust
	Columns      string               // further right-hand sides to measure the choice on, such as 1-8 of the --rhs file
	Recording    string               // FILE the session is written to as it goes; empty: none
	Tol          float64              // 1e-8
	StopRule     string               // rhs (default), initial, backward or absolute
	Iterations   int                  // per trial: 10 n, at most 100 000
	Seconds      float64              // wall time of the run; 0 is no limit
	TrialSeconds float64              // own time of a trial; 0 is no limit
	Threads      int                  // 0: what a login node or the job allows
	Memory       int64                // bytes for all live trials together; 0: half of what is free
	Vectors      bool                 // keep the vectors behind findings for the report
	Identify     bool                 // name the file's path in reports
	Interactive  bool                 // the line-up starts by itself only if its estimated work is small
	FactsOnly    bool                 // no trials: the session ends with the facts
	Command      string               // as the user typed it, for the report
	Version      string               // of the program, for the report
	Stdin        io.Reader            // for source "-"
	Clock        func() time.Duration // injected by tests; nil is the machine's
}

// UsageError is an option that cannot be honoured.
type UsageError struct{ Text string }

func (e *UsageError) Error() string { return e.Text }

func badOption(format string, args ...any) error { return &UsageError{fmt.Sprintf(format, args...)} }

// IsUsage says whether err is a mistake in the options.
func IsUsage(err error) bool {
	var u *UsageError
	return errors.As(err, &u)
}

// IsInput says whether err is an input that cannot be read.
func IsInput(err error) bool {
	var l *load.Error
	return errors.As(err, &l)
}

func (o Options) withDefaults() Options {
	if o.Tol == 0 {
		o.Tol = 1e-8
	}
	if o.StopRule == "" {
		o.StopRule = string(run.StopRHS)
	}
	if o.Threads == 0 {
		o.Threads = defaultThreads()
	}
	if o.Memory == 0 {
		o.Memory = defaultMemory()
	}
	var pairs []string
	for _, p := range o.Pairs {
		if list, err := linear.Expand(p); err == nil {
			pairs = append(pairs, list...)
		} else {
			pairs = append(pairs, p) // Check says what is wrong with it
		}
	}
	o.Pairs = pairs
	return o
}

// Check returns the first thing that is wrong with the options, a
// *UsageError, without touching any file.
func (o Options) Check() error {
	bad := badOption
	rules := []string{"", string(run.StopRHS), string(run.StopInitial), string(run.StopBackward), string(run.StopAbsolute)}
	switch {
	case o.Tol < 0 || o.Tol >= 1 && o.StopRule != string(run.StopAbsolute) || math.IsNaN(o.Tol):
		return bad("--tol must lie between 0 and 1, not %g", o.Tol)
	case !slices.Contains(rules, o.StopRule):
		return bad("--stop must be rhs, initial, backward or absolute, not %q", o.StopRule)
	case o.Goal != "" && !slices.Contains(choose.Goals, o.Goal):
		return bad("--goal must be seconds, memory or robust, not %q", o.Goal)
	case o.Dofs < 0:
		return bad("--dofs must not be negative")
	case o.Null != "" && o.Coordinates != "":
		return bad("give --null or --coordinates, not both")
	case o.Iterations < 0:
		return bad("--iterations must not be negative")
	case !(o.Seconds >= 0) || !(o.TrialSeconds >= 0):
		return bad("--seconds and --trial-seconds must not be negative")
	case o.Threads < 0:
		return bad("--threads must not be negative")
	case o.Memory < 0:
		return bad("--memory must not be negative")
	}
	if err := o.checkColumns(); err != nil {
		return err
	}
	for _, text := range o.FieldTols {
		if _, _, err := fieldTol(text); err != nil {
			return err
		}
	}
	for _, p := range append([]string{o.Today}, o.Pairs...) {
		if p == "" {
			continue
		}
		list, err := linear.Expand(p)
		for _, q := range list {
			if err == nil {
				_, err = run.Parse(q)
			}
		}
		if err != nil {
			return bad("%v", err)
		}
	}
	return nil
}
