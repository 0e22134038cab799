package main

import (
	"fmt"
	"io"
	"os"
	"strings"
	"time"

	"golang.org/x/sys/unix"

	"dwindle/engine"
	"dwindle/engine/report"
)

// progress tells on stderr how a run goes: a line for each trial that ended,
// and on a terminal one line that is renewed every second. It writes no
// escape.
type progress struct {
	w      io.Writer
	live   bool // w is a terminal
	told   map[int]bool
	shown  int // characters of the renewed line
	latest time.Time
	lost   bool // told that the session file is given up
}

func newProgress(w io.Writer) *progress {
	return &progress{w: w, live: isTerminal(w), told: map[int]bool{}}
}

// isTerminal says whether w is one, by asking for its settings.
func isTerminal(w io.Writer) bool {
	f, ok := w.(*os.File)
	if !ok {
		return false
	}
	_, err := unix.IoctlGetTermios(int(f.Fd()), unix.TCGETS)
	return err == nil
}

// update tells what is new in the snapshot.
func (p *progress) update(s engine.Snapshot) {
	for _, t := range s.Trials {
		if t.History.Stop.Ended() && !p.told[t.ID] {
			p.told[t.ID] = true
			p.wipe()
			text := t.History.Pairing + ": " + report.Outcome(t.History)
			for _, line := range report.Paragraph(fmt.Sprintf("%3s ", t.Tag()), text) {
				fmt.Fprintln(p.w, line)
			}
		}
	}
	if s.RecordErr != nil && !p.lost {
		p.lost = true
		p.wipe()
		fmt.Fprintln(p.w, "dwindle:", printable(s.RecordErr.Error())+"; the run goes on without it")
	}
	if p.live && time.Since(p.latest) >= time.Second {
		p.latest = time.Now()
		p.renew(s)
	}
}

// renew rewrites the line that shows what goes on.
func (p *progress) renew(s engine.Snapshot) {
	text := fmt.Sprintf("%4.0f s  %s", s.Elapsed.Seconds(), s.Phase)
	for _, t := range s.Trials {
		if r, ok := t.History.Last(); ok && !t.History.Stop.Ended() {
			text += fmt.Sprintf("  %s: it %d %.0e", t.Tag(), r.Iter, r.Residual)
		}
	}
	p.wipe()
	if len(text) > report.Width {
		text = text[:report.Width]
	}
	p.shown = len(text)
	fmt.Fprint(p.w, text, "\r")
}

// wipe clears the renewed line.
func (p *progress) wipe() {
	if p.shown > 0 {
		fmt.Fprint(p.w, strings.Repeat(" ", p.shown), "\r")
		p.shown = 0
	}
}
