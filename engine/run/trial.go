package run

import (
	"context"
	"fmt"
	"math"
	"sync"
	"time"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
	"dwindle/engine/prepare"
	"dwindle/engine/spectrum"
	"dwindle/engine/trace"
)

// Trial is one pairing on the system. The bench moves it; History may be
// read from any goroutine.
type Trial struct {
	ID     int
	method Method
	sys    linear.System // the user's
	limits Limits
	sizes  sizes
	watch  watch

	prepared linear.System
	back     prepare.Back // nil without preparations
	form     *form        // of the products of A; nil: the rows
	a, m     *counted
	ready    linear.Applier // an M that was built before; nil: build one
	solver   krylov.Solver
	scratch  *scratch

	ownB, own0 float64 // own norm of b and of the first residual
	sched      schedule
	marks      marks
	lanczos    *spectrum.Tridiagonal
	lanczosAt  int // order at the last look
	learned    learned
	forecast   forecast
	ending     ending
	turned     bool // a negative curvature has been judged
	quiet      bool // nobody sees it: no probes, no look at its coefficients

	ways  [2][]float64 // iterates on the way, where vectors are asked for; the older first
	wayAt int          // iteration of the later one

	budget time.Duration // own time it may still use; negative is debt
	wait   time.Duration // longest set-up; 0: no bound

	mu       sync.Mutex
	hist     trace.History
	progress float64 // of the set-up
	cancel   context.CancelFunc
	held     bool
	answer   []float64 // the last iterate, once ended
	low      []float64 // its lower doubles; nil where x is kept in one
	doubt    doubt     // how far both may lie from the solution
}

// Limits bound a trial.
type Limits struct {
	Target      Target
	Iterations  int
	Seconds     float64 // own time; 0 is none
	Unreachable float64 // part of b known to be out of A's range, relative to ‖b‖; 0 if none known
	Delta       float64 // what the printed digits leave open in an entry
	Vectors     bool    // keep the vectors behind events and the end
	NoNorm      bool    // A is known not to be symmetric and semi-definite: xᵀA x is no norm, and cg's coefficients tell nothing
	Smallest    float64 // a proved lower bound of the spectrum of a symmetric A; 0 if none is known
	// FieldTol is what the residual of each field must come down to as well,
	// 0 for nothing; nil where no field is asked for.
	FieldTol []float64
}

// History returns a consistent copy that shares the append-only records.
func (t *Trial) History() trace.History {
	t.mu.Lock()
	defer t.mu.Unlock()
	return t.hist
}

// Progress returns how far the set-up is, 0 to 1.
func (t *Trial) Progress() float64 {
	t.mu.Lock()
	defer t.mu.Unlock()
	return t.progress
}

// Method returns the resolved pairing.
func (t *Trial) Method() Method { return t.method }

func newTrial(id int, m Method, s linear.System, z sizes, l Limits, w watch, sc *scratch, memory int64) *Trial {
	t := &Trial{ID: id, method: m, sys: s, sizes: z, limits: l, watch: w, scratch: sc,
		sched: newSchedule(), marks: newMarks(m.Solver.Lanczos)}
	nan := math.NaN()
	e, p := m.Solver, m.Precond
	t.hist = trace.History{Pairing: m.Name, Stop: trace.Waiting, Norm: m.norm(), MemoryBytes: memory,
		SymmetricA: e.Assumes&linear.AssumesSymmetric != 0, DefiniteA: e.Assumes&linear.AssumesDefinite != 0,
		SPDM:      e.Assumes&linear.AssumesSymmetricM != 0 && p.Name != "none",
		FixedM:    e.Assumes&linear.AssumesFixedM != 0 && p.Name != "none",
		Restarted: e.Restarted, Monotone: e.Monotone && m.watched() != trace.LeftNorm, Energy: e.Energy, Direct: p.Exact && m.From == "",
		TwoDoubles: m.inTwoDoubles(), Rounded: nan,
		CPUShare: nan, Residual: nan, TrueResidual: nan, BestTrue: math.Inf(1), Backward: nan, Componentwise: nan,
		Error: nan, Floor: nan, Normal: nan, PrecondAsymmetry: nan, WouldStop: t.marks.audited(-1, nan)}
	return t
}

// guard turns a panic of a method into a failed trial.
func (t *Trial) guard() {
	if p := recover(); p != nil {
		t.end(trace.Failed, fmt.Sprintf("internal fault: %v", p))
	}
}

// advance moves the trial until its budget is used up, it ends, or ctx does.
func (t *Trial) advance(ctx context.Context) {
	defer t.guard()
	if !t.canMove() {
		return // it was ended or held while others of the round moved
	}
	if t.solver == nil {
		t.setUp(ctx)
	}
	for t.budget > 0 && ctx.Err() == nil && t.canMove() {
		t.step()
	}
}

// ended says whether the trial is over.
func (t *Trial) ended() bool {
	t.mu.Lock()
	defer t.mu.Unlock()
	return t.hist.Stop.Ended()
}

// canMove says whether the trial may take a step.
func (t *Trial) canMove() bool {
	t.mu.Lock()
	defer t.mu.Unlock()
	return !t.held && !t.hist.Stop.Ended()
}

// charge adds to the trial's own time what has passed since start.
func (t *Trial) charge(start moment) {
	d := t.watch.since(start)
	t.budget -= d.at
	t.mu.Lock()
	t.hist.OwnTime += d.at
	t.hist.OwnCPU += d.cpu
	if t.hist.OwnCPU > 0 {
		t.hist.CPUShare = float64(t.hist.OwnCPU) / float64(t.hist.OwnTime)
	}
	t.mu.Unlock()
}

// step makes one iteration on the clock and judges it off the clock.
func (t *Trial) step() {
	start := t.watch.now()
	r, err := t.solver.Step()
	t.charge(start)
	if err == nil {
		err = t.operatorError()
	}
	if err != nil {
		t.end(trace.Failed, err.Error())
		return
	}
	t.mu.Lock()
	t.hist.Iterations++
	t.mu.Unlock()
	switch {
	case t.lanczos == nil: // of a trial that nobody sees as well
	case t.method.Solver.Tridiagonal:
		t.lanczos.AddLanczos(r.Alpha, r.Beta)
	default:
		if before := t.lanczos.Order(); t.lanczos.AddCG(r.Alpha, r.Beta) || t.lanczos.Order() > before {
			t.coefficients(r.Alpha, r.Beta)
		}
	}
	t.record(r, false)
}

func (t *Trial) operatorError() error {
	for _, op := range []any{t.a.inner, t.m.inner} {
		if f, ok := op.(linear.Failer); ok && f.Err() != nil {
			return f.Err()
		}
	}
	return nil
}

// interrupt cancels a set-up that is under way and makes a running slice end
// after the present step.
func (t *Trial) interrupt() {
	t.mu.Lock()
	defer t.mu.Unlock()
	if t.cancel != nil {
		t.cancel()
	}
	if !t.hist.Stop.Ended() {
		t.held = true
	}
}

// release keeps the solution and gives the rest of the memory back once the
// trial has ended.
func (t *Trial) release() {
	if !t.ended() || t.solver == nil {
		return
	}
	x := make([]float64, t.sys.N())
	t.iterate(x)
	low := append([]float64(nil), t.tail()...)
	t.mu.Lock()
	t.answer, t.low = x, low
	t.mu.Unlock()
	t.solver, t.a, t.m, t.back, t.prepared, t.lanczos = nil, nil, nil, nil, linear.System{}, nil
}

// Answer returns the last iterate of an ended trial (length n), or nil.
func (t *Trial) Answer() []float64 {
	t.mu.Lock()
	defer t.mu.Unlock()
	return t.answer
}
