package tui

import (
	"errors"
	"fmt"
	"math"
	"math/rand"
	"sync"
	"time"

	"dwindle/engine"
	"dwindle/engine/choose"
	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/report"
	"dwindle/engine/trace"
)

// script is how one trial of the fake session behaves: its residual by own
// seconds, for an invented system of a weir gate.
type script struct {
	pairing   string
	perSecond float64 // iterations
	setup     float64 // seconds
	end       float64 // own seconds at which it ends; 0 never
	stop      trace.Stop
	level     func(it float64) float64 // log10 of the residual
	cond      float64
}

// scripts are eight trials of every kind of ending.
var scripts = []script{
	{"cg+none", 900, 0.01, 0, trace.Running, func(it float64) float64 { return -it/3700 + 0.35*math.Sin(it/40) }, 4.1e7},
	{"cg+jacobi", 840, 0.06, 7.4, trace.Converged, func(it float64) float64 { return -8.05 * it / 6200 }, 2.2e6},
	{"cg+ic:0", 120, 1.2, 4.6, trace.Converged, func(it float64) float64 { return -8.1 * it / 410 }, 9.7e3},
	{"minres+jacobi", 800, 0.1, 8.8, trace.Converged, func(it float64) float64 { return -8.02 * it / 7000 }, 2.2e6},
	{"gmres:30+ilu:0", 260, 1.9, 9.3, trace.Stagnated, func(it float64) float64 { return -3.1 * (1 - math.Exp(-it/300)) }, 0},
	{"bicgstab+none", 450, 0.01, 11.8, trace.Diverged, func(it float64) float64 { return math.Abs(it-1500)/1000 - 1.5 }, 0},
	{"scale/gmres:60+ilu:0", 1.5, 4, 0, trace.Running, func(it float64) float64 { return -it * 0.65 }, 0},
	{"cg+ssor:1.5", 210, 0.3, 7.4, trace.Converged, func(it float64) float64 { return -8.08 * it / 1500 }, 8.8e4},
}

// at is the trial's history after t seconds.
func (s script) at(t float64) trace.History {
	h := trace.History{Pairing: s.pairing, Norm: trace.TwoNorm, CPUShare: math.NaN(), Floor: math.NaN(),
		TrueResidual: math.NaN(), BestTrue: math.NaN(), Backward: math.NaN(), Componentwise: math.NaN(),
		Error: math.NaN(), Normal: math.NaN(), PrecondAsymmetry: math.NaN()}
	if s.end > 0 && t >= s.end {
		t, h.Stop, h.Reason = s.end, s.stop, "as the script has it"
	} else if h.Stop = trace.Running; t < s.setup {
		h.Stop = trace.SettingUp
	}
	h.SetupTime, h.OwnTime = span1(math.Min(t, s.setup)), span1(t)
	h.MemoryBytes = 12 << 20
	if t < s.setup {
		return h
	}
	n := int((t - s.setup) * s.perSecond)
	step := max(n/2000, 1)
	for it := 0; it <= n; it += step {
		r := trace.Record{Iter: uint32(it), MatVecs: uint32(it), Clock: span1(s.setup + float64(it)/s.perSecond),
			Residual: math.Pow(10, s.level(float64(it))), Audit: math.NaN()}
		if it%(7*step) == 0 {
			r.Audit = r.Residual * 1.02
			h.TrueResidual = r.Audit
			if !(h.BestTrue <= r.Audit) {
				h.BestTrue = r.Audit
			}
		}
		h.Records = append(h.Records, r)
	}
	h.Iterations, h.Products, h.PrecondUses = n, n, n
	h.Residual = h.Records[len(h.Records)-1].Residual
	if s.cond > 0 {
		h.Condition = trace.Condition{Of: "M⁻¹A", Smallest: 30 / s.cond, Largest: 30, Estimate: s.cond, Settled: n > 400}
		h.EnergyProved = s.cond > 1e6
		for k := range 6 {
			h.Locks = append(h.Locks, trace.Lock{Value: 30 / s.cond * math.Pow(2, float64(k)), Iter: n * (k + 2) / 9, Copies: 1 + k/5, Weight: 0.01})
		}
		for it := 0; it <= n; it += max(n/40, 1) {
			e := math.Pow(10, s.level(float64(it)))
			h.EnergyErrors = append(h.EnergyErrors, trace.EnergyError{Iter: it, Lower: 0.3 * e, Upper: 0.9 * e})
		}
	}
	if h.Stop == trace.Running && n > 0 {
		h.Predictions = []trace.Prediction{{Iter: n / 2, Total: float64(2 * n), Low: 1.5 * float64(n), High: 2.5 * float64(n)}}
	}
	h.Fields = []trace.Field{{Name: "gate", Rows: 12000, Residual: h.TrueResidual, Componentwise: 2e-6, Tol: 1e-6}, {Name: "spindle", Rows: 8000, Residual: 3e-7, Componentwise: 1e-3}}
	h.WouldStop = []trace.StopMark{{Rule: "rhs", Iter: n, True: h.Residual}, {Rule: "energy", Iter: n / 2, True: math.Pow(10, s.level(float64(n/2)))},
		{Rule: "backward", Iter: n * 2 / 3, True: math.Pow(10, s.level(float64(n*2/3)))}, {Rule: "preconditioned", Iter: -1, True: math.NaN()}}
	return h
}

// span1 is s seconds.
func span1(s float64) time.Duration { return time.Duration(s * 1e9) }

// fake is a session that moves by a clock of its own.
type fake struct {
	mu       sync.Mutex
	now      func() time.Duration
	scripts  []script
	ids      []int
	held     map[int]float64 // own seconds at which it was held
	ended    map[int]float64
	today    int
	calls    []string
	pause    time.Duration // clock time spent suspended
	since    time.Duration // of the suspension
	done     bool          // every trial has ended: the version stands still
	findings []diagnose.Finding
	broken   error
	ready    bool
	heard    func(format string, args ...any) // told of every call; nil: nobody
	bomb     time.Time                        // Snapshot panics from then on
}

// newFake returns a session of the first n scripts, its clock given.
func newFake(n int, now func() time.Duration) *fake {
	f := &fake{now: now, held: map[int]float64{}, ended: map[int]float64{}, since: -1, findings: someFindings()}
	for i := range n {
		f.scripts, f.ids = append(f.scripts, scripts[i%len(scripts)]), append(f.ids, i+1)
	}
	return f
}

// finish ends every trial at 20 s, and the clock with them.
func (f *fake) finish() {
	for _, id := range f.ids {
		f.ended[id] = 20
	}
	f.done, f.now = true, still(20)
}

// still is a clock that stands at s seconds.
func still(s float64) func() time.Duration { return func() time.Duration { return span1(s) } }

// someFindings are invented findings in all weights.
func someFindings() []diagnose.Finding {
	return []diagnose.Finding{
		{Rule: "divergence", Weight: diagnose.Blocker, Certainty: inspect.Measured, Subject: "bicgstab+none",
			Claim: "The true residual is 8.3 decades above its best, reached at it 1500.", Advice: "Use a method whose residual cannot grow.",
			Try: []string{"minres+jacobi", "gmres:60+ilu:0"},
			Evidence: []diagnose.Evidence{{Quantity: "lowest true residual", Value: 3.2e-2, Iteration: 1500},
				{Quantity: "|rho|/(‖r̂‖‖r‖)", Value: 3e-13, Iteration: 1497, Rows: []int{210, 211}}}},
		{Rule: "stagnation", Weight: diagnose.Drag, Certainty: inspect.Measured, Subject: "gmres:30+ilu:0",
			Claim: "20 cycles cut the residual by less than 0.1 % each.", Advice: "Restart later.", Try: []string{"gmres:60+ilu:0"}},
		{Rule: "rows", Weight: diagnose.Note, Certainty: inspect.Proved, Subject: diagnose.OnSystem,
			Claim: "Row norms differ by 7.9 decades: ‖aᵢ‖ from 1.2e-3 to 8.8e4.", Advice: "Scale first.", Try: []string{"scale/cg+ic:0"}},
	}
}

func (f *fake) Snapshot() engine.Snapshot {
	f.mu.Lock()
	defer f.mu.Unlock()
	if !f.bomb.IsZero() && time.Now().After(f.bomb) {
		panic("the fake session is told to")
	}
	t := f.clock()
	s := engine.Snapshot{Phase: engine.Running, Progress: -1, Elapsed: span1(t), Facts: someFacts(),
		System:   report.System{Name: "sluice4.mtx", Unknowns: 20000, Entries: 1390112, RHS: "ones"},
		Settings: report.Settings{Tol: 1e-8}, Findings: f.findings,
		Choice: choose.Choice{Pairing: "cg+ic:0", Reasons: []string{"least own time to the tolerance"}, Gain: diagnose.Gain{},
			Ranked: []choose.Ranked{{Pairing: "cg+ic:0", Seconds: 4.6, Setup: 1.2, Iterations: 410, Memory: 12 << 20, Reached: true, For: [3]float64{4.6, 35.2, 3401.2}, BreakEven: math.NaN()},
				{Pairing: "cg+jacobi", Seconds: 7.4, Setup: 0.06, Iterations: 6165, Memory: 1 << 20, Reached: true, For: [3]float64{7.4, 73.5, 7340}, BreakEven: 3},
				{Pairing: "bicgstab+none", Seconds: math.NaN(), Iterations: 5305, Memory: 1 << 20}},
			Settings: []string{"solver: conjugate gradients", "preconditioner: incomplete Cholesky (level 0)"},
			RuledOut: []choose.Ruled{{Pairing: "every pairing with qmr", Reason: "needs products with the transpose"}},
			Outcomes: []choose.Outcome{{Pairing: "cg+ic:0", What: "iterations, told at half time", Predicted: 430, Came: 407}}}}
	if f.broken != nil {
		s.Phase, s.Err, s.Facts = engine.Broken, f.broken, nil
		return s
	}
	if f.ready {
		s.Phase, s.Waiting = engine.Ready, "the line-up needs about 90 s and 1.2 GiB"
	}
	for k, id := range f.ids {
		own, stop := t, trace.Stop(0)
		if at, ok := f.held[id]; ok {
			own, stop = at, trace.Held
		}
		if at, ok := f.ended[id]; ok {
			own, stop = at, trace.Cancelled
		}
		h := f.scripts[k].at(own)
		if stop != 0 && !h.Stop.Ended() {
			h.Stop = stop
		}
		h.Today = id == f.today
		s.Trials = append(s.Trials, engine.Trial{ID: id, History: h})
	}
	s.Version = int64(t*1e6)*1000 + int64(len(f.calls)) + 1
	if f.done {
		s.Version, s.Phase = int64(len(f.calls))+1, engine.Ended
	}
	return s
}

// clock is seconds since the start, suspensions left out.
func (f *fake) clock() float64 {
	now := f.now()
	if f.since >= 0 {
		now = f.since
	}
	return (now - f.pause).Seconds()
}

func (f *fake) did(format string, args ...any) {
	f.calls = append(f.calls, fmt.Sprintf(format, args...))
	if f.heard != nil {
		f.heard(format, args...)
	}
}

func (f *fake) lock() func() { f.mu.Lock(); return f.mu.Unlock }

func (f *fake) Candidates() []choose.Candidate {
	return []choose.Candidate{
		{Pairing: "cg+ic:0", Solver: "cg", Memory: 12 << 20, Summary: "conjugate gradients, incomplete Cholesky"},
		{Pairing: "minres+ssor:1", Solver: "minres", Memory: 3 << 20, Summary: "minimum residual, one symmetric sweep"},
		{Pairing: "cg+lu", Solver: "cg", Summary: "conjugate gradients, complete factors", Refused: "needs 9.1 GiB, the limit is 2 GiB"},
	}
}
func (f *fake) Skip()  { defer f.lock()(); f.did("skip") }
func (f *fake) Start() { defer f.lock()(); f.ready = false; f.did("start") }
func (f *fake) Add(p string) (int, error) {
	defer f.lock()()
	f.did("add %s", p)
	if p == "nonsense+none" {
		return 0, errors.New("no solver \"nonsense\"")
	}
	id := len(f.ids) + 1
	s := scripts[2]
	s.pairing = p
	f.scripts, f.ids = append(f.scripts, s), append(f.ids, id)
	return id, nil
}
func (f *fake) Hold(id int)   { defer f.lock()(); f.held[id] = f.clock(); f.did("hold %d", id) }
func (f *fake) Resume(id int) { defer f.lock()(); delete(f.held, id); f.did("resume %d", id) }
func (f *fake) Cancel(id int) { defer f.lock()(); f.ended[id] = f.clock(); f.did("cancel %d", id) }
func (f *fake) Drop(id int) {
	defer f.lock()()
	for k, v := range f.ids {
		if v == id {
			f.ids, f.scripts = append(f.ids[:k:k], f.ids[k+1:]...), append(f.scripts[:k:k], f.scripts[k+1:]...)
		}
	}
	f.did("drop %d", id)
}
func (f *fake) MarkToday(id int) { defer f.lock()(); f.today = id; f.did("today %d", id) }
func (f *fake) Suspend()         { defer f.lock()(); f.since = f.now(); f.did("suspend") }
func (f *fake) Continue() {
	defer f.lock()()
	if f.since >= 0 {
		f.pause += f.now() - f.since
		f.since = -1
	}
	f.did("continue")
}

// someFacts are invented facts with every kind of answer.
func someFacts() *inspect.Facts {
	yes := inspect.Fact{Answer: inspect.Yes, Certainty: inspect.Proved, Why: "every entry equals its mirror", Value: math.NaN()}
	return &inspect.Facts{Name: "sluice4.mtx", N: 20000, Entries: 1390112, Format: "Matrix Market coordinate real symmetric",
		Stored: 705056, Digits: 17, RHS: "ones", RHSNorm: 141.4, RowEntries: inspect.Range{Min: 12, Max: 96, MinRow: 3, MaxRow: 77},
		Bandwidth: 3640, Symmetric: yes, PatternSymmetric: yes, DiagPositive: 20000,
		PositiveDefinite: inspect.Fact{Answer: inspect.Unknown, Why: "nothing against it: n is over 2000"},
		Diag:             inspect.Range{Min: 1.2e-3, Max: 8.8e4}, RowNorm: inspect.Range{Min: 1.2e-3, Max: 8.8e4, MinRow: 17, MaxRow: 4},
		ColNorm: inspect.Range{Min: 1.2e-3, Max: 8.8e4}, NormInf: 8.8e4, NormFro: 2.1e6, NormOne: 8.8e4, Dominant: 12200,
		Gershgorin: inspect.Range{Min: -3.1e4, Max: 2.6e5}, Components: 1, Complete: true, Pattern: somePattern(), Study: someStudy()}
}

// somePattern is a band with two more diagonals.
func somePattern() [][]float64 {
	rng := rand.New(rand.NewSource(1))
	p := make([][]float64, 64)
	for i := range p {
		p[i] = make([]float64, 64)
		for j := range p[i] {
			if d := i - j; d > -2 && d < 2 || d == 17 || d == -17 {
				p[i][j] = 0.2 + 0.8*rng.Float64()
			}
		}
	}
	return p
}

// Snapshot gives the system another name.
func (n named14) Snapshot() (s engine.Snapshot) {
	s = n.fake.Snapshot()
	s.System.Name = n.name
	return s
}
