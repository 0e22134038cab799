package tui

import (
	"fmt"

	tea "github.com/charmbracelet/bubbletea"

	"dwindle/engine"
	"dwindle/engine/choose"
	"dwindle/engine/trace"
)

// session is what the interface asks of an engine.Session.
type session interface {
	Snapshot() engine.Snapshot
	Candidates() []choose.Candidate
	Start()
	Skip()
	Add(pairing string) (id int, err error)
	Hold(id int)
	Resume(id int)
	Cancel(id int)
	Drop(id int)
	MarkToday(id int)
	Suspend()
	Continue()
}

// acted is what a command to the session came to.
type acted struct {
	said string // for the message line
	err  error
	pick int // a trial to pick, 0 for none
}

// act runs a command away from the screen: a session may take as long as its
// longest step to answer.
func act(said string, f func()) tea.Cmd {
	return func() tea.Msg {
		f()
		return acted{said: said}
	}
}

// add starts a pairing as a new trial.
func (m *model) add(pairing string) tea.Cmd {
	s := m.s
	return func() tea.Msg {
		id, err := s.Add(pairing)
		if err != nil {
			return acted{err: err}
		}
		return acted{said: fmt.Sprintf("%s is trial %s", pairing, trace.Tag(id)), pick: id}
	}
}

// look takes a new snapshot if there is one.
func (m *model) look() {
	if m.s == nil {
		return
	}
	snap := m.s.Snapshot()
	if m.looked && snap.Version == m.snap.Version {
		return
	}
	if !m.looked || snap.Live() || m.snap.Live() { // the clock stops with the last trial
		m.elapsed = snap.Elapsed
	}
	m.tell(snap)
	m.looked, m.stale, m.snap = true, true, snap
	m.trials.follow(snap)
	if m.follow && len(snap.Trials) > 0 {
		m.follow = false
		m.show(m.trials)
	}
}

// tell says once that the session was opened from a file and what can be done
// with it, and that its own recording failed.
func (m *model) tell(snap engine.Snapshot) {
	switch {
	case snap.RecordErr != nil && m.snap.RecordErr == nil:
		m.say(snap.RecordErr.Error() + "; the trials go on without it")
	case snap.Recorded && !m.snap.Recorded && snap.ReadOnly != "":
		m.say("a recorded session, read-only: " + snap.ReadOnly)
	case snap.Recorded && !m.snap.Recorded:
		m.say("a recorded session: its race is over; a new pairing (n) reads its system again")
	}
}

// running says whether a trial would lose work by quitting now.
func (m *model) running() bool {
	if m.snap.Phase != engine.Running {
		return false
	}
	for _, t := range m.snap.Trials {
		if !t.History.Stop.Ended() {
			return true
		}
	}
	return false
}

// trial returns the trial with this number, nil if there is none.
func (m *model) trial(id int) *engine.Trial {
	for i := range m.snap.Trials {
		if m.snap.Trials[i].ID == id {
			return &m.snap.Trials[i]
		}
	}
	return nil
}

// numberOf returns the number of the first trial of a pairing, 0 for none.
func (m *model) numberOf(pairing string) int {
	for _, t := range m.snap.Trials {
		if t.History.Pairing == pairing {
			return t.ID
		}
	}
	return 0
}
