package engine

import (
	"fmt"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
)

// flow runs the stages up to the trials, then moves the trials.
func (s *Session) flow() {
	defer close(s.done)
	if IsSessionFile(s.source) {
		err := s.opt.Check()
		if err == nil {
			err = s.reopen(s.opt.Recording)
		}
		if err != nil {
			s.set(func() { s.phase, s.err = Broken, err })
		}
		close(s.ready)
		return
	}
	if err := s.loadAndInspect(); err != nil {
		s.set(func() { s.phase, s.err = Broken, err })
		close(s.ready)
		return
	}
	b := s.setBench()
	close(s.ready)
	b.Run(s.ctx)
}

func (s *Session) loadAndInspect() (err error) {
	defer func() {
		if p := recover(); p != nil {
			err = fmt.Errorf("internal fault: %v", p)
		}
	}()
	if err := s.opt.Check(); err != nil {
		return err
	}
	linear.SetThreads(s.opt.Threads)
	sys, err := read(s.ctx, s.source, s.opt.Stdin, s.opt.Memory, func(p float64) { s.set(func() { s.progress = p }) })
	if err != nil {
		return err
	}
	if err := complete(&sys, s.opt); err != nil {
		return err
	}
	if err := setNearNull(&sys, s.opt); err != nil {
		return err
	}
	columns, err := s.readColumns(sys.N())
	if err != nil {
		return err
	}
	s.set(func() { s.columns = columns })
	sys.Open = s.open
	sys.Name = shown(s.source, sys, s.opt.Identify)
	s.set(func() { s.sys, s.phase, s.progress = sys, Inspecting, -1 })
	if s.opt.Recording != "" { // not before there is a system: what cannot be read leaves no file
		if err := s.Record(s.opt.Recording); err != nil {
			return err
		}
	}
	facts, err := inspect.Inspect(s.ctx, sys, func(f *inspect.Facts) { s.set(func() { s.facts = f }) })
	if err != nil {
		return err
	}
	print := fingerprint(sys)
	s.set(func() { s.facts, s.print = facts, print })
	if facts, err = s.study(sys, facts); err != nil {
		return err
	}
	s.set(func() { s.facts = facts })
	return nil
}
