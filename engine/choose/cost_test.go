package choose

import (
	"math"
	"slices"
	"strings"
	"testing"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// made is a trial whose own time is that of making M, of a start and of steps.
func made(pairing string, build, start, steps time.Duration) trace.History {
	h := trial(pairing, trace.Converged, build+start, build+start+steps)
	h.BuildTime = build
	return h
}

func about(a, b float64) bool { return math.Abs(a-b) < 1e-9 }

// The first trial with a preconditioner pays for cold pages and caches: by the
// clock of each alone the wrong one would be ahead.
func TestSetUpIsSharedByThoseWithTheSameM(t *testing.T) {
	const ms = time.Millisecond
	trials := []trace.History{
		made("cg+amg", 600*ms, 10*ms, 500*ms),
		made("gmres:30+amg", 300*ms, 20*ms, 520*ms),
		made("minres+amg", 320*ms, 10*ms, 600*ms),
		made("scale/cg+amg", 900*ms, 10*ms, 500*ms), // another A, another M
		made("cg+none", ms, 10*ms, 2*second),
	}
	c := Rank(facts(inspect.Yes, inspect.Yes), trials, nil, "", 0)
	if c.Pairing != "cg+amg" || !about(c.Ranked[0].Setup, 0.33) || !about(c.Ranked[0].Seconds, 0.83) || c.Ranked[0].Setups != 3 {
		t.Errorf("chose %s: %+v", c.Pairing, c.Ranked[0])
	}
	if !strings.Contains(c.Reasons[0], "(set-up: median of 3 with this preconditioner)") {
		t.Errorf("reasons %q", c.Reasons)
	}
	for _, r := range c.Ranked {
		if r.Pairing == "scale/cg+amg" && (!about(r.Seconds, 1.41) || r.Setups != 1) {
			t.Errorf("another M shares the set-up: %+v", r)
		}
	}
	if h := trials[0]; h.SetupTime != 610*ms || h.OwnTime != 1110*ms {
		t.Errorf("what was measured has changed: %v, %v", h.SetupTime, h.OwnTime)
	}
}

// A trial that is still making its M counts with the time it has used.
func TestUnfinishedSetUpCountsAsItIs(t *testing.T) {
	h := running("gmres:30+amg", 0, 700*time.Millisecond)
	h.Stop = trace.SettingUp
	c := costs([]trace.History{made("cg+amg", 300*time.Millisecond, 0, second), h})
	if c[1].own != 0.7 || c[1].setups != 0 {
		t.Errorf("%+v", c[1])
	}
}

// On a busy machine CPU time counts, for all parts of a run or for none.
func TestBusyMachineCountsCPUTime(t *testing.T) {
	const ms = time.Millisecond
	busy := made("cg+ic:0", 40*ms, 0, 160*ms)
	busy.BuildCPU, busy.SetupCPU, busy.OwnCPU, busy.CPUShare = 10*ms, 10*ms, 50*ms, 0.25
	quiet := made("cg+jacobi", 0, 10*ms, 90*ms)
	quiet.SetupCPU, quiet.OwnCPU, quiet.CPUShare = 9*ms, 95*ms, 0.95
	c := costs([]trace.History{busy, quiet})
	if c[0].own != 0.05 || c[0].setup != 0.01 || !c[0].cpu || c[1].own != 0.1 || c[1].setup != 0.01 || c[1].cpu {
		t.Errorf("%+v", c)
	}
	if all := strings.Join(Rank(facts(inspect.Yes, inspect.Yes), []trace.History{busy, quiet}, nil, "", 0).Doubts, "; "); !strings.Contains(all, "compared by CPU time") {
		t.Errorf("doubts %q", all)
	}
}

// What is run again next has the fewest runs of those near the best, the
// quickest first; a lucky run is no longer the best once it was repeated.
func TestWhatIsRunAgain(t *testing.T) {
	const ms = time.Millisecond
	own := []time.Duration{120 * ms, 100 * ms, 160 * ms, 50 * ms}
	again := []time.Duration{120 * ms, 150 * ms, 160 * ms}
	trials := []trace.History{trial("cr+none", trace.Converged, 0, own[0]), trial("cg+none", trace.Converged, 0, own[1]),
		trial("minres+none", trace.Converged, 0, own[2]), trial("gmres:30+none", trace.Outpaced, 0, own[3])}
	var order []int
	for range 20 {
		i := Again(trials)
		if i < 0 {
			break
		}
		order = append(order, i)
		trials[i].Reruns = append(trials[i].Reruns, trace.Run{Own: again[i]})
	}
	// 160 ms are more than 1.5 times 100 ms, not 120 ms; the lucky one's
	// lower median is 100 ms until it has run three times.
	if want := []int{1, 0, 1, 2, 0, 2}; !slices.Equal(order, want) {
		t.Errorf("run again in the order %v, want %v", order, want)
	}
	if got := Again(trials[:1]); got != -1 {
		t.Errorf("one that nothing comes near is run again: %d", got)
	}
}

// No more than some are run again however many are near, and on a busy machine
// each more often.
func TestHowOftenIsRunAgain(t *testing.T) {
	const ms = time.Millisecond
	for _, c := range []struct {
		cpu  time.Duration
		want int
	}{{0, againMost * againTimes}, {40 * ms, againMost * againBusy}} {
		var trials []trace.History
		for range 2 * againMost {
			h := trial("cg+none", trace.Converged, 0, 100*ms)
			h.OwnCPU = c.cpu
			trials = append(trials, h)
		}
		n := 0
		for i := Again(trials); i >= 0; i = Again(trials) {
			trials[i].Reruns = append(trials[i].Reruns, trace.Run{Own: 100 * ms, OwnCPU: c.cpu})
			n++
		}
		if n != c.want {
			t.Errorf("%v of the processor: %d repetitions, want %d", c.cpu, n, c.want)
		}
	}
}

// The race is cut by the same costs as the choice is made by, and tells the
// times of the clock.
func TestRaceGoesByCosts(t *testing.T) {
	const ms = time.Millisecond
	winner := made("cg+ic", 500*ms, 0, 500*ms)
	unlucky := made("minres+ic", 900*ms, 0, 650*ms)
	unlucky.Stop = trace.Running
	first := made("cr+ic", 480*ms, 0, 600*ms)
	r := race(winner, first, unlucky)
	r.Trials[0].SetupTime, r.Trials[0].OwnTime = 500*ms, second
	if o := r.Next(); len(o.End) != 0 {
		t.Errorf("ended for the set-up that it shares: %+v", o.End)
	}
	r.Trials[2].OwnTime += 200 * ms
	o := r.Next()
	if len(o.End) != 1 || !strings.Contains(o.End[0].Reason, "has used 1.75 s") {
		t.Errorf("%+v", o.End)
	}
}

// On a busy machine, trials have more room and set-ups are held against the
// clock by what the machine gives.
func TestBusyMachineGivesRoom(t *testing.T) {
	busy := func(h trace.History) trace.History {
		h.OwnCPU, h.SetupCPU, h.CPUShare = h.OwnTime/2, h.SetupTime/2, 0.5
		return h
	}
	winner, late := busy(trial("cg+ic", trace.Converged, 0, 2*second)), busy(running("cg+none", 0, 2800*time.Millisecond))
	if o := race(winner, late).Next(); len(o.End) != 0 || o.Setup != 8*second {
		t.Errorf("%+v", o)
	}
	late = busy(running("cg+none", 0, 3*second))
	if o := race(winner, late).Next(); len(o.End) != 1 {
		t.Errorf("%+v", o)
	}
}

// A short race for a short best, and no step between short and long.
func TestHowManyTrialsAreWorthIt(t *testing.T) {
	const ms = time.Millisecond
	if a, b := worthTrying(ms), worthTrying(second); a != mostBrief || b != mostInAll {
		t.Errorf("%d and %d", a, b)
	}
	for d := ms; d < 200*ms; d += ms {
		if a, b := worthTrying(d), worthTrying(d+ms); b < a || b > a+1 {
			t.Errorf("%v: %d, a millisecond more: %d", d, a, b)
		}
	}
}
