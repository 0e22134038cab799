package linear

import (
	"runtime"
	"sync"
	"sync/atomic"
)

const (
	chunkBlocks = 4     // blocks a thread takes at a time
	serialBelow = 8     // blocks: shorter work runs on the caller alone
	spins       = 20000 // looks at the door before a worker goes to sleep
)

// team is a set of persistent workers that wait for jobs, first awake, then
// asleep. The caller takes part as thread 0.
type team struct {
	mu      sync.Mutex // one job at a time
	job     *job       // the one being run
	round   atomic.Int64
	busy    atomic.Int64
	workers []*worker
}

type worker struct {
	thread int // 1, 2, …
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
		w := &worker{thread: i, wake: make(chan struct{}, 1)}
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
		t.job.work(w.thread)
		t.busy.Add(-1)
	}
}

// run shares the job among the threads and returns when all is done. A panic
// of its kernel is raised again here, with the team free for the next job.
func (t *team) run(j *job) {
	t.mu.Lock()
	blocks := j.blocks()
	if len(t.workers) == 0 || blocks < serialBelow {
		j.split(1, blocks)
		j.work(0)
	} else {
		j.split(len(t.workers)+1, blocks)
		t.job = j
		t.busy.Store(int64(len(t.workers)))
		t.round.Add(1)
		for _, w := range t.workers {
			w.rouse()
		}
		j.work(0)
		for i := 0; t.busy.Load() != 0; i++ {
			if i > spins {
				runtime.Gosched()
			}
		}
		t.job = nil
	}
	t.mu.Unlock()
	if p := j.failed.Swap(nil); p != nil {
		panic(*p)
	}
}
