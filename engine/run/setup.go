package run

import (
	"context"
	"errors"
	"fmt"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
	"dwindle/engine/prepare"
	"dwindle/engine/spectrum"
	"dwindle/engine/trace"
)

// setUp prepares, builds and begins, on the trial's clock.
func (t *Trial) setUp(parent context.Context) {
	ctx, cancel := context.WithCancel(parent)
	defer cancel()
	t.mu.Lock()
	t.hist.Stop, t.cancel = trace.SettingUp, cancel
	wait := t.wait
	t.mu.Unlock()
	if wait > 0 {
		ctx, cancel = context.WithTimeoutCause(ctx, wait, errPatience)
		defer cancel()
	}
	shared := t.readyForm()
	start := t.watch.now()
	start.at, start.cpu = start.at-shared, start.cpu-shared
	reading, err := t.build(ctx)
	t.charge(start)
	t.mu.Lock()
	t.hist.SetupTime, t.hist.SetupCPU, t.progress = t.hist.OwnTime, t.hist.OwnCPU, 1
	live := !t.hist.Stop.Ended()
	t.mu.Unlock()
	switch {
	case !live:
	case context.Cause(ctx) == errPatience && t.solver == nil:
		t.end(trace.Outpaced, fmt.Sprintf("its set-up alone took more than %.3g s", wait.Seconds()))
	case parent.Err() == nil && context.Cause(ctx) == errPatience:
		t.begun(reading) // it was done just in time
	case ctx.Err() != nil:
		t.solver = nil
		t.end(trace.Cancelled, "cancelled while setting up")
	case err != nil:
		t.end(trace.BrokeDown, "set-up: "+t.told(err))
	default:
		t.begun(reading)
	}
}

// errPatience ends a set-up that takes longer than it may.
var errPatience = errors.New("the set-up takes too long")

// build makes the prepared system, the preconditioner and the solver.
func (t *Trial) build(ctx context.Context) (trace.Reading, error) {
	var err error
	start := t.watch.now()
	if t.prepared, t.back, err = chain(ctx, t.method.Preps, t.sys); err != nil {
		return trace.Reading{}, err
	}
	m, err := t.preconditioner(ctx)
	if err != nil {
		return trace.Reading{}, err
	}
	built := t.watch.since(start)
	t.mu.Lock()
	t.hist.BuildTime, t.hist.BuildCPU = built.at, built.cpu
	t.mu.Unlock()
	n := t.sys.N()
	t.a, t.m = &counted{inner: t.products(), n: n, ctx: ctx}, &counted{inner: m, n: n, ctx: ctx}
	guess := t.prepared.Guess
	solver := t.method.Solver.New(t.method.SolverValues)
	r, err := solver.Begin(krylov.Problem{A: t.a, M: t.m, B: t.prepared.B, X: guess, Near: t.prepared.NearNull})
	t.a.ctx, t.m.ctx = nil, nil
	if err == nil {
		t.solver = solver
	}
	return r, err
}

// preconditioner builds M, unless one is ready.
func (t *Trial) preconditioner(ctx context.Context) (linear.Applier, error) {
	if t.ready != nil {
		return t.ready, nil
	}
	basis, err := t.basis()
	if err != nil {
		return nil, err
	}
	m, notes, err := t.method.Precond.Build(ctx, basis, t.method.PrecondValues, func(p float64) {
		t.mu.Lock()
		t.progress = p
		t.mu.Unlock()
	})
	t.inFileRows(notes.Broke)
	t.mu.Lock()
	t.hist.Notes = notes
	t.mu.Unlock()
	return m, err
}

// basis is the system that the preconditioner is built from.
func (t *Trial) basis() (linear.System, error) {
	s := t.prepared
	if t.method.From == "" {
		if a := s.Matrix(); a != nil {
			s.A = prepare.Shifted(a, s.Shift)
		}
		return s, nil
	}
	if s.Open == nil {
		return s, fmt.Errorf("no file can be read here")
	}
	other, err := s.Open(t.method.From)
	if err != nil {
		return s, err
	}
	if other.NRows != s.N() {
		return s, fmt.Errorf("%s has %d rows, A has %d", t.method.From, other.NRows, s.N())
	}
	s.A = other
	return s, nil
}

// begun follows a successful set-up: own norms, probes and iteration 0.
func (t *Trial) begun(r trace.Reading) {
	t.own0 = r.Residual
	t.ownB = t.ownNorm(t.prepared.B, linear.Norm2(t.prepared.B))
	t.mu.Lock()
	t.hist.Stop = trace.Running
	t.mu.Unlock()
	if !t.quiet {
		t.probe()
	}
	if !t.quiet && (t.method.Solver.Lanczos || t.method.Solver.Tridiagonal) {
		t.lanczos = new(spectrum.Tridiagonal)
	}
	t.record(r, true)
}
