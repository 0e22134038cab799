package tui

import (
	"errors"
	"os"
	"os/signal"
	"syscall"
	"time"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/x/term"

	"dwindle/engine"
	_ "dwindle/tui/quiet" // before bubbletea is initialised
)

// SampleInfo is one built-in sample as the chooser shows it.
type SampleInfo struct {
	Name  string // opens as sample:Name
	Title string // a few words
	Shows string // what is to be seen on it, one sentence
}

// Config is what Run needs.
type Config struct {
	Session *engine.Session // nil: the chooser of samples opens first
	Samples []SampleInfo
	Open    func(source string) *engine.Session            // for the chooser; source is a file or sample:NAME[:ARGS]
	Write   func(*engine.Session) (path string, err error) // writes the report
	Record  func(*engine.Session) (path string, err error) // records the session to a file from now on
	// SaveOnExit is called once after every ending, signals and panics included.
	// What it returns tells the result, when the terminal is as it was before.
	SaveOnExit func(*engine.Session) (tell func())
	In         *os.File // nil: os.Stdin
	Out        *os.File // nil: os.Stdout
	Glyphs     string   // dot, line, ascii; empty: by locale
	Rate       float64  // snapshots a second; 0: 4, or 2 over ssh

	gate     *gate
	openNow  func(source string) session
	writeNow func(session) (string, error)
	saveNow  func(session) (tell func())
	keepNow  func(session) (string, error)
}

// ErrInterrupted is returned when ctrl+c or a signal ended the interface.
var ErrInterrupted = errors.New("interrupted")

// ErrNoTerminal is returned when the output is no terminal.
var ErrNoTerminal = errors.New("standard output is not a terminal; \"dwindle run\" works without one")

// lastWords is how long a slow terminal may take for what restores it.
const lastWords = 3 * time.Second

// Run shows the interface until the user leaves it. It returns ErrInterrupted
// after ctrl+c or a signal, and bubbletea's ErrProgramPanic after a panic; the
// terminal is restored in every case.
func Run(cfg Config) error {
	var s session
	if cfg.Session != nil {
		s = cfg.Session
	}
	if open := cfg.Open; open != nil {
		cfg.openNow = func(source string) session { return open(source) }
	}
	if write := cfg.Write; write != nil {
		cfg.writeNow = func(s session) (string, error) { return write(s.(*engine.Session)) }
	}
	if record := cfg.Record; record != nil {
		cfg.keepNow = func(s session) (string, error) { return record(s.(*engine.Session)) }
	}
	if save := cfg.SaveOnExit; save != nil {
		cfg.saveNow = func(s session) func() { return save(s.(*engine.Session)) }
	}
	return run(cfg, s)
}

// run is Run on anything that behaves like a session.
func run(cfg Config, s session) error {
	m, p, err := assemble(cfg, s)
	if err != nil {
		return err
	}
	return conduct(m, p)
}

// assemble makes the model and the program around it.
func assemble(cfg Config, s session) (*model, *tea.Program, error) {
	if cfg.In == nil {
		cfg.In = os.Stdin
	}
	if cfg.Out == nil {
		cfg.Out = os.Stdout
	}
	if !term.IsTerminal(cfg.Out.Fd()) {
		return nil, nil, ErrNoTerminal
	}
	cfg.gate = newGate(cfg.Out)
	m := newModel(cfg, s)
	m.on = brush(coloured(cfg.Out))
	m.busy, m.wanted = cfg.gate.busy, cfg.gate.want
	options := []tea.ProgramOption{tea.WithAltScreen(), tea.WithOutput(cfg.gate), tea.WithFPS(30), tea.WithoutSignalHandler()}
	if cfg.In != os.Stdin { // left alone, bubbletea opens the terminal itself when stdin is a file
		options = append(options, tea.WithInput(cfg.In))
	}
	p := tea.NewProgram(guarded{m}, options...)
	cfg.gate.idle = func() { p.Send(drained{}) }
	return m, p, nil
}

// conduct runs the program to its end, whatever ends it, and saves what there
// is.
func conduct(m *model, p *tea.Program) error {
	caught := make(chan os.Signal, 4)
	signal.Notify(caught, syscall.SIGINT, syscall.SIGTERM, syscall.SIGHUP)
	defer signal.Stop(caught)
	ended := make(chan struct{})
	go quitOn(caught, ended, p)

	_, err := p.Run()
	close(ended)
	tell := func() {}
	if m.cfg.saveNow != nil && m.s != nil {
		tell = m.cfg.saveNow(m.s)
	}
	m.cfg.gate.Write([]byte("\r\x1b[K")) // a terminal without a second screen still shows the last line
	m.cfg.gate.drain(lastWords)
	tell()
	if err == nil && m.interrupted {
		return ErrInterrupted
	}
	return err
}

// interrupting asks the model to end as ctrl+c does.
type interrupting struct{}

// quitOn ends the program on a signal.
func quitOn(caught <-chan os.Signal, ended <-chan struct{}, p *tea.Program) {
	for {
		select {
		case <-ended:
			return
		case <-caught:
			p.Send(interrupting{})
		}
	}
}

// rateOf is the refresh rate in Hz: as asked for, else 4, or 2 over ssh.
func rateOf(asked float64) float64 {
	if asked > 0 {
		return min(max(asked, slowest), fastest)
	}
	if os.Getenv("SSH_CONNECTION") != "" || os.Getenv("SSH_TTY") != "" {
		return 2
	}
	return 4
}

// guarded is the model with the gate made patient before a panic unwinds, so
// that the terminal is restored before the trace is printed.
type guarded struct{ *model }

// Update passes on to the model.
func (g guarded) Update(msg tea.Msg) (tea.Model, tea.Cmd) {
	defer g.calm()
	_, cmd := g.model.Update(msg)
	return g, cmd
}

// View passes on to the model.
func (g guarded) View() string {
	defer g.calm()
	return g.model.View()
}

// calm makes the gate patient when a panic passes through.
func (g guarded) calm() {
	if r := recover(); r != nil {
		if g.cfg.gate != nil {
			g.cfg.gate.patient(true)
		}
		panic(r)
	}
}
