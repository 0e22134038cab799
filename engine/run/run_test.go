package run

import (
	"context"
	"math"
	"strings"
	"testing"
	"time"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
	"dwindle/engine/trace"
	"dwindle/samples"
)

// ticking is a clock that advances by one step each time it is read, so that
// one solver step costs exactly one tick.
func ticking(tick time.Duration) Clock {
	now := time.Duration(0)
	return func() time.Duration { now += tick; return now }
}

func sample(t *testing.T, spec string) linear.System {
	t.Helper()
	s, err := samples.Build(spec)
	if err != nil {
		t.Fatal(err)
	}
	if s.B == nil {
		s.B = make([]float64, s.N())
		for i := range s.B {
			s.B[i] = 1
		}
		s.RHS = linear.Ones
	}
	return s
}

func limits(tol float64, iterations int) Limits {
	return Limits{Target: Target{StopRHS, tol}, Iterations: iterations}
}

// finish runs the pairings to their ends and returns their histories.
func finish(t *testing.T, s linear.System, l Limits, clock Clock, pairings ...string) []trace.History {
	t.Helper()
	b := NewBench(s, l, 0, clock)
	ctx, cancel := context.WithCancel(context.Background())
	defer cancel()
	for _, p := range pairings {
		m, err := Parse(p)
		if err != nil {
			t.Fatal(err)
		}
		b.Add(m)
	}
	go b.Run(ctx)
	wait, stop := context.WithTimeout(ctx, time.Minute)
	defer stop()
	b.WaitEnded(wait)
	if wait.Err() != nil {
		t.Fatal("trials did not end within a minute")
	}
	var out []trace.History
	for _, u := range b.Trials() {
		out = append(out, u.History())
	}
	return out
}

func sameBits(a, b trace.Record) bool {
	bits := math.Float64bits
	return a.Iter == b.Iter && a.MatVecs == b.MatVecs && a.Solves == b.Solves && bits(a.Residual) == bits(b.Residual) &&
		bits(a.Audit) == bits(b.Audit) && bits(a.Alpha) == bits(b.Alpha) && bits(a.Beta) == bits(b.Beta)
}

func TestCompanyAndThreadsChangeNoBit(t *testing.T) {
	defer linear.SetThreads(1)
	s := sample(t, "plate:120")
	pairs := []string{"cg+none", "cg+ic:0", "gmres:10+jacobi", "bicgstab+ssor:1.3", "minres+jacobi"}
	linear.SetThreads(1)
	var solo []trace.History
	for _, p := range pairs {
		solo = append(solo, finish(t, s, limits(1e-8, 400), nil, p)...)
	}
	for _, threads := range []int{1, 2} {
		linear.SetThreads(threads)
		together := finish(t, s, limits(1e-8, 400), nil, pairs...)
		for i := range pairs {
			if len(solo[i].Records) != len(together[i].Records) {
				t.Fatalf("%s: %d records alone, %d in company", pairs[i], len(solo[i].Records), len(together[i].Records))
			}
			for k := range solo[i].Records {
				if !sameBits(solo[i].Records[k], together[i].Records[k]) {
					t.Fatalf("%s, %d threads: record %d differs:\n%+v\n%+v", pairs[i], threads, k, solo[i].Records[k], together[i].Records[k])
				}
			}
		}
	}
}

func TestFairTime(t *testing.T) {
	const tick = time.Millisecond
	s := sample(t, "plate:200")
	b := NewBench(s, limits(1e-300, 1<<30), 0, ticking(tick))
	ctx, cancel := context.WithCancel(context.Background())
	defer cancel()
	for _, p := range []string{"cg+none", "cg+ic:0", "sd+none"} {
		m, err := Parse(p)
		if err != nil {
			t.Fatal(err)
		}
		b.Add(m)
	}
	go b.Run(ctx)
	for range 20 {
		time.Sleep(5 * time.Millisecond)
		b.Pause()
		lo, hi, longest := time.Duration(math.MaxInt64), time.Duration(0), tick
		for _, u := range b.Trials() {
			h := u.History()
			lo, hi, longest = min(lo, h.OwnTime), max(hi, h.OwnTime), max(longest, h.SetupTime) // a set-up is one step
		}
		b.Continue()
		if longest > 20*tick || hi-lo > minQuantum+longest+2*tick {
			t.Fatalf("own times differ by %v, more than a quantum %v and the longest step %v", hi-lo, minQuantum, longest)
		}
	}
}

func TestLateTrialStartsLevel(t *testing.T) {
	const tick = time.Millisecond
	s := sample(t, "plate:100")
	b := NewBench(s, limits(1e-300, 1<<30), 0, ticking(tick))
	ctx, cancel := context.WithCancel(context.Background())
	defer cancel()
	m, _ := Parse("sd+none")
	first := b.Add(m)
	go b.Run(ctx)
	for first.History().OwnTime < 300*tick {
		time.Sleep(time.Millisecond)
	}
	b.Pause()
	before := first.History().OwnTime
	m2, _ := Parse("cg+jacobi")
	late := b.Add(m2)
	b.Continue()
	for late.History().OwnTime < 300*tick {
		time.Sleep(time.Millisecond)
	}
	b.Pause()
	gained := first.History().OwnTime - before
	if d := gained - late.History().OwnTime; d > minQuantum+2*tick || d < -minQuantum-2*tick {
		t.Errorf("after joining, the late trial ran %v and the first %v", late.History().OwnTime, gained)
	}
}

func TestEndings(t *testing.T) {
	for _, c := range []struct {
		name, spec, pairing string
		limits              Limits
		want                trace.Stop
		reason              string
	}{
		{"a passing audit", "plate:20", "cg+none", limits(1e-8, 1000), trace.Converged, ""},
		{"too few iterations", "plate:20", "cg+none", limits(1e-8, 5), trace.IterationLimit, "5 iterations"},
		// cyclic shift, b = e1: GMRES(m<n) never moves (Brown 1991)
		{"restart stagnation", "shift:20", "gmres:5+none", limits(1e-8, 1000), trace.Stagnated, "cycles"},
		// the recurrence of cg falls below any tolerance, the true residual stays near 1e-15
		{"the floor", "plate:20", "cg+none", limits(1e-17, 4000), trace.FalselyConverged, "stays at"},
		{"a zero diagonal", "shift:20", "gmres:5+jacobi", limits(1e-8, 10), trace.Refused, "diagonal"},
	} {
		h := finish(t, sample(t, c.spec), c.limits, nil, c.pairing)[0]
		if h.Stop != c.want || !strings.Contains(h.Reason, c.reason) {
			t.Errorf("%s: %s (%s), want %s with %q", c.name, h.Stop, h.Reason, c.want, c.reason)
		}
		if h.Stop == trace.Converged && !(h.TrueResidual <= c.limits.Target.Tol) {
			t.Errorf("%s: converged at %g", c.name, h.TrueResidual)
		}
	}
}

func TestLeastSquaresEnding(t *testing.T) {
	s := sample(t, "seepage:20")
	s.B = make([]float64, s.N())
	s.B[0] = 1 // its mean 1/n is out of reach
	l := limits(1e-8, 2000)
	l.Unreachable = 1 / math.Sqrt(float64(s.N()))
	for _, p := range []string{"minres+none", "project/cg+none"} {
		h := finish(t, s, l, nil, p)[0]
		if h.Stop != trace.LeastSquares {
			t.Errorf("%s: %s (%s), want least-squares", p, h.Stop, h.Reason)
		}
		// the residual of the least-squares solution is the unreachable part itself
		if math.Abs(h.TrueResidual-l.Unreachable) > 1e-6*l.Unreachable {
			t.Errorf("%s: residual %g, the unreachable part is %g", p, h.TrueResidual, l.Unreachable)
		}
	}
}

// faulty is a solver that panics in its third step.
type faulty struct{ steps, n int }

func (f *faulty) Begin(p krylov.Problem) (trace.Reading, error) {
	f.n = len(p.B)
	return trace.Reading{Residual: 1, Alpha: math.NaN(), Beta: math.NaN()}, nil
}

func (f *faulty) Step() (trace.Reading, error) {
	if f.steps++; f.steps == 3 {
		panic("index out of range")
	}
	return trace.Reading{Residual: 1, Alpha: math.NaN(), Beta: math.NaN()}, nil
}

func (f *faulty) Solution(dst []float64) { clear(dst) }

// One product and, after the first, one preconditioner use an iteration: the
// uses of audits are not counted.
func TestAuditsAreNotCounted(t *testing.T) {
	for pairing, most := range map[string]int{"gmres:30+jacobi": 2, "minres+jacobi": 2, "cg+jacobi": 2} {
		h := finish(t, sample(t, "plate:30"), limits(1e-8, 1000), nil, pairing)[0]
		restarts := h.Iterations / 30
		if extra := h.PrecondUses - h.Iterations; extra < 0 || extra > most+restarts {
			t.Errorf("%s: %d preconditioner uses in %d iterations", pairing, h.PrecondUses, h.Iterations)
		}
	}
}

func TestScheduleFollowsReadingsAlone(t *testing.T) {
	s := newSchedule()
	var at []int
	for i := 0; i <= 30; i++ {
		own := 1.0
		if i >= 20 {
			own = 1e-9 // met at 20, then neither halved nor 5 % later before 21
		}
		if s.due(i, own, 1e-8) {
			at = append(at, i)
		}
	}
	// 0, then the distinct ⌈1.2^k⌉: 1 2 3 4 5 6 7 8 9 11 13 16 19 23 27, and from
	// 20 on every 5 %: 20 21 23 25 27 29
	want := []int{0, 1, 2, 3, 4, 5, 6, 7, 8, 9, 11, 13, 16, 19, 20, 21, 23, 25, 27, 29}
	if len(at) != len(want) {
		t.Fatalf("audits at %v, want %v", at, want)
	}
	for i := range at {
		if at[i] != want[i] {
			t.Fatalf("audits at %v, want %v", at, want)
		}
	}
}

func TestWouldStopMarks(t *testing.T) {
	h := finish(t, sample(t, "plate:30"), limits(1e-8, 1000), nil, "cg+ic:0")[0]
	at := map[string]trace.StopMark{}
	for _, m := range h.WouldStop {
		at[m.Rule] = m
	}
	if got := at["rhs"].Iter; got != h.Iterations {
		t.Errorf("rhs rule held first at %d, the trial converged at %d", got, h.Iterations)
	}
	if at["initial"].Iter != at["rhs"].Iter {
		t.Errorf("with a zero guess the initial rule holds where rhs does: %v", at)
	}
	for _, rule := range []string{"preconditioned", "backward", "energy"} {
		if m := at[rule]; m.Iter > h.Iterations || m.Iter == 0 {
			t.Errorf("%s held at %d of %d", rule, m.Iter, h.Iterations)
		}
	}
}

func TestCanonicalNames(t *testing.T) {
	for in, want := range map[string]string{
		"cg":                    "cg+none",
		"gmres(50)+ilu(0)":      "gmres:50+ilu:0",
		"gmres+ilu":             "gmres:30+ilu:0",
		"cg+ssor:omega=1.50":    "cg+ssor:1.5",
		"scale/minres+jacobi":   "scale/minres+jacobi",
		"scale,project/cg+none": "scale,project/cg+none",
	} {
		m, err := Parse(in)
		if err != nil || m.Name != want {
			t.Errorf("%q is %q (%v), want %q", in, m.Name, err, want)
			continue
		}
		if again, err := Parse(m.Name); err != nil || again.Name != want {
			t.Errorf("%q does not read back: %q (%v)", want, again.Name, err)
		}
	}
	for _, in := range []string{"", "cgx+none", "cg+nope", "cg+ssor:2.5", "cg+jacobi:3", "gmres:1.5", "warp/cg+none"} {
		if _, err := Parse(in); err == nil {
			t.Errorf("%q was read", in)
		}
	}
}
