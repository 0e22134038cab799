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

// running is a live trial.
func running(pairing string, setup, own time.Duration) trace.History {
	h := trial(pairing, trace.Running, setup, own)
	h.TrueResidual = 1e-3
	return h
}

func tried(trials []trace.History) map[string]bool {
	m := map[string]bool{}
	for _, h := range trials {
		m[h.Pairing] = true
	}
	return m
}

func race(trials ...trace.History) Race {
	r := Race{Facts: facts(inspect.Yes, inspect.Yes), Candidates: list(), Trials: trials, Tried: tried(trials), Limit: 1000}
	for _, p := range r.First() {
		r.Tried[p] = true
	}
	return r
}

const second = time.Second

func TestRaceBeginsWithTheLineUp(t *testing.T) {
	r := race()
	r.Tried = nil
	if got, want := r.Next().Add, LineUp(r.Facts, r.Candidates, ""); !slices.Equal(got, want) || len(got) == 0 {
		t.Errorf("a race begins with %v, the line-up is %v", got, want)
	}
}

func TestNothingIsEndedBeforeAnythingConverged(t *testing.T) {
	r := race(running("cg+none", 0, 100*second), running("cg+jacobi", 0, second))
	if o := r.Next(); len(o.End) > 0 || o.Setup < 100*second {
		t.Errorf("orders %+v", o)
	}
}

func TestWhoHasLost(t *testing.T) {
	winner := trial("cg+ic", trace.Converged, second, 3*second)
	for _, c := range []struct {
		what string
		h    trace.History
		lost bool
	}{
		{"well behind", running("cg+none", 0, 4*second), true},
		{"within the margin", running("cg+none", 0, 3500*time.Millisecond), false},
		{"slow set-up, quick solve: it may win for many right-hand sides", running("cg+ssor", 5*second, 6*second), false},
		{"slow set-up, slow solve", running("cg+ssor", 5*second, 8*second), true},
	} {
		o := race(winner, c.h).Next()
		if got := len(o.End) == 1 && o.End[0].Trial == 1; got != c.lost {
			t.Errorf("%s: ended %v, want %v (%+v)", c.what, got, c.lost, o.End)
		}
		if c.lost && !strings.Contains(o.End[0].Reason, "cg+ic has the answer") {
			t.Errorf("%s: reason %q", c.what, o.End[0].Reason)
		}
	}
}

// A trial that is cut is told by its true residual, and only what its curve
// has shown is foreseen.
func TestWhatIsToldOfWhoIsCut(t *testing.T) {
	winner := trial("cg+ic", trace.Converged, second, 3*second)
	for _, c := range []struct {
		told   []trace.Prediction
		want   string
		unwant string
	}{
		{nil, "has not begun to fall", "to go"},
		{[]trace.Prediction{{Iter: 50, Total: 140, Low: 120, High: 180}}, "about 40 more iterations to go", "will not"},
		{[]trace.Prediction{{Iter: 50, Total: 5e15, Low: 4e15, High: 6e15}}, "will not get there", "to go"},
		{[]trace.Prediction{{Iter: 50, Total: math.Inf(1)}}, "will not get there", "to go"},
	} {
		h := running("lsmr+none", 0, 4*second)
		h.Iterations, h.Residual, h.TrueResidual, h.Predictions = 100, 1.4e-6, 0.35, c.told
		o := race(winner, h).Next()
		if len(o.End) != 1 || !strings.Contains(o.End[0].Reason, "last measured at 0.35") ||
			!strings.Contains(o.End[0].Reason, c.want) || strings.Contains(o.End[0].Reason, c.unwant) {
			t.Errorf("told %v: %+v", c.told, o.End)
		}
	}
}

func TestTodayIsNeverEnded(t *testing.T) {
	today := running("cg+none", 0, 100*second)
	today.Today = true
	r := race(trial("cg+ic", trace.Converged, 0, second), today)
	r.Today = "cg+none"
	if o := r.Next(); len(o.End) > 0 {
		t.Errorf("ended: %+v", o.End)
	}
}

// A restarted method that needs far more iterations than it may take is
// hopeless, unless its predictions fall; other methods are let go on.
func TestOnlyTheHopelessAreEndedEarly(t *testing.T) {
	hopeless := running("gmres+none", 0, second)
	hopeless.Restarted = true
	for i := range 6 {
		hopeless.Predictions = append(hopeless.Predictions, trace.Prediction{Iter: 100 + 10*i, Total: 1e6, Low: 9e5, High: 2e6})
	}
	gaining := hopeless
	gaining.Predictions = slices.Clone(hopeless.Predictions)
	for i := range gaining.Predictions {
		gaining.Predictions[i].Total /= float64(int(1) << i)
	}
	free := hopeless
	free.Restarted = false
	other := running("cg+none", 0, second)
	for i, c := range []struct {
		h    trace.History
		lost bool
	}{{hopeless, true}, {gaining, false}, {free, false}} {
		if got := len(race(other, c.h).Next().End) == 1; got != c.lost {
			t.Errorf("case %d: ended %v, want %v", i, got, c.lost)
		}
	}
	if o := race(hopeless).Next(); len(o.End) > 0 {
		t.Error("the last live trial was ended")
	}
}

func TestSetUpsAreBoundedOnceSomethingConverged(t *testing.T) {
	if o := race(trial("cg+ic", trace.Converged, 0, second)).Next(); o.Setup != 4*second {
		t.Errorf("a set-up may take %v, want four times the best", o.Setup)
	}
}

// Kinds of preconditioners come first, then solvers with the leader, then its
// parameters; nothing twice; and it ends.
func TestWavesFollowEachOtherAndEnd(t *testing.T) {
	r := race(trial("cg+none", trace.Converged, 0, 4*second), trial("cg+ic:0", trace.Converged, 0, second))
	for i := range r.Candidates {
		if r.Candidates[i].Precond == "ic" {
			r.Candidates[i].Pairing += ":0"
		}
	}
	seen := map[string]bool{}
	var order []string
	for range 100 {
		o := r.Next()
		if len(o.Add) == 0 {
			break
		}
		for _, p := range o.Add {
			if seen[p] {
				t.Fatalf("%s twice", p)
			}
			seen[p], r.Tried[p] = true, true
			order = append(order, p)
			r.Trials = append(r.Trials, trial(p, trace.Converged, 0, 3*second))
		}
	}
	at := func(p string) int { return slices.Index(order, p) }
	if at("cg+ilu") >= 0 || at("minres+ic:0") < 0 || at("cg+ic:1") < at("minres+ic:0") || at("rcm/cg+ic:0") < at("cg+ic:1") {
		t.Errorf("order %v", order)
	}
	if o := r.Next(); len(o.Add) > 0 {
		t.Errorf("it does not end: %v", o.Add)
	}
}

// Where nothing converges, help is added, and later each time.
func TestHelpIsAddedWhereNothingConverges(t *testing.T) {
	r := race()
	for _, p := range r.First() {
		h := running(p, 0, 100*time.Millisecond)
		h.Iterations = 100
		r.Trials = append(r.Trials, h)
	}
	if o := r.Next(); len(o.Add) != 0 {
		t.Errorf("%v added after 0.1 s", o.Add)
	}
	for i := range r.Trials {
		r.Trials[i].OwnTime = 600 * time.Millisecond
	}
	r.Trials[0].Iterations = 2
	if o := r.Next(); len(o.Add) != 0 {
		t.Errorf("%v added although %s has hardly begun", o.Add, r.Trials[0].Pairing)
	}
	r.Trials[0].Iterations = 100
	o := r.Next()
	if len(o.Add) != 1 {
		t.Fatalf("%v added after 0.6 s, want one", o.Add)
	}
	r.Trials = append(r.Trials, running(o.Add[0], 0, 600*time.Millisecond))
	r.Tried[o.Add[0]] = true
	if o := r.Next(); len(o.Add) != 0 {
		t.Errorf("%v added at once after another", o.Add)
	}
}

func TestCostlyFactorisationsWait(t *testing.T) {
	r := race()
	direct := Candidate{Pairing: "richardson+cholesky", Solver: "richardson", Precond: "cholesky", Direct: true, Memory: 1 << 40}
	r.Candidates = append(r.Candidates, direct)
	r.Facts.N = 50_000
	if slices.Contains(r.First(), direct.Pairing) {
		t.Error("a race begins with a factorisation of a terabyte")
	}
	r.Candidates[len(r.Candidates)-1].Memory = 1 << 20
	if !slices.Contains(r.First(), direct.Pairing) {
		t.Error("a cheap factorisation is left out")
	}
}

// In what time is left, a trial that cannot make it gives way to one that can.
func TestTooLate(t *testing.T) {
	slow := running("cg+none", 0, 10*second)
	slow.Iterations = 100
	quick := running("cg+jacobi", 0, 10*second)
	quick.Iterations = 100
	for i := range 5 {
		slow.Predictions = append(slow.Predictions, trace.Prediction{Iter: 80 + 5*i, Total: 1000, Low: 500, High: 2000})
		quick.Predictions = append(quick.Predictions, trace.Prediction{Iter: 80 + 5*i, Total: 150, Low: 130, High: 200})
	}
	r := race(slow, quick)
	r.Left = 20 * second
	if o := r.Next(); len(o.End) != 1 || o.End[0].Trial != 0 || !strings.Contains(o.End[0].Reason, "needs at least 40.0 s more, 20.0 s are left") {
		t.Errorf("ended %+v", o.End)
	}
	r.Left = 50 * second
	if o := r.Next(); len(o.End) != 0 {
		t.Errorf("ended %+v although there is time", o.End)
	}
	r = race(slow, running("cg+jacobi", 0, second))
	r.Left = 20 * second
	if o := r.Next(); len(o.End) != 0 {
		t.Errorf("ended %+v although no other is known to make it", o.End)
	}
}

// A direct solve waits while a live trial is expected sooner, but no longer than
// it takes itself, and not where the other will not arrive.
func TestDirectSolveWaits(t *testing.T) {
	const pairing = "richardson:1+cholesky"
	direct := Candidate{Pairing: pairing, Solver: "richardson", Precond: "cholesky", Direct: true, Memory: 12 << 20}
	for _, c := range []struct {
		name  string
		own   time.Duration
		total float64
		left  time.Duration
		bytes int64
		waits bool
	}{
		{"5 s more", 5 * second, 200, 0, 12 << 20, true},
		{"not in time", 5 * second, 1000, 0, 12 << 20, false},
		{"never", 5 * second, math.Inf(1), 0, 12 << 20, false},
		{"it has had its time", 15 * second, 110, 0, 12 << 20, false},
		{"not predicted", 5 * second, 200, 0, -1, true},
		{"not predicted, 40 s left", 5 * second, 200, 40 * second, -1, true},
		{"12 s left", 5 * second, 200, 12 * second, 12 << 20, false},
	} {
		h := running("cg+none", 0, c.own)
		h.Iterations, h.Predictions = 100, []trace.Prediction{{Iter: 90, Total: c.total}}
		r := race(h)
		r.Left, r.given = c.left, 1
		r.Facts.N, r.Facts.Entries = 100_000, 500_000 // 20 us an entry: 10 s
		direct.Memory = c.bytes
		if c.bytes > 0 {
			r.Facts.N = 100 // a factor of 2^20 entries: 11 s
		}
		r.Candidates = append(r.Candidates, direct)
		if got := r.waits(pairing); got != c.waits || slices.Contains(r.untried(20), pairing) == c.waits {
			t.Errorf("%s: waits %v", c.name, got)
		}
	}
	r := race(running("cg+none", 0, 5*second))
	r.Candidates = append(r.Candidates, direct)
	if r.waits(pairing) {
		t.Error("waits for a trial of which nothing is foreseen")
	}
}

// Where the diagonal holds zeros, what divides by pivots is tried on the
// permuted matrix, what fills in on A as it stands too, and neither under a
// method for symmetric matrices; the kin of a method that broke down is left out.
func TestWhatCannotWorkIsNotTried(t *testing.T) {
	f := facts(inspect.No, inspect.Unknown)
	f.DiagZero, f.DiagPositive = 10, 90
	r := Race{Facts: f, Tried: map[string]bool{}, Offers: []string{"scale/gmres+none"}}
	for _, s := range []string{"minres", "bicgstab", "cgs", "idr"} {
		for _, p := range []string{"none", "ilu", "ilut"} {
			r.Candidates = append(r.Candidates, Candidate{Pairing: s + "+" + p, Solver: s, Precond: p, Symmetric: s == "minres"})
		}
	}
	if got := r.untried(1); !slices.Equal(got, r.Offers) {
		t.Errorf("first %v, a finding offers %v", got, r.Offers)
	}
	r.Offers = nil
	broken := trial("bicgstab+none", trace.BrokeDown, 0, second)
	broken.Iterations, broken.Records = 1, make([]trace.Record, 2)
	r.Trials = []trace.History{broken, trial("match/bicgstab+ilu", trace.Converged, 0, second)}
	r.Tried = tried(r.Trials)
	for range 20 {
		for _, p := range r.untried(3) {
			if strings.HasPrefix(p, "cgs") || strings.HasPrefix(p, "match/cgs") || strings.HasSuffix(p, "ilu") && !strings.HasPrefix(p, "match/") {
				t.Errorf("tries %s", p)
			}
			r.Tried[p] = true
		}
	}
	if !r.Tried["match/bicgstab+ilut"] || !r.Tried["bicgstab+ilut"] || !r.Tried["match/idr+ilu"] {
		t.Errorf("tried %v", r.Tried)
	}
}

// A restart length that is never reached makes no other method.
func TestRestartsThatNeverHappen(t *testing.T) {
	h := trial("gmres:30+none", trace.Converged, 0, second) // 10 iterations
	r := Race{Facts: facts(inspect.No, inspect.Unknown), Trials: []trace.History{h}}
	if got := r.parameters(); slices.Contains(got, "gmres:60+none") {
		t.Errorf("tries %v", got)
	}
}
