package linear

import (
	"fmt"
	"runtime"
	"sync"
	"sync/atomic"
)

// Block is the fixed reduction length: every sum over a vector or over rows
// is taken block by block, and the block sums are added pairwise in order.
// The result is therefore the same bits for any number of threads.
const Block = 1024

const (
	chunkBlocks = 4     // blocks a thread takes at a time
	serialBelow = 8     // blocks: shorter work runs on the caller alone
	spins       = 20000 // looks at the door before a worker goes to sleep
)

// job is one kernel call shared by the team: operands, scalars and the block
// sums. Kernels are plain functions of a job, so that no call allocates.
type job struct {
	kernel        func(j *job, lo, hi, block int)
	n             int // elements (or rows)
	u, v, w, x, y []float64
	a, b          float64
	m             *CSR
	part          []float64 // one sum a block
	next          atomic.Int64
	failed        atomic.Pointer[string]
}

// team is a set of persistent workers that wait for jobs, first awake, then
// asleep. The caller takes part as one of the threads.
type team struct {
	mu      sync.Mutex // one job at a time
	job     job
	round   atomic.Int64
	busy    atomic.Int64
	workers []*worker
}

type worker struct {
	asleep atomic.Bool
	wake   chan struct{}
	quit   atomic.Bool
}

var theTeam = &team{}

// SetThreads sets how many threads the kernels use; n < 1 means 1. Results do
// not depend on it.
func SetThreads(n int) {
	if n < 1 {
		n = 1
	}
	t := theTeam
	t.mu.Lock()
	defer t.mu.Unlock()
	if n-1 == len(t.workers) {
		return
	}
	for _, w := range t.workers {
		w.quit.Store(true)
		w.rouse()
	}
	t.workers = nil
	for i := 1; i < n; i++ {
		w := &worker{wake: make(chan struct{}, 1)}
		t.workers = append(t.workers, w)
		go w.loop(t, t.round.Load())
	}
	if runtime.GOMAXPROCS(0) < n+2 {
		runtime.GOMAXPROCS(n + 2) // the team spins; leave the rest of the program a place to run
	}
}

// Threads returns how many threads the kernels use.
func Threads() int {
	theTeam.mu.Lock()
	defer theTeam.mu.Unlock()
	return len(theTeam.workers) + 1
}

func (w *worker) rouse() {
	if w.asleep.CompareAndSwap(true, false) {
		w.wake <- struct{}{}
	}
}

// await returns when the round has moved on from seen, or the worker is to quit.
func (w *worker) await(t *team, seen int64) int64 {
	for {
		for i := 0; i < spins; i++ {
			if r := t.round.Load(); r != seen || w.quit.Load() {
				return r
			}
		}
		w.asleep.Store(true)
		if t.round.Load() != seen || w.quit.Load() {
			if !w.asleep.CompareAndSwap(true, false) {
				<-w.wake
			}
			continue
		}
		<-w.wake
	}
}

func (w *worker) loop(t *team, seen int64) {
	for {
		seen = w.await(t, seen)
		if w.quit.Load() {
			return
		}
		t.job.work()
		t.busy.Add(-1)
	}
}

// work takes chunks of blocks until none is left. A panic of a kernel is kept
// and raised again in the caller.
func (j *job) work() {
	defer func() {
		if p := recover(); p != nil {
			s := fmt.Sprint(p)
			j.failed.Store(&s)
		}
	}()
	blocks := int64((j.n + Block - 1) / Block)
	for {
		first := j.next.Add(chunkBlocks) - chunkBlocks
		if first >= blocks {
			return
		}
		for k := first; k < min(first+chunkBlocks, blocks); k++ {
			lo := int(k) * Block
			j.kernel(j, lo, min(lo+Block, j.n), int(k))
		}
	}
}

// begin hands out the job to fill in; finish runs it. Between the two the
// caller owns the team.
func begin(kernel func(j *job, lo, hi, block int), n int) *job {
	theTeam.mu.Lock()
	j := &theTeam.job
	j.kernel, j.n = kernel, n
	return j
}

// finish runs the job and gives the team back.
func (j *job) finish() {
	t := theTeam
	j.run(t)
	t.release()
}

// finishSum runs the job, whose kernel writes part[block], and returns the
// sum of the parts.
func (j *job) finishSum() float64 {
	t := theTeam
	blocks := (j.n + Block - 1) / Block
	if cap(j.part) < blocks {
		j.part = make([]float64, blocks)
	}
	j.part = j.part[:blocks]
	j.run(t)
	s := pairwise(j.part)
	t.release()
	return s
}

func (t *team) release() {
	j := &t.job
	j.u, j.v, j.w, j.x, j.y, j.m = nil, nil, nil, nil, nil, nil
	t.mu.Unlock()
}

func (j *job) run(t *team) {
	blocks := (j.n + Block - 1) / Block
	j.next.Store(0)
	if len(t.workers) == 0 || blocks < serialBelow {
		j.work()
	} else {
		t.busy.Store(int64(len(t.workers)))
		t.round.Add(1)
		for _, w := range t.workers {
			w.rouse()
		}
		j.work()
		for i := 0; t.busy.Load() != 0; i++ {
			if i > spins {
				runtime.Gosched()
			}
		}
	}
	if s := j.failed.Swap(nil); s != nil {
		t.release()
		panic(*s)
	}
}

// pairwise adds the values by halving, so that the rounding error grows with
// log2 of their number.
func pairwise(p []float64) float64 {
	if len(p) <= 8 {
		s := 0.0
		for _, v := range p {
			s += v
		}
		return s
	}
	h := len(p) / 2
	return pairwise(p[:h]) + pairwise(p[h:])
}
