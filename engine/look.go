package engine

import (
	"math"
	"strings"
	"time"

	"dwindle/engine/choose"
	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/recording"
	"dwindle/engine/report"
	"dwindle/engine/trace"
)

// verdict is the last judgement, kept while nothing that matters has changed.
type verdict struct {
	key      verdictKey
	at       time.Duration
	findings []diagnose.Finding
	choice   choose.Choice
}

// verdictKey changes when a trial begins, ends, or has an event, and when the
// facts grow.
type verdictKey struct {
	facts                  *inspect.Facts
	trials, events, states int
	today                  string
}

// judgeAgain is how long a judgement stands while trials merely run on.
const judgeAgain = 2 * time.Second

// Snapshot returns what there is to see now.
func (s *Session) Snapshot() Snapshot {
	s.mu.Lock()
	defer s.mu.Unlock()
	return s.look()
}

// Trials returns the trials as they stand, without a judgement.
func (s *Session) Trials() []Trial {
	s.mu.Lock()
	defer s.mu.Unlock()
	return s.view().Trials
}

// look makes a snapshot; s.mu is held.
func (s *Session) look() Snapshot {
	v := s.view()
	if s.bench != nil || s.past != nil {
		s.judge(&v)
	}
	return v
}

// view is a snapshot without a judgement; s.mu is held.
func (s *Session) view() Snapshot {
	v := Snapshot{Phase: s.phase, Progress: s.progress, Err: s.err, Facts: s.facts, Waiting: s.waiting,
		Elapsed: s.elapsed(), Machine: thisMachine(s.opt.Threads, s.opt.Memory), Settings: s.settings(),
		Version: s.changes}
	v.System = report.System{Name: s.sys.Name, RHS: string(s.sys.RHS), Digits: s.sys.Digits, Fingerprint: s.print}
	if s.sys.A != nil {
		v.System.Unknowns = s.sys.N()
		if m := s.sys.Matrix(); m != nil {
			v.System.Entries = m.Entries()
		}
	}
	s.viewPast(&v)
	if s.bench == nil {
		return v
	}
	v.Version += s.bench.Version()
	ended := true
	for _, t := range s.bench.Trials() {
		h := t.History()
		if h.Stop == trace.SettingUp {
			v.Progress = t.Progress()
		}
		ended = ended && h.Stop.Ended()
		v.Trials = append(v.Trials, Trial{ID: t.ID, History: h})
	}
	if v.Phase == Running && ended && !s.bench.Steered() {
		v.Phase = Ended
	}
	return v
}

// judge diagnoses and chooses, anew only where something has changed.
func (s *Session) judge(v *Snapshot) {
	key := verdictKey{facts: s.facts, trials: len(v.Trials)}
	histories := make([]trace.History, len(v.Trials))
	for i, t := range v.Trials {
		histories[i] = t.History
		key.events += len(t.History.Events)
		key.states = key.states*17 + int(t.History.Stop)
		if t.History.Today {
			key.today = t.History.Pairing
		}
	}
	now := s.clock()
	if key != s.judged.key || now-s.judged.at > judgeAgain && v.Phase == Running {
		c := diagnose.Case{Facts: s.facts, Trials: histories, Tol: s.opt.Tol, StopBy: s.opt.StopRule, Race: s.racing()}
		f := diagnose.Judge(c)
		choice := s.rank(histories, f)
		if c.Chosen, c.Gain = choice.Pairing, choice.Gain; c.Chosen != "" {
			f = diagnose.Judge(c) // what is found goes by what is recommended
		}
		s.judged = verdict{key: key, at: now, findings: f, choice: choice}
	}
	v.Findings, v.Choice = s.judged.findings, s.judged.choice
}

// rank makes the choice, with its settings and what was ruled out.
func (s *Session) rank(histories []trace.History, f []diagnose.Finding) choose.Choice {
	c := choose.Rank(s.facts, histories, f, s.opt.Goal, s.mostIterations())
	if c.Pairing != "" {
		c.Settings = s.settingsOf(c.Pairing)
	}
	c.RuledOut = s.ruled
	return c
}

// elapsed is the time since the session was opened, suspensions left out;
// s.mu is held.
func (s *Session) elapsed() time.Duration {
	d := s.clock() - s.openAt - s.suspended
	if s.haltedAt >= 0 {
		d -= s.clock() - s.haltedAt
	}
	return d
}

func (s *Session) settings() report.Settings {
	return report.Settings{Tol: s.opt.Tol, StopRule: s.opt.StopRule, Iterations: s.opt.Iterations,
		Seconds: s.opt.Seconds, Seed: madeStart, FieldTols: strings.Join(s.opt.FieldTols, ", ")}
}

func (s *Session) document() report.Document {
	s.mu.Lock()
	defer s.mu.Unlock()
	v := s.look()
	d := report.Document{Version: s.opt.Version, Command: s.opt.Command, Machine: v.Machine, Settings: v.Settings,
		System: v.System, Facts: v.Facts, Toolchain: toolchain(), Findings: v.Findings, Choice: v.Choice, Elapsed: v.Elapsed,
		Recorded: v.Unchanged()}
	for _, t := range v.Trials {
		d.Trials = append(d.Trials, t.History)
	}
	if a := s.answer(v.Choice.Pairing); a != nil {
		d.Solution = a.X
	}
	if s.opt.Vectors {
		d.Vectors = vectors(s.sys, d)
	}
	return d
}

// answer is the solution of the chosen trial, else of the ended one with the
// smallest true residual, else what a session file holds; s.mu is held.
func (s *Session) answer(chosen string) *recording.Answer {
	var best *recording.Answer
	least := math.Inf(1)
	if s.past != nil && s.past.Answer != nil {
		best, least = s.past.Answer, s.past.Residual(s.past.Answer.Pairing)
	}
	if s.bench == nil || best != nil && best.Pairing == chosen {
		return best
	}
	for _, t := range s.bench.Trials() {
		h := t.History()
		x := t.Answer()
		if x == nil {
			continue
		}
		if h.Pairing == chosen {
			return &recording.Answer{Pairing: chosen, X: x}
		}
		if h.TrueResidual < least {
			best, least = &recording.Answer{Pairing: h.Pairing, X: x}, h.TrueResidual
		}
	}
	return best
}
