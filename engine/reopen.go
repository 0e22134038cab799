package engine

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
	"dwindle/engine/load"
	"dwindle/engine/recording"
	"dwindle/engine/run"
	"dwindle/samples"
)

// sessionExtension is how session files are named.
const sessionExtension = ".dwindle"

// IsSessionFile says whether source is a session file: by its first bytes, or
// by its name *.dwindle, which promises one.
func IsSessionFile(source string) bool {
	if source == "-" || strings.HasPrefix(source, samples.Prefix) {
		return false
	}
	info, err := os.Stat(source)
	if err != nil || !info.Mode().IsRegular() {
		return false
	}
	f, err := os.Open(source)
	if err != nil {
		return false
	}
	defer f.Close()
	return recording.Begins(f) || strings.HasSuffix(source, sessionExtension)
}

// reopen takes up a recorded session where its file ends. Nothing is run: the
// trials are as they were left, and findings and choice are judged anew.
func (s *Session) reopen(to string) (err error) {
	defer func() {
		if p := recover(); p != nil {
			err = &recording.Error{Path: s.source, Err: fmt.Errorf("cannot be judged: %v", p)}
		}
	}()
	past, err := recording.Open(s.source)
	if err != nil {
		return &load.Error{File: s.source, Text: recording.Reason(err).Error()}
	}
	linear.SetThreads(s.opt.Threads)
	opt := options(past.About.Asked, s.opt)
	if past.About.Command != "" {
		opt.Command = past.About.Command
	}
	s.set(func() {
		s.opt, s.past, s.facts, s.print = opt, past, past.Facts, past.About.System.Fingerprint
		s.phase, s.progress, s.ruled = Ended, -1, past.About.Ruled
		s.lost = s.find()
	})
	s.Snapshot() // judged once here: a fault is one of the file
	if to == "" {
		return nil
	}
	if sameFile(to, s.source) {
		return badOption("--session names the session that is opened; name another file")
	}
	return s.Record(to)
}

func sameFile(a, b string) bool {
	x, err := os.Stat(a)
	y, fault := os.Stat(b)
	return err == nil && fault == nil && os.SameFile(x, y)
}

// find looks where the system of a reopened session can be read again, and
// says why it cannot, or nothing; s.mu is held.
func (s *Session) find() string {
	name := s.past.About.Source
	if strings.HasPrefix(name, samples.Prefix) {
		s.again = name
		return ""
	}
	if name == "-" {
		return "its system was read from stdin"
	}
	for _, path := range []string{name, filepath.Join(filepath.Dir(s.source), name)} {
		if info, err := os.Stat(path); err == nil && info.Mode().IsRegular() {
			s.again = path
			return ""
		}
	}
	return filepath.Base(name) + " is neither here nor beside it"
}

// revive reads the system of a reopened session again, so that new pairings
// can be run beside what was recorded.
func (s *Session) revive() error {
	s.reviving.Lock()
	defer s.reviving.Unlock()
	s.mu.Lock()
	past, bench, again, lost, opt := s.past, s.bench, s.again, s.lost, s.opt
	s.mu.Unlock()
	switch {
	case bench != nil || past == nil:
		return nil
	case lost != "":
		return errors.New("a recorded session is read-only: " + lost)
	}
	for _, name := range opt.files() {
		if beside := filepath.Join(filepath.Dir(s.source), *name); *name != "" && !exists(*name) && exists(beside) {
			*name = beside
		}
	}
	sys, err := s.readAgain(again, opt)
	if err != nil {
		return s.lose(err.Error())
	}
	if fingerprint(sys) != past.About.System.Fingerprint {
		return s.lose(sys.Name + " is not the system of this session any more")
	}
	s.takeUp(sys)
	return nil
}

func exists(path string) bool { _, err := os.Stat(path); return err == nil }

func (s *Session) readAgain(source string, opt Options) (linear.System, error) {
	sys, err := read(s.ctx, source, nil, opt.Memory, func(float64) {})
	if err == nil {
		err = complete(&sys, opt)
	}
	if err == nil {
		err = setNearNull(&sys, opt)
	}
	sys.Open = s.open
	sys.Name = s.past.About.System.Name
	return sys, err
}

// lose makes a reopened session read-only for good.
func (s *Session) lose(why string) error {
	s.set(func() { s.lost = why })
	return errors.New("a recorded session is read-only: " + why)
}

// takeUp puts a bench under a reopened session; its trials are numbered on.
func (s *Session) takeUp(sys linear.System) {
	s.mu.Lock()
	defer s.mu.Unlock()
	s.sys = sys
	last := 0
	for _, t := range s.past.Trials {
		last = max(last, t.ID)
	}
	sys.Null, sys.LeftNull = inspect.ZeroDirections(s.facts), inspect.LeftDirections(s.facts)
	s.bench = run.NewBench(sys, s.limits(), s.opt.Memory, s.opt.Clock)
	s.bench.NumberFrom(last + 1)
	s.phase, s.openAt = Running, s.clock()-s.past.Elapsed
	s.changes++
	go s.bench.Run(s.ctx)
}

// viewPast adds to a view what came from a session file, and how the session
// is being written to one; s.mu is held.
func (s *Session) viewPast(v *Snapshot) {
	v.RecordErr = s.recordErr
	if s.recorder != nil {
		v.Recording = s.recorder.Path
	}
	if s.past == nil {
		return
	}
	v.Recorded, v.ReadOnly, v.System = true, s.lost, s.past.About.System
	for _, t := range s.past.Trials {
		v.Trials = append(v.Trials, Trial(t))
	}
	if v.revived = s.bench != nil; !v.revived {
		v.Machine, v.Elapsed = s.past.About.Machine, s.past.Elapsed
	}
}

// dropPast takes a recorded trial off the list; markPast marks one as today's.
func (s *Session) dropPast(id int) {
	s.set(func() {
		if s.past != nil {
			s.past.Trials = slices.DeleteFunc(s.past.Trials, func(t recording.Trial) bool { return t.ID == id })
		}
	})
}

func (s *Session) markPast(id int) {
	s.set(func() {
		if s.past == nil {
			return
		}
		for i := range s.past.Trials {
			s.past.Trials[i].History.Today = s.past.Trials[i].ID == id
		}
	})
}
