package tui

import (
	"time"

	tea "github.com/charmbracelet/bubbletea"
)

// ticked asks for the next snapshot. A tick of an older id is dropped, so
// that a changed rate or a resumed program never doubles it.
type ticked struct{ id int }

// drained says that the terminal has taken the frame it was busy with.
type drained struct{}

// escaped says that the time for the rest of an escape sequence is over.
type escaped struct{ id int }

// Init takes the first look and starts the tick.
func (m *model) Init() tea.Cmd {
	m.look()
	return m.nextTick()
}

// Update handles one message. Each kind has its own method.
func (m *model) Update(msg tea.Msg) (tea.Model, tea.Cmd) {
	switch msg := msg.(type) {
	case tea.KeyMsg:
		return m, m.onKey(msg)
	case ticked:
		return m, m.onTick(msg)
	case tea.WindowSizeMsg:
		m.w, m.h, m.stale = msg.Width, msg.Height, true
	case acted:
		m.onActed(msg)
	case offered:
		m.onOffered(msg)
	case escaped:
		return m, m.onEscaped(msg)
	case interrupting:
		return m, m.interrupt()
	case tea.ResumeMsg:
		return m, m.onResume()
	}
	return m, nil
}

// nextTick arms the one tick that counts.
func (m *model) nextTick() tea.Cmd {
	m.ticking++
	id := m.ticking
	return tea.Tick(time.Duration(float64(time.Second)/m.rate), func(time.Time) tea.Msg { return ticked{id} })
}

// onTick looks at the session, unless the terminal is still busy with what
// was seen before.
func (m *model) onTick(t ticked) tea.Cmd {
	if t.id != m.ticking {
		return nil
	}
	if !m.busy() {
		m.look()
	}
	if m.message != "" && m.now().Sub(m.saidAt) >= readable(m.message) {
		m.message, m.stale = "", true
	}
	return m.nextTick()
}

// onActed tells what a command came to.
func (m *model) onActed(a acted) {
	m.stale = true
	if a.err != nil {
		m.say("not done: " + a.err.Error())
		return
	}
	m.say(a.said)
	m.look()
	if a.pick > 0 {
		m.over = nil // the list or the form that asked for it
	}
	if a.pick > 0 && m.trial(a.pick) != nil {
		m.trials.picked = a.pick
		m.show(m.trials)
	}
}

// say puts a message into the bottom line until the next key, or until there
// was time to read it.
func (m *model) say(text string) { m.message, m.saidAt, m.stale = text, m.now(), true }

// readable is how long a message stays: the longer, the longer.
func readable(text string) time.Duration {
	return 4*time.Second + time.Duration(len(text))*50*time.Millisecond
}

// onResume lets the trials move again after a suspension.
func (m *model) onResume() tea.Cmd {
	m.stale = true
	if m.cfg.gate != nil {
		m.cfg.gate.patient(false)
	}
	if m.s == nil {
		return m.nextTick()
	}
	return tea.Batch(act("the trials go on", m.s.Continue), m.nextTick())
}

// View returns the frame: the last one while the terminal is busy with it or
// nothing has changed.
func (m *model) View() string {
	if m.w <= 0 || m.h <= 0 || !m.stale {
		return m.frame
	}
	if m.busy() {
		m.wanted()
		return m.frame
	}
	m.stale, m.frame = false, m.compose()
	return m.frame
}
