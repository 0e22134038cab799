package linear

import (
	"sync"
	"sync/atomic"
	"time"
)

// patience is how often a thread looks for another's progress before it takes
// the other for stopped: some ten microseconds.
const patience = 5000

// A thread that laid down its task sleeps for an absence, which lets the other
// have the processor where both were on one, and comes back; so often in a
// run.
const (
	absence      = 20 * time.Microsecond
	mostAbsences = 8
)

// Pipeline runs tasks that depend on earlier ones on the thread team. Tasks
// are taken in ascending order by whichever thread is free, and done in steps;
// a task tells how far it is and awaits the steps of earlier ones, never of
// later ones. What a task computes does not depend on which thread runs it.
//
// On a busy machine a thread may stand still for milliseconds. One that awaits
// it in vain lays its task down and leaves for a while; those that go on pick
// up what is laid down, so that a run takes no longer than on one thread and the
// standstill itself.
type Pipeline struct {
	mu     sync.Mutex // one run at a time
	tasks  int
	do     func(task, from int) bool
	lane   func(int)
	next   atomic.Int64
	active atomic.Int64 // threads that take part
	failed atomic.Bool
	run    uint64 // counts the runs, so that marks need not be cleared
	marks  []mark // one a task
}

// mark is the state of a task. It fills a cache line.
type mark struct {
	at   atomic.Uint64 // the run in the high half and the steps done in the low one
	down atomic.Uint64 // the run in which the task is laid down now, else 0
	_    [48]byte
}

// NewPipeline returns a pipeline of tasks 0 … tasks−1. do runs a task from a
// step on, counted from 0; it returns false at once where Await does. It calls
// no kernel of this package that runs on the team.
func NewPipeline(tasks int, do func(task, from int) bool) *Pipeline {
	p := &Pipeline{tasks: tasks, do: do, marks: make([]mark, tasks)}
	p.lane = p.work
	return p
}

// Run runs all tasks and returns when they are done. It allocates nothing. A
// panic of a task is raised again here.
func (p *Pipeline) Run() {
	p.mu.Lock()
	defer p.mu.Unlock()
	p.run++
	p.next.Store(0)
	p.active.Store(0)
	p.failed.Store(false)
	Parallel(Threads(), p.lane)
}

// work is what one thread does in a run. The last one to leave looks whether
// something was laid down meanwhile.
func (p *Pipeline) work(int) {
	ended := false
	defer func() {
		if !ended {
			p.failed.Store(true) // the others must not wait for ever
		}
	}()
	p.active.Add(1)
	absences := 0
	for again := true; again; {
		whole := p.take() && p.pickUp()
		again = p.active.Add(-1) == 0 && p.laid()
		if !whole && !again && absences < mostAbsences {
			absences++
			time.Sleep(absence)
			again = p.laid()
		}
		if again {
			p.active.Add(1)
		}
	}
	ended = true
}

// take runs tasks until none is left; false where it lays one down.
func (p *Pipeline) take() bool {
	for !p.failed.Load() {
		t := int(p.next.Add(1)) - 1
		if t >= p.tasks {
			break
		}
		if !p.try(t, 0) {
			return false
		}
	}
	return true
}

// pickUp ends the tasks that are laid down; false where it lays one down again.
func (p *Pipeline) pickUp() bool {
	for t := range p.marks {
		if !p.resume(t) {
			return false
		}
	}
	return true
}

// resume ends the task if it is laid down; false where it is laid down again.
func (p *Pipeline) resume(t int) bool {
	if m := &p.marks[t]; m.down.Load() == p.run && m.down.CompareAndSwap(p.run, 0) {
		from := 0
		if at := m.at.Load(); at>>32 == p.run {
			from = int(at & (1<<32 - 1))
		}
		return p.try(t, from)
	}
	return true
}

func (p *Pipeline) try(t, from int) bool {
	if p.do(t, from) || p.failed.Load() {
		return true
	}
	p.marks[t].down.Store(p.run)
	return false
}

// laid says whether work is left: a task laid down or not yet taken.
func (p *Pipeline) laid() bool {
	if p.failed.Load() {
		return false
	}
	if int(p.next.Load()) < p.tasks {
		return true
	}
	for t := range p.marks {
		if p.marks[t].down.Load() == p.run {
			return true
		}
	}
	return false
}

// Reach tells that the task has done so many steps, from 1, in this run.
func (p *Pipeline) Reach(task, steps int) { p.marks[task].at.Store(p.run<<32 | uint64(steps)) }

// Await returns true when an earlier task has done so many steps; where that
// is laid down it does them itself. It returns false where the caller is to
// lay down its own task, by returning false.
func (p *Pipeline) Await(task, steps int) bool {
	want, m := p.run<<32|uint64(steps), &p.marks[task]
	for i := 0; m.at.Load() < want; i++ {
		if m.down.Load() == p.run && !p.resume(task) {
			return false
		}
		if i > patience || i%64 == 63 && p.failed.Load() {
			return m.at.Load() >= want
		}
	}
	return true
}
