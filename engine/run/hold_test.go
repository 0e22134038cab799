package run

import (
	"context"
	"strings"
	"testing"
	"time"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

func TestHoldResumeCancelDrop(t *testing.T) {
	s := sample(t, "plate:150")
	b := NewBench(s, limits(1e-300, 1<<30), 0, nil)
	ctx, cancel := context.WithCancel(context.Background())
	defer cancel()
	m, _ := Parse("sd+none")
	one, two := b.Add(m), b.Add(m)
	go b.Run(ctx)
	for one.History().Iterations < 3 {
		time.Sleep(time.Millisecond)
	}
	b.Hold(one, true)
	b.Pause()
	b.Continue()
	held := one.History()
	time.Sleep(20 * time.Millisecond)
	if h := one.History(); h.Stop != trace.Held || h.Iterations != held.Iterations {
		t.Errorf("a held trial moved: %s, %d then %d", h.Stop, held.Iterations, h.Iterations)
	}
	b.Hold(one, false)
	for one.History().Iterations <= held.Iterations {
		time.Sleep(time.Millisecond)
	}
	b.Cancel(one, trace.Cancelled, "stopped by the user")
	if h := one.History(); h.Stop != trace.Cancelled || one.Answer() == nil {
		t.Errorf("cancelled: %s", h.Stop)
	}
	b.Drop(two.ID)
	if len(b.Trials()) != 1 {
		t.Errorf("%d trials after a drop, want 1", len(b.Trials()))
	}
}

func TestPanicOfASolverEndsItsTrialAlone(t *testing.T) {
	s := sample(t, "plate:20")
	good, _ := Parse("cg+none")
	bad := good
	bad.Name = "faulty+none"
	bad.Solver.Lanczos = false
	bad.Solver.New = func(linear.Values) krylov.Solver { return &faulty{} }
	b := NewBench(s, limits(1e-8, 1000), 0, nil)
	ctx, cancel := context.WithCancel(context.Background())
	defer cancel()
	failed, fine := b.Add(bad), b.Add(good)
	go b.Run(ctx)
	b.WaitEnded(ctx)
	if h := failed.History(); h.Stop != trace.Failed || !strings.Contains(h.Reason, "index out of range") {
		t.Errorf("a panicking solver ends %s (%s)", h.Stop, h.Reason)
	}
	if h := fine.History(); h.Stop != trace.Converged {
		t.Errorf("its neighbour ends %s (%s)", h.Stop, h.Reason)
	}
}

func TestMemoryIsKnownBeforeStart(t *testing.T) {
	s := sample(t, "plate:50")
	b := NewBench(s, limits(1e-8, 10), 400<<10, nil)
	small, _ := Parse("cg+none")
	big, _ := Parse("gmres:300+none")
	if h := b.Add(small).History(); h.Stop == trace.Refused {
		t.Errorf("cg refused: %s", h.Reason)
	}
	if h := b.Add(big).History(); h.Stop != trace.Refused || !strings.Contains(h.Reason, "limit") {
		t.Errorf("gmres:300 of %d bytes: %s %q", h.MemoryBytes, h.Stop, h.Reason)
	}
}
