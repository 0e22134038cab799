package tui

import (
	"time"

	"dwindle/engine"
)

// view is one screen, or what lies over it.
type view interface {
	draw(m *model, w, h int) []string // the body: at most h lines of at most w cells
	keys(m *model) []action           // its bindings
	entry() *prompt                   // the line being typed into, nil if none
}

// model is the state of the interface.
type model struct {
	cfg     Config
	s       session
	snap    engine.Snapshot
	looked  bool          // snap holds something
	elapsed time.Duration // of the last snapshot in which something moved
	follow  bool          // the trials screen comes up by itself

	w, h    int
	signs   glyphs
	on      brush
	chooser *chooser
	trials  *trialsView
	system  *systemView
	spectra *spectrumView
	finding *findingsView
	screen  view // one of the five
	over    view // what lies over it, nil if nothing

	question *question
	message  string
	saidAt   time.Time // when message came up

	rate    float64 // snapshots a second
	ticking int     // the id of the tick that counts
	esc     escapes
	now     func() time.Time
	busy    func() bool // the terminal has not taken the last frame yet
	wanted  func()      // a frame waits for it

	frame       string // the last one drawn
	stale       bool   // it no longer tells the truth
	interrupted bool
}

// newModel returns a model that has drawn nothing yet.
func newModel(cfg Config, s session) *model {
	m := &model{
		cfg: cfg, s: s, follow: true, stale: true,
		signs: glyphsNamed(cfg.Glyphs), rate: rateOf(cfg.Rate),
		trials: newTrials(), system: &systemView{}, spectra: &spectrumView{}, finding: &findingsView{},
		now:  time.Now,
		busy: func() bool { return false }, wanted: func() {},
	}
	m.screen = m.system
	if s == nil {
		m.chooser = newChooser(cfg.Samples)
		m.screen = m.chooser
	}
	return m
}

// top is the view that takes the keys.
func (m *model) top() view {
	if m.over != nil {
		return m.over
	}
	return m.screen
}

// show brings up a screen.
func (m *model) show(v view) { m.screen, m.over, m.stale = v, nil, true }

// attach lets the interface show a session opened from the chooser.
func (m *model) attach(s session) {
	m.s, m.looked, m.follow = s, false, true
	m.trials = newTrials()
	m.show(m.system)
	m.look()
}

// screens is the order in which tab walks.
func (m *model) screens() []view { return []view{m.trials, m.system, m.spectra, m.finding} }

// turn walks by step screens.
func (m *model) turn(step int) {
	all := m.screens()
	for i, v := range all {
		if v == m.screen {
			m.follow = false
			m.show(all[(i+step+len(all))%len(all)])
			return
		}
	}
}
