package engine

import (
	"path/filepath"
	"strings"

	"dwindle/engine/trace"
	"dwindle/samples"
)

// Record writes the session to a file from now on: what there is, then what
// comes, until Close. A session records to one file at a time.
func (s *Session) Record(path string) error {
	r, err := newRecorder(s, path)
	if err != nil {
		return err
	}
	s.mu.Lock()
	old := s.recorder
	s.recorder, s.recordErr = r, nil
	s.changes++
	s.mu.Unlock()
	old.finish()
	go r.run()
	return nil
}

// finish writes the last frame and closes the file.
func (r *recorder) finish() {
	if r != nil {
		close(r.stop)
		<-r.done
	}
}

// recorded is what asks for a frame at once when it changes.
func (s *Session) recorded() recorded {
	s.mu.Lock()
	defer s.mu.Unlock()
	now := recorded{phase: s.phase}
	if s.bench != nil {
		for _, t := range s.bench.Trials() {
			now.trials++
			if t.History().Stop.Ended() {
				now.over++
			}
		}
	}
	return now
}

// state is what a session file holds of a session, without any judgement.
func (s *Session) state() (Snapshot, *about) {
	s.mu.Lock()
	defer s.mu.Unlock()
	v := s.view()
	a := s.about
	if a == nil {
		a = &about{Version: s.opt.Version, Command: s.opt.Command, Toolchain: toolchain(), Machine: v.Machine,
			Settings: v.Settings, System: v.System, Source: s.sourceTold(), Ruled: s.ruled, Asked: s.opt.told()}
	}
	return v, a
}

// sourceTold is the source as it may stand in a file that others read.
func (s *Session) sourceTold() string {
	if s.opt.Identify || s.source == "-" || strings.HasPrefix(s.source, samples.Prefix) {
		return s.source
	}
	return filepath.Base(s.source)
}

// told are the options that decide the outcome, without folders unless these
// may be told.
func (o Options) told() Options {
	told := Options{Pairs: o.Pairs, Today: o.Today, Dofs: o.Dofs, FieldTols: o.FieldTols, Goal: o.Goal, Columns: o.Columns,
		Tol: o.Tol, StopRule: o.StopRule, Iterations: o.Iterations, Seconds: o.Seconds, TrialSeconds: o.TrialSeconds,
		Identify: o.Identify, Vectors: o.Vectors, RHS: o.RHS, Guess: o.Guess, Null: o.Null, Coordinates: o.Coordinates, Split: o.Split,
		Labels: o.Labels, Fields: o.Fields}
	if !o.Identify {
		for _, name := range told.files() {
			if *name != "" {
				*name = filepath.Base(*name)
			}
		}
	}
	return told
}

// files are the options that name a file.
func (o *Options) files() []*string {
	return []*string{&o.RHS, &o.Guess, &o.Null, &o.Coordinates, &o.Split, &o.Labels, &o.Fields}
}

// leftGoing is the reason of a trial whose end no one wrote down.
const leftGoing = "still going when the recording ended"

// ends gives every live history the ending that its recording had.
func ends(h trace.History) trace.History {
	if !h.Stop.Ended() {
		h.Stop, h.Reason = trace.Cancelled, leftGoing
	}
	return h
}
