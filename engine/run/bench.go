package run

import (
	"context"
	"fmt"
	"runtime"
	"sync"
	"sync/atomic"
	"time"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

const (
	minQuantum   = 50 * time.Millisecond
	maxQuantum   = time.Second // slow steps do not make the others wait longer
	quantumSteps = 20
)

// Bench lets trials advance side by side, one at a time, each with the whole
// thread team: deficit round robin. Each round credits one quantum to every
// live trial, overshoot is carried as debt, a late trial starts level.
type Bench struct {
	sys     linear.System
	limits  Limits
	memory  int64 // for all live trials together
	watch   watch
	have    Have
	sizes   sizes
	form    *form // nil: products run on the rows
	scratch *scratch

	mu      sync.Mutex
	wake    *sync.Cond
	trials  []*Trial
	nextID  int
	paused  bool
	moving  bool        // the goroutine of Run is inside a trial
	steer   func() bool // asked between rounds; nil: nobody steers
	stopped bool
	version atomic.Int64
}

// NewBench makes a bench for a system. memory bounds all live trials
// together, in bytes. Without a clock the bench goes by the machine's, and
// measures CPU time beside it.
func NewBench(s linear.System, l Limits, memory int64, clock Clock) *Bench {
	w := watch{clock: clock}
	if clock == nil {
		w = watch{MachineClock(), threadCPU}
	}
	b := &Bench{sys: s, limits: l, memory: memory, watch: w, have: Offers(s), sizes: measure(s), nextID: 1}
	b.form = foresee(b.have, memory, w.clock)
	b.wake = sync.NewCond(&b.mu)
	return b
}

// NumberFrom lets the next trial have this number.
func (b *Bench) NumberFrom(id int) {
	b.mu.Lock()
	defer b.mu.Unlock()
	b.nextID = id
}

// Have returns what the system offers to methods.
func (b *Bench) Have() Have { return b.have }

// Add adds a trial. A pairing that cannot run here, or would not fit the
// memory limit beside the live ones, is added as refused.
func (b *Bench) Add(m Method) *Trial {
	form := b.formFor(m)
	need := m.Memory(b.have) + form.need()
	b.mu.Lock()
	defer b.mu.Unlock()
	if b.scratch == nil {
		b.scratch = newScratch(b.sys.N())
	}
	t := newTrial(b.nextID, m, b.sys, b.sizes, b.limits, b.watch, b.scratch, need)
	t.form = form
	b.nextID++
	if why := m.Refuse(b.have); why != "" {
		t.end(trace.Refused, why)
	} else if used := b.used(); b.memory > 0 && used+b.beyond(t) > b.memory {
		t.end(trace.Refused, fmt.Sprintf("needs %s; %s of the limit %s are in use", Bytes(need), Bytes(used), Bytes(b.memory)))
	}
	b.trials = append(b.trials, t)
	b.changed()
	b.wake.Broadcast()
	return t
}

// used returns the memory of the trials that hold any, the shared form
// counted once; b.mu is held.
func (b *Bench) used() int64 {
	total := int64(0)
	for _, t := range b.trials {
		if h := t.History(); !h.Stop.Ended() {
			total += h.MemoryBytes - t.sharedBytes()
		} else if h.Stop != trace.Refused {
			total += 8 * int64(b.have.n) // the answer is kept
			if h.TwoDoubles {
				total += 8 * int64(b.have.n)
			}
		}
	}
	if b.formTaken() {
		total += b.form.need()
	}
	return total
}

// Trials returns the trials in the order they were added.
func (b *Bench) Trials() []*Trial {
	b.mu.Lock()
	defer b.mu.Unlock()
	return append([]*Trial(nil), b.trials...)
}

// Version changes whenever a trial moves or the list of trials changes.
func (b *Bench) Version() int64 { return b.version.Load() }

func (b *Bench) changed() { b.version.Add(1) }

// Run moves the trials until ctx is done. It runs on one goroutine, bound to
// its thread, so that the thread's CPU time tells how busy the machine was.
func (b *Bench) Run(ctx context.Context) {
	runtime.LockOSThread()
	defer runtime.UnlockOSThread()
	go func() {
		<-ctx.Done()
		b.mu.Lock()
		b.stopped = true
		b.wake.Broadcast()
		b.mu.Unlock()
	}()
	for cold := true; ; {
		b.askSteersman()
		live := b.await()
		if live == nil {
			return
		}
		q := quantum(live)
		for _, t := range live {
			if !b.enter() {
				return
			}
			if cold {
				b.warm(ctx)
				cold = false
			}
			t.budget += q
			t.advance(ctx)
			t.release()
			b.compare()
			b.leave()
		}
	}
}

// await returns the trials that can move, waiting until there are any, or
// until something has changed that whoever steers should see; nil when the
// bench is stopped.
func (b *Bench) await() []*Trial {
	b.mu.Lock()
	defer b.mu.Unlock()
	for woken := false; ; woken = true {
		if b.stopped {
			return nil
		}
		if !b.paused {
			if live := b.live(); len(live) > 0 {
				return live
			}
			if b.steer != nil && woken {
				return []*Trial{}
			}
		}
		b.wake.Wait()
	}
}

// live returns the trials that can move; b.mu is held.
func (b *Bench) live() []*Trial {
	var live []*Trial
	for _, t := range b.trials {
		if t.canMove() {
			live = append(live, t)
		}
	}
	return live
}

// quantum is the credit of one round: at least minQuantum and, up to
// maxQuantum, long enough for quantumSteps steps of the slowest live trial.
func quantum(live []*Trial) time.Duration {
	q := minQuantum
	for _, t := range live {
		h := t.History()
		if h.Iterations > 0 {
			q = max(q, quantumSteps*(h.OwnTime-h.SetupTime)/time.Duration(h.Iterations))
		}
	}
	return min(q, maxQuantum)
}

// enter waits for a pause to end, so that a round goes on where it was left;
// false when the bench is stopped.
func (b *Bench) enter() bool {
	b.mu.Lock()
	defer b.mu.Unlock()
	for b.paused && !b.stopped {
		b.wake.Wait()
	}
	b.moving = !b.stopped
	return b.moving
}

func (b *Bench) leave() {
	b.mu.Lock()
	b.moving = false
	b.changed()
	b.wake.Broadcast()
	b.mu.Unlock()
}
