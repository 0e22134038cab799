package choose

import (
	"slices"
	"time"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// Race is a race as it stands: what Next decides from.
type Race struct {
	Facts      *inspect.Facts
	Candidates []Candidate
	Trials     []trace.History
	Tried      map[string]bool // pairings that were ever started, and those the caller could not start
	Today      string          // the pairing the user's code runs now; it is never ended
	Offers     []string        // what findings about the system offer to try, runnable here
	Beyond     string          // what is offered where no double holds the tolerance, tried whatever the limits; empty: nothing
	Goal       string          // Seconds, Memory or Robust
	Limit      int             // iterations a trial may take
	Left       time.Duration   // of the run; 0: no limit

	// Where Trials hold what they are compared by: their own times by the clock,
	// and what the machine gave of it.
	clock map[string]time.Duration
	given float64
}

// Orders are what a race asks for next. It is over when nothing is to be
// added and no trial is live.
type Orders struct {
	Add []string // pairings, to be started in this order
	End []End    // trials that have lost
	// Setup is how much own time a set-up may take from now on.
	Setup time.Duration
}

// End is a trial that has lost, and why.
type End struct {
	Trial  int // its place in Race.Trials
	Reason string
}

const (
	width      = 3                      // trials that run at once when a first one has converged
	mostInAll  = 56                     // trials of a race
	brief      = 10 * time.Millisecond  // a best below this is not worth a long race:
	mostBrief  = 16                     // so many trials then,
	long       = 100 * time.Millisecond // and in proportion more up to this
	enough     = 60.0                   // own time of all trials over the best's time, from which nothing is added
	atLeast    = 3 * time.Second        // but so much is always spent
	firstPace  = 500 * time.Millisecond // own time of the slowest live trial from which help is added where nothing converges
	pace       = 1.5                    // by which it grows with each trial added
	someSteps  = 20                     // no help is added before every live trial has taken so many steps
	tooLong    = 20                     // or so many times the pace
	setupTimes = 4.0                    // a set-up may take so many times the best's time
	setupShare = 0.25                   // but beyond it no more of what is left of the run,
	setupLow   = 200 * time.Millisecond // and at least this
	repeats    = 4                      // runs of the best's time that a race leaves time for
	setupLong  = time.Second            // where nothing has converged, it may take this,
	setupEntry = 20 * time.Microsecond  // or this an entry of A, or as much as all trials have taken
)

// Next decides which trials have lost and which pairings to start, from how
// the trials stand now.
func (r Race) Next() Orders {
	r = r.compared()
	best, found := r.best()
	o := Orders{End: r.lost(best, found)}
	live := 0
	for _, h := range r.Trials {
		if !h.Stop.Ended() && h.Stop != trace.Held {
			live++
		}
	}
	live -= len(o.End)
	o.Setup = max(setupLong, r.spent(), setupEntry*time.Duration(r.Facts.Entries))
	if found {
		o.Setup = r.setupRoom(best.OwnTime)
	}
	o.Setup = time.Duration(float64(o.Setup) / r.given) // it is held against the clock
	o.Add = r.add(live, best, found)
	return o
}

// setupRoom is the time that a set-up may take where the best took so much: a
// few times that, for it may pay for many right-hand sides, but beyond the best's
// own no more than a share of the time that is left.
func (r Race) setupRoom(best time.Duration) time.Duration {
	room := time.Duration(setupTimes * float64(best))
	if r.Left > 0 {
		room = min(room, max(best, time.Duration(setupShare*r.given*float64(r.Left))))
	}
	return max(setupLow, room)
}

// compared is the race with the times of its trials replaced by what they are
// compared by.
func (r Race) compared() Race {
	r.clock, r.given, r.Trials = map[string]time.Duration{}, r.share(), slices.Clone(r.Trials)
	for i, c := range costs(r.Trials) {
		h := &r.Trials[i]
		r.clock[h.Pairing] = h.OwnTime
		h.SetupTime, h.OwnTime = seconds(c.setup), seconds(c.own)
	}
	return r
}

func seconds(s float64) time.Duration { return time.Duration(s * float64(time.Second)) }

// share is the CPU time over the own time of all trials so far; 1 where it was
// not measured.
func (r Race) share() float64 {
	cpu, own := time.Duration(0), time.Duration(0)
	for _, h := range r.Trials {
		if h.OwnCPU > 0 {
			cpu, own = cpu+h.OwnCPU, own+h.OwnTime
		}
	}
	if cpu <= 0 || own <= 0 {
		return 1
	}
	return float64(cpu) / float64(own)
}

// add returns what to start beside so many live trials.
func (r Race) add(live int, best *trace.History, found bool) []string {
	var first []string
	for _, p := range r.First() {
		if !r.Tried[p] {
			first = append(first, p)
		}
	}
	if len(first) > 0 {
		return first
	}
	if r.Beyond != "" && !r.Tried[r.Beyond] {
		return []string{r.Beyond}
	}
	room := width - live
	switch {
	case len(r.Trials) >= mostInAll || found && len(r.Trials) >= worthTrying(best.OwnTime):
		return nil
	case found && !r.timeFor(live, best):
		return nil
	case found && r.spent() > max(atLeast, time.Duration(enough*float64(best.OwnTime))):
		return nil
	case !found && live > 0:
		room = 0
		if d := r.patience(); r.slowest() >= d && r.underWay(d) {
			room = 1
		}
	}
	if room <= 0 {
		return nil
	}
	return r.untried(room)
}

// timeFor says that the time left is enough for one more trial beside so many
// live ones, each up to where it has lost, and for running the best again
// afterwards, which tells more than a trial that is cut by time.
func (r Race) timeFor(live int, best *trace.History) bool {
	need := (margin*float64(live+1) + repeats) * best.OwnTime.Seconds()
	return r.Left <= 0 || r.Left.Seconds()*r.given >= need
}

// worthTrying is how many trials a race is worth with a best like this.
func worthTrying(best time.Duration) int {
	way := float64(best-brief) / float64(long-brief)
	return mostBrief + int((mostInAll-mostBrief)*min(1, max(0, way)))
}

// best is the trial that reached the target in the least own time with x in one
// double, or went as far as double precision goes where none did.
func (r Race) best() (*trace.History, bool) {
	var best *trace.History
	for i := range r.Trials {
		h := &r.Trials[i]
		if inDouble(*h) && (best == nil || better(h, best)) {
			best = h
		}
	}
	if u, ok := diagnose.Utmost(r.Facts, r.Trials); ok && best == nil {
		best = &u // nothing can get further
	}
	return best, best != nil
}

// better says that h is a better end of a race than g: no row is left unsolved
// where g leaves some, else it took less.
func better(h, g *trace.History) bool {
	if (h.UnsolvedRows > 0) != (g.UnsolvedRows > 0) {
		return g.UnsolvedRows > 0
	}
	return h.OwnTime < g.OwnTime
}

// spent is the own time of all trials.
func (r Race) spent() time.Duration {
	total := time.Duration(0)
	for _, h := range r.Trials {
		total += h.OwnTime
	}
	return total
}

// slowest is the least own time of a live trial.
func (r Race) slowest() time.Duration {
	least := time.Duration(-1)
	for _, h := range r.Trials {
		if !h.Stop.Ended() && h.Stop != trace.Held && (least < 0 || h.OwnTime < least) {
			least = h.OwnTime
		}
	}
	return least
}

// underWay says that every live trial has taken enough steps to show what it
// can do, or has taken too long over fewer.
func (r Race) underWay(patience time.Duration) bool {
	for _, h := range r.Trials {
		if !h.Stop.Ended() && h.Stop != trace.Held && h.Iterations < someSteps && h.OwnTime < tooLong*patience {
			return false
		}
	}
	return true
}

// patience is the own time that every live trial must have had before help is
// added where nothing has converged: longer with each that was.
func (r Race) patience() time.Duration {
	d := float64(firstPace)
	for range len(r.Trials) - len(r.First()) {
		d *= pace
	}
	return time.Duration(d)
}

// cheapDirect is the time of a factorisation, by the count of its work, up to
// which a race begins with it.
const cheapDirect = 300 * time.Millisecond

// First are the pairings that a race begins with: cheap ones of different
// kinds, a direct solve only where it is known to be cheap.
func (r Race) First() []string {
	costly := map[string]bool{}
	for _, c := range r.Candidates {
		costly[c.Pairing] = c.Direct && (c.Memory < 0 || factorTime(c.Memory, r.Facts.N) > cheapDirect)
	}
	return slices.DeleteFunc(LineUp(r.Facts, r.Candidates, r.Today), func(p string) bool { return costly[p] })
}

// factorTime guesses the time of a factorisation from the memory of its
// factor: 12 bytes an entry, columns of even length, a nanosecond a product.
func factorTime(bytes int64, n int) time.Duration {
	entries := float64(bytes) / 12
	return time.Duration(entries * entries / float64(max(1, n)))
}
