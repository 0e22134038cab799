package main

import (
	"context"
	"io"
	"os"
	"os/signal"
	"syscall"
	"time"

	"dwindle/engine"
)

// patience is how long an interrupted session may take to end its trials.
const patience = 10 * time.Second

// attend follows a session until done closes, telling its progress, or until
// a signal interrupts it. It returns whether one did. A second signal ends
// the program at once.
func attend(s *engine.Session, done <-chan struct{}, stderr io.Writer) (wasInterrupted bool) {
	signals := make(chan os.Signal, 2)
	for _, sig := range []os.Signal{os.Interrupt, syscall.SIGTERM, syscall.SIGHUP} {
		if !signal.Ignored(sig) { // nohup stays in force
			signal.Notify(signals, sig)
		}
	}
	defer signal.Stop(signals)
	p := newProgress(stderr)
	defer p.wipe()
	tick := time.NewTicker(200 * time.Millisecond)
	defer tick.Stop()
	for {
		select {
		case <-done:
			p.update(s.Snapshot())
			return false
		case <-tick.C:
			p.update(s.Snapshot())
		case <-signals:
			go func() {
				<-signals
				os.Exit(interrupted)
			}()
			s.Interrupt("a signal ended the run")
			end(s)
			p.update(s.Snapshot())
			return true
		}
	}
}

// end closes the session, but waits no longer than patience: a read of stdin
// cannot be called back.
func end(s *engine.Session) {
	closed := make(chan struct{})
	go func() {
		s.Close()
		close(closed)
	}()
	select {
	case <-closed:
	case <-time.After(patience):
	}
}

// waited closes its channel when every trial has ended or the session broke.
func waited(s *engine.Session) <-chan struct{} {
	done := make(chan struct{})
	go func() {
		s.Wait(context.Background()) // what went wrong is in the snapshot
		close(done)
	}()
	return done
}
