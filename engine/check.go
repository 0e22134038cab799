package engine

import (
	"context"

	"dwindle/engine/check"
	"dwindle/engine/direct"
	"dwindle/engine/linear"
	"dwindle/engine/load"
	"dwindle/engine/report"
)

// Checked is the solution that Check judges; the x₀ it started from is the
// guess of the options.
type Checked struct {
	X    string // FILE[:COL]
	Said string // the number the other program printed; empty if none is known
}

// Check judges a solution from elsewhere on the system in source, without any
// trial. What is wrong with the options or the input is an error as in a
// session.
func Check(ctx context.Context, source string, opt Options, given Checked) (report.CheckDocument, error) {
	var none report.CheckDocument
	opt = opt.withDefaults()
	if err := opt.Check(); err != nil {
		return none, err
	}
	var said *check.Said
	if given.Said != "" {
		var err error
		if said, err = check.ParseSaid(given.Said); err != nil {
			return none, badOption("--said: %v", err)
		}
	}
	linear.SetThreads(opt.Threads)
	sys, err := read(ctx, source, opt.Stdin, opt.Memory, nil)
	if err != nil {
		return none, err
	}
	if err := complete(&sys, opt); err != nil {
		return none, err
	}
	sys.Name = shown(source, sys, opt.Identify)
	x, notes, err := load.VectorFile(given.X, sys.N())
	if err != nil {
		return none, err
	}
	tols, err := fieldTols(sys, opt)
	if err != nil {
		return none, err
	}
	within := direct.FactLimits
	within.Bytes = min(within.Bytes, opt.Memory)
	a, err := check.Check(ctx, check.Question{System: sys, X: x, Said: said, Tol: opt.Tol, Rule: opt.StopRule,
		FieldTol: tols, Factor: within})
	if err != nil {
		return none, err
	}
	return report.CheckDocument{Version: opt.Version, Command: opt.Command, Machine: thisMachine(opt.Threads, opt.Memory),
		Tol: opt.Tol, StopRule: opt.StopRule, System: checkedSystem(sys), RHSGiven: opt.RHS != "", Notes: append(sys.Source.Notes, notes...), Answer: a}, nil
}

func checkedSystem(s linear.System) report.System {
	v := report.System{Name: s.Name, Unknowns: s.N(), RHS: string(s.RHS), Digits: s.Digits, Fingerprint: fingerprint(s)}
	if m := s.Matrix(); m != nil {
		v.Entries = m.Entries()
	}
	return v
}
