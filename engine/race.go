package engine

import (
	"time"

	"dwindle/engine/choose"
	"dwindle/engine/diagnose"
	"dwindle/engine/run"
	"dwindle/engine/trace"
)

// racing says that dwindle makes the line-up itself: a race.
func (s *Session) racing() bool { return len(s.opt.Pairs) == 0 }

// race is how a race stands between two looks.
type race struct {
	list   []choose.Candidate
	tried  map[string]bool
	offers []string
}

// newRace begins a race; the candidates carry what they take.
func (s *Session) newRace(b *run.Bench) *race {
	return &race{list: candidates(b.Have(), s.opt.Memory), tried: map[string]bool{}, offers: s.offers(b.Have())}
}

// offers are the pairings that findings about the system, made before any
// trial, offer to try, as far as they can run here.
func (s *Session) offers(h run.Have) []string {
	var out []string
	for _, f := range diagnose.Judge(diagnose.Case{Facts: s.facts, Tol: s.opt.Tol, StopBy: s.opt.StopRule, Race: true}) {
		for _, p := range f.Try {
			if m, err := run.Parse(p); err == nil && f.Subject == diagnose.OnSystem && m.Refuse(h) == "" {
				out = append(out, m.Name)
			}
		}
	}
	return out
}

// stands is the race as the policy sees it.
func (s *Session) stands(r *race, trials []trace.History) choose.Race {
	return choose.Race{Facts: s.facts, Candidates: r.list, Trials: trials, Tried: r.tried, Offers: r.offers,
		Beyond: diagnose.Offered(diagnose.Case{Facts: s.facts, Trials: trials, Tol: s.opt.Tol}), Today: canonical(s.opt.Today), Goal: s.opt.Goal, Limit: s.limits().Iterations, Left: s.left()}
}

// left is the time that is left of the run, 0 where it has no limit.
func (s *Session) left() time.Duration {
	if s.opt.Seconds <= 0 {
		return 0
	}
	s.mu.Lock()
	defer s.mu.Unlock()
	return max(time.Millisecond, time.Duration(s.opt.Seconds*1e9)-s.elapsed())
}

// canonical is the pairing as the catalogues print it.
func canonical(pairing string) string {
	if m, err := run.Parse(pairing); err == nil {
		return m.Name
	}
	return pairing
}

// lead moves the race on: it asks the policy, ends what has lost and starts
// what comes next. It says whether anything is left to come. The bench asks
// it between rounds.
func (s *Session) lead(b *run.Bench, r *race) bool {
	trials := b.Trials()
	histories := make([]trace.History, len(trials))
	for i, t := range trials {
		histories[i] = t.History()
		r.tried[histories[i].Pairing] = true
	}
	orders := s.stands(r, histories).Next()
	for _, e := range orders.End {
		b.Retire(trials[e.Trial], e.Reason)
	}
	for _, p := range orders.Add {
		r.tried[p] = true
		if m, err := run.Parse(p); err == nil && (m.Name == p || !r.tried[m.Name]) {
			r.tried[m.Name] = true
			b.Add(m)
		}
	}
	for _, t := range b.Trials() {
		if h := t.History(); h.Stop == trace.Waiting && !h.Today && !h.TwoDoubles {
			b.Bound(t, orders.Setup)
		}
	}
	return len(orders.Add) > 0 || b.Live()
}

// steer lets the session move the trials on between rounds: the race, where
// there is one, and when all have ended the measurement of what was chosen on
// other right-hand sides, the repetitions of trials whose times were close, and
// the reruns that tell how far rounding moves a count.
func (s *Session) steer(b *run.Bench) {
	if s.race == nil && s.columns == nil && s.rerunBudget() <= 0 {
		return
	}
	b.Steer(func() bool {
		switch {
		case s.race != nil && s.lead(b, s.race) || b.Live():
			return true
		case s.columns != nil && s.measureColumns(b, s.columns):
			return true
		}
		if s.race != nil {
			s.repeat(b)
		}
		s.rerun(b)
		return false
	})
}
