package tui

import (
	"fmt"
	"strconv"

	tea "github.com/charmbracelet/bubbletea"

	"dwindle/engine/trace"
)

// slowest and fastest are the bounds of the refresh rate in Hz.
const slowest, fastest = 0.5, 10

// interrupt ends the interface at once; what there is will be saved.
func (m *model) interrupt() tea.Cmd {
	m.interrupted = true
	return tea.Quit
}

// quit ends the interface, after a question while trials run.
func (m *model) quit() tea.Cmd {
	if !m.running() {
		return tea.Quit
	}
	return m.ask("trials still run: quit?", func(*model) tea.Cmd { return tea.Quit })
}

// suspend stops the trials and their clocks, then the program. The gate is
// made to wait, so that the terminal is restored before the shell comes back.
func (m *model) suspend() tea.Cmd {
	s, gate := m.s, m.cfg.gate
	return func() tea.Msg {
		if s != nil {
			s.Suspend()
		}
		if gate != nil {
			gate.patient(true)
		}
		return tea.SuspendMsg{}
	}
}

// write writes a report and says where it is.
func (m *model) write() tea.Cmd {
	if m.cfg.Write == nil {
		m.say("no report is written here")
		return nil
	}
	return func() tea.Msg {
		path, err := m.cfg.writeNow(m.s)
		return acted{said: "report written to " + path, err: err}
	}
}

// record writes the session to a file from now on.
func (m *model) record() tea.Cmd {
	switch {
	case m.snap.Recording != "":
		m.say("the session is recorded to " + m.snap.Recording + " already")
		return nil
	case m.cfg.keepNow == nil:
		m.say("no session is recorded here")
		return nil
	}
	return func() tea.Msg {
		path, err := m.cfg.keepNow(m.s)
		return acted{said: "recorded from now on to " + path, err: err}
	}
}

// nextGlyphs walks through the glyph sets.
func (m *model) nextGlyphs() tea.Cmd {
	m.signs = m.signs.next()
	m.say("glyphs: " + m.signs.String())
	return nil
}

// changeRate scales the number of snapshots a second.
func (m *model) changeRate(f float64) tea.Cmd {
	m.rate = min(max(m.rate*f, slowest), fastest)
	m.say("screen refreshed " + strconv.FormatFloat(m.rate, 'g', 3, 64) + " times a second")
	return m.nextTick()
}

// start starts the line-up that waits.
func (m *model) start() tea.Cmd { return act("started", m.s.Start) }

// skip lets the line-up begin without the rest of the second look.
func (m *model) skip() tea.Cmd {
	return act("the second look ends with what it has found", m.s.Skip)
}

// stopTrial ends the picked trial, after a question.
func (m *model) stopTrial() tea.Cmd {
	t := m.trial(m.trials.picked)
	if t == nil || t.History.Stop.Ended() {
		m.say("the picked trial has ended already")
		return nil
	}
	text := fmt.Sprintf("stop trial %s %s? its curve stays.", trace.Tag(t.ID), t.History.Pairing)
	return m.ask(text, func(m *model) tea.Cmd {
		return act(fmt.Sprintf("trial %s is stopped", trace.Tag(t.ID)), func() { m.s.Cancel(t.ID) })
	})
}

// dropTrial removes the picked trial, after a question.
func (m *model) dropTrial() tea.Cmd {
	t := m.trial(m.trials.picked)
	if t == nil {
		return nil
	}
	text := fmt.Sprintf("drop trial %s %s? its curve and numbers go.", trace.Tag(t.ID), t.History.Pairing)
	return m.ask(text, func(m *model) tea.Cmd {
		m.trials.reset()
		return act(fmt.Sprintf("trial %s is dropped", trace.Tag(t.ID)), func() { m.s.Drop(t.ID) })
	})
}

// holdTrial holds the picked trial, or lets it go on.
func (m *model) holdTrial() tea.Cmd {
	t := m.trial(m.trials.picked)
	switch {
	case t == nil || t.History.Stop.Ended():
		m.say("the picked trial has ended already")
		return nil
	case t.History.Stop.String() == "held":
		return act(fmt.Sprintf("trial %s goes on", trace.Tag(t.ID)), func() { m.s.Resume(t.ID) })
	}
	return act(fmt.Sprintf("trial %s is held; space lets it go on", trace.Tag(t.ID)), func() { m.s.Hold(t.ID) })
}

// markToday says that the picked trial is what the user's code runs now, or
// takes that back.
func (m *model) markToday() tea.Cmd {
	t := m.trial(m.trials.picked)
	if t == nil {
		return nil
	}
	if t.History.Today {
		return act("no trial is marked as today's", func() { m.s.MarkToday(0) })
	}
	return act(fmt.Sprintf("trial %s is marked as what your code runs today", trace.Tag(t.ID)), func() { m.s.MarkToday(t.ID) })
}
