package engine

import (
	"fmt"
	"time"

	"dwindle/engine/choose"
	"dwindle/engine/inspect"
	"dwindle/engine/run"
)

// setBench makes the bench and the line-up, and starts it or says why not.
func (s *Session) setBench() *run.Bench {
	s.set(func() { s.sys.Null, s.sys.LeftNull = inspect.ZeroDirections(s.facts), inspect.LeftDirections(s.facts) })
	b := run.NewBench(s.sys, s.limits(), s.opt.Memory, s.opt.Clock)
	lineup := s.opt.Pairs
	var r *race
	if s.racing() {
		r = s.newRace(b)
		lineup = s.stands(r, nil).First()
	}
	if s.opt.Today != "" {
		lineup = append([]string{s.opt.Today}, lineup...)
	}
	ruled := choose.RuledOut(s.facts, candidates(b.Have(), 0))
	s.set(func() { s.bench, s.lineup, s.race, s.ruled, s.phase = b, lineup, r, ruled, Ready })
	if s.opt.FactsOnly {
		s.set(func() { s.phase = Ended })
		return b
	}
	if s.opt.Interactive {
		if t := estimate(s.facts, len(lineup)); t > soonEnough {
			s.set(func() { s.waiting = fmt.Sprintf("about %.0f s of work estimated", t.Seconds()) })
			return b
		}
	}
	s.Start()
	return b
}

// soonEnough is the estimated work up to which a line-up starts by itself.
const soonEnough = 30 * time.Second

// estimate guesses the time of a line-up: a thousand iterations a pairing at
// four nanoseconds an entry and ten an unknown.
func estimate(f *inspect.Facts, pairings int) time.Duration {
	return time.Duration(pairings) * 1000 * time.Duration(4*f.Entries+10*f.N)
}

// mostIterations is how many iterations a trial may take.
func (s *Session) mostIterations() int {
	if s.opt.Iterations > 0 {
		return s.opt.Iterations
	}
	return min(10*s.facts.N, 100_000)
}

func (s *Session) limits() run.Limits {
	l := run.Limits{Target: run.Target{Rule: run.StopRule(s.opt.StopRule), Tol: s.opt.Tol},
		Iterations: s.mostIterations(), Seconds: s.opt.TrialSeconds, Delta: s.sys.Delta(), Vectors: s.opt.Vectors}
	l.FieldTol, _ = fieldTols(s.sys, s.opt) // checked when the system was completed
	if f := s.facts; f.Symmetric.Answer == inspect.Yes && f.Symmetric.Certainty == inspect.Proved && f.Gershgorin.Min > 0 {
		l.Smallest = f.Gershgorin.Min * (1 - 1e-12) // what summing a row rounds away is less
	}
	l.NoNorm = s.facts.Symmetric.Answer == inspect.No ||
		s.facts.PositiveDefinite.Answer == inspect.No && s.facts.Semidefinite.Answer != inspect.Yes
	if u := s.facts.Unreachable; u.Answer == inspect.Yes {
		l.Unreachable = u.Value
	}
	return l
}
