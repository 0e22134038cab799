package engine

import (
	"context"
	"errors"

	"dwindle/engine/choose"
	"dwindle/engine/report"
)

// Session is one system with its trials: the one object behind the interface
// and the headless command. Its methods stand in the order of the flow. All
// may be called from any goroutine.
type Session struct{}

// Open starts a session on source (a file, "-", or sample:NAME[:ARGS]) in the
// background: it loads, inspects, makes the line-up and, where the estimated
// work is small enough, starts it. It returns at once.
func Open(ctx context.Context, source string, opt Options) *Session { return &Session{} }

// Snapshot returns what there is to see now.
func (s *Session) Snapshot() Snapshot { return Snapshot{} }

// Candidates lists the pairings that could be added, the refused ones with
// their reason, admissible first.
func (s *Session) Candidates() []choose.Candidate { return nil }

// Start starts the waiting line-up.
func (s *Session) Start() {}

// Add adds a pairing as a new trial, or one for each value of a range, and
// starts it. It returns the id of the first.
func (s *Session) Add(pairing string) (id int, err error) { return 0, errors.New("not yet") }

// Hold lets a running trial wait; Resume lets it go on.
func (s *Session) Hold(id int) {}

// Resume lets a held trial go on.
func (s *Session) Resume(id int) {}

// Cancel ends a trial and keeps its curve.
func (s *Session) Cancel(id int) {}

// Drop removes a trial and its curve.
func (s *Session) Drop(id int) {}

// MarkToday says that this trial is what the user's code runs now; id 0 takes
// the mark back.
func (s *Session) MarkToday(id int) {}

// Suspend returns when no trial moves any more; clocks stand still until
// Continue.
func (s *Session) Suspend() {}

// Continue lets the trials move again after Suspend.
func (s *Session) Continue() {}

// Wait returns when every trial has ended, or the context has.
func (s *Session) Wait(ctx context.Context) error { return nil }

// Document returns everything a report can say at this moment.
func (s *Session) Document() report.Document { return report.Document{} }

// Close ends every trial and gives the memory back. Document still works.
func (s *Session) Close() {}
