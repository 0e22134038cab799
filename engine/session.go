package engine

import (
	"context"
	"fmt"
	"sync"
	"time"

	"dwindle/engine/choose"
	"dwindle/engine/inspect"
	"dwindle/engine/linear"
	"dwindle/engine/recording"
	"dwindle/engine/report"
	"dwindle/engine/run"
	"dwindle/engine/trace"
)

// Session is one system with its trials: the one object behind the interface
// and the headless command. Its methods stand in the order of the flow. All
// may be called from any goroutine.
type Session struct {
	opt    Options
	source string
	clock  run.Clock
	ctx    context.Context
	cancel context.CancelFunc
	ready  chan struct{} // closed when the bench stands, or the session broke
	done   chan struct{} // closed when the flow has returned
	openAt time.Duration

	mu        sync.Mutex
	phase     Phase
	progress  float64
	err       error
	sys       linear.System
	facts     *inspect.Facts
	print     string // fingerprint
	skip      func() // ends the second look at the system; nil if none is under way
	bench     *run.Bench
	lineup    []string
	race      *race // nil: the line-up was given
	ruled     []choose.Ruled
	columns   *further // nil: none asked for
	waiting   string
	suspended time.Duration // total
	haltedAt  time.Duration // when the present suspension began; negative if none
	judged    verdict
	changes   int64
	recorder  *recording.Recorder // nil: no file is written
	recordErr error               // why the recording ended

	// of a session that was reopened from a file
	reviving sync.Mutex
	past     *recording.State // nil: this one is new; its trials change only with Drop and MarkToday
	again    string           // where its system can be read again
	lost     string           // why it cannot
}

// Open starts a session on source (a file, "-", or sample:NAME[:ARGS]) in the
// background: it loads, inspects, makes the line-up and starts it; in the
// interface only where the estimated work is small enough. It returns at
// once; what goes wrong is in Snapshot().Err.
func Open(ctx context.Context, source string, opt Options) *Session {
	s := &Session{opt: opt.withDefaults(), source: source, phase: Loading, haltedAt: -1,
		ready: make(chan struct{}), done: make(chan struct{})}
	s.clock = s.opt.Clock
	if s.clock == nil {
		s.clock = run.MachineClock()
	}
	s.openAt = s.clock()
	s.ctx, s.cancel = context.WithCancel(ctx)
	go s.flow()
	return s
}

// Candidates lists the pairings that could be added, the refused ones with
// their reason, admissible first.
func (s *Session) Candidates() []choose.Candidate {
	if s.revive() != nil {
		return nil
	}
	b := s.theBench()
	if b == nil {
		return nil
	}
	return candidates(b.Have(), s.opt.Memory)
}

// Start starts the waiting line-up. It does nothing before the line-up is
// known or after it was started.
func (s *Session) Start() {
	s.mu.Lock()
	lineup, b := s.lineup, s.bench
	if s.phase != Ready || b == nil {
		s.mu.Unlock()
		return
	}
	s.phase, s.waiting = Running, ""
	s.changes++
	s.mu.Unlock()
	seen := map[string]bool{}
	for i, text := range lineup {
		m, err := run.Parse(text)
		if err != nil || seen[m.Name] { // checked before; today's may be named twice
			continue
		}
		seen[m.Name] = true
		t := b.Add(m)
		if i == 0 && s.opt.Today != "" {
			b.MarkToday(t)
		}
	}
	s.steer(b)
	if s.opt.Seconds > 0 {
		go s.timeUp(b)
	}
}

// timeUp ends the trials when the wall time of the run is used up.
func (s *Session) timeUp(b *run.Bench) {
	select {
	case <-time.After(time.Duration(s.opt.Seconds * 1e9)):
		b.CancelAll(trace.TimeLimit, fmt.Sprintf("the %g s of the run were used up", s.opt.Seconds))
	case <-s.ctx.Done():
	}
}

// Add adds a pairing as a new trial, or one for each value of a range, and
// starts it. It returns the id of the first.
func (s *Session) Add(pairing string) (id int, err error) {
	if err := s.revive(); err != nil {
		return 0, err
	}
	b := s.theBench()
	if b == nil {
		return 0, fmt.Errorf("the system is still being read")
	}
	list, err := linear.Expand(pairing)
	if err != nil {
		return 0, err
	}
	methods := make([]run.Method, len(list))
	for i, p := range list {
		if methods[i], err = run.Parse(p); err != nil {
			return 0, err
		}
	}
	s.Start()
	for i, m := range methods {
		if t := b.Add(m); i == 0 {
			id = t.ID
		}
	}
	return id, nil
}

// Hold lets a running trial wait; Resume lets it go on.
func (s *Session) Hold(id int) { s.on(id, func(b *run.Bench, t *run.Trial) { b.Hold(t, true) }) }

// Resume lets a held trial go on.
func (s *Session) Resume(id int) { s.on(id, func(b *run.Bench, t *run.Trial) { b.Hold(t, false) }) }

// Cancel ends a trial and keeps its curve.
func (s *Session) Cancel(id int) {
	s.on(id, func(b *run.Bench, t *run.Trial) { b.Cancel(t, trace.Cancelled, "stopped by the user") })
}

// Drop removes a trial and its curve.
func (s *Session) Drop(id int) {
	s.dropPast(id)
	s.on(id, func(b *run.Bench, t *run.Trial) { b.Drop(id) })
}

// MarkToday says that this trial is what the user's code runs now; id 0 takes
// the mark back.
func (s *Session) MarkToday(id int) {
	s.markPast(id)
	if b := s.theBench(); b != nil {
		b.MarkToday(b.Find(id))
	}
}

func (s *Session) on(id int, do func(*run.Bench, *run.Trial)) {
	b := s.theBench()
	if b == nil {
		return
	}
	if t := b.Find(id); t != nil {
		do(b, t)
		s.set(func() {})
	}
}

// Suspend returns when no trial moves any more; clocks stand still until
// Continue.
func (s *Session) Suspend() {
	if b := s.theBench(); b != nil {
		b.Pause()
	}
	s.set(func() { s.haltedAt = s.clock() })
}

// Continue lets the trials move again after Suspend.
func (s *Session) Continue() {
	s.set(func() {
		if s.haltedAt >= 0 {
			s.suspended += s.clock() - s.haltedAt
			s.haltedAt = -1
		}
	})
	if b := s.theBench(); b != nil {
		b.Continue()
	}
}

// Wait returns when every trial has ended or the session broke (its error),
// or when ctx is done (its error).
func (s *Session) Wait(ctx context.Context) error {
	select {
	case <-s.ready:
	case <-ctx.Done():
		return ctx.Err()
	}
	b := s.theBench()
	if b == nil {
		return s.Snapshot().Err
	}
	b.WaitEnded(ctx)
	return ctx.Err()
}

// Interrupt ends every trial that has not ended, because of reason.
func (s *Session) Interrupt(reason string) {
	if b := s.theBench(); b != nil {
		b.CancelAll(trace.Cancelled, reason)
	}
}

// Close ends every trial and gives the memory back. Document still works.
func (s *Session) Close() {
	s.Interrupt("the session was closed")
	s.cancel()
	<-s.done
	s.mu.Lock()
	r := s.recorder
	s.recorder = nil
	s.mu.Unlock()
	r.Finish()
}

// Document returns everything a report can say at this moment.
func (s *Session) Document() report.Document { return s.document() }

func (s *Session) theBench() *run.Bench {
	s.mu.Lock()
	defer s.mu.Unlock()
	return s.bench
}

// set changes the session under its lock and counts the change.
func (s *Session) set(change func()) {
	s.mu.Lock()
	defer s.mu.Unlock()
	change()
	s.changes++
}
