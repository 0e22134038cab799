package engine

import (
	"path/filepath"
	"strings"

	"dwindle/engine/recording"
	"dwindle/samples"
)

// Record writes the session to a file from now on: what there is, then what
// comes, until Close. A session records to one file at a time.
func (s *Session) Record(path string) error {
	file, err := recording.Create(path)
	if err != nil {
		return err
	}
	s.mu.Lock()
	old := s.recorder
	s.recorder, s.recordErr = recording.Start(path, file, recorded{s}), nil
	s.changes++
	s.mu.Unlock()
	old.Finish()
	return nil
}

// recorded is what a session file holds of a session, without any judgement.
type recorded struct{ s *Session }

// State is the session as it stands.
func (r recorded) State() recording.State {
	s := r.s
	s.mu.Lock()
	defer s.mu.Unlock()
	v := s.view()
	state := recording.State{Facts: v.Facts, Elapsed: v.Elapsed}
	if s.past != nil {
		state.About = s.past.About
	} else {
		state.About = &recording.About{Version: s.opt.Version, Command: s.opt.Command, Toolchain: toolchain(), Machine: v.Machine,
			Settings: v.Settings, System: v.System, Source: s.sourceTold(), Ruled: s.ruled, Asked: s.opt.asked()}
	}
	for _, t := range v.Trials {
		state.Trials = append(state.Trials, recording.Trial(t))
	}
	return state
}

// Answer is the solution, where the vectors behind the findings were asked for.
func (r recorded) Answer() *recording.Answer {
	s := r.s
	s.mu.Lock()
	defer s.mu.Unlock()
	if !s.opt.Vectors {
		return nil
	}
	return s.answer(s.look().Choice.Pairing)
}

// Failed keeps why the recording ended before its time.
func (r recorded) Failed(err error) { r.s.set(func() { r.s.recordErr = err }) }

// sourceTold is the source as it may stand in a file that others read.
func (s *Session) sourceTold() string {
	if s.opt.Identify || s.source == "-" || strings.HasPrefix(s.source, samples.Prefix) {
		return s.source
	}
	return filepath.Base(s.source)
}

// asked are the options that decide the outcome, without folders unless these
// may be told.
func (o Options) asked() recording.Asked {
	if !o.Identify {
		for _, name := range o.files() {
			if *name != "" {
				*name = filepath.Base(*name)
			}
		}
	}
	return recording.Asked{Pairs: o.Pairs, Today: o.Today, Dofs: o.Dofs, FieldTols: o.FieldTols, Goal: o.Goal, Columns: o.Columns,
		Tol: o.Tol, StopRule: o.StopRule, Iterations: o.Iterations, Seconds: o.Seconds, TrialSeconds: o.TrialSeconds,
		Identify: o.Identify, Vectors: o.Vectors, RHS: o.RHS, Guess: o.Guess, Null: o.Null, Coordinates: o.Coordinates, Split: o.Split,
		Labels: o.Labels, Fields: o.Fields}
}

// options are those that decided the outcome of a recorded session, with what
// is asked of this one: how it may use the machine, and what it is to write.
func options(a recording.Asked, now Options) Options {
	return Options{Pairs: a.Pairs, Today: a.Today, Dofs: a.Dofs, FieldTols: a.FieldTols, Goal: a.Goal, Columns: a.Columns,
		Tol: a.Tol, StopRule: a.StopRule, Iterations: a.Iterations, Seconds: a.Seconds, TrialSeconds: a.TrialSeconds,
		Identify: a.Identify, RHS: a.RHS, Guess: a.Guess, Null: a.Null, Coordinates: a.Coordinates, Split: a.Split,
		Labels: a.Labels, Fields: a.Fields,
		Threads: now.Threads, Memory: now.Memory, Clock: now.Clock, Version: now.Version, Command: now.Command,
		Vectors: a.Vectors || now.Vectors}
}

// files are the options that name a file.
func (o *Options) files() []*string {
	return []*string{&o.RHS, &o.Guess, &o.Null, &o.Coordinates, &o.Split, &o.Labels, &o.Fields}
}
