package linear

import (
	"testing"
	"time"
)

// chain is tasks each of which follows the one before it step by step; late
// makes some of them stand still.
type chain struct {
	*Pipeline
	table [40][25]int
	late  func(task, step int)
}

func newChain() *chain {
	c := &chain{late: func(int, int) {}}
	c.Pipeline = NewPipeline(len(c.table), func(task, from int) bool {
		for s := from; s < len(c.table[0]); s++ {
			if task > 0 && !c.Await(task-1, s+1) {
				return false
			}
			c.late(task, s)
			v := 1
			if task > 0 {
				v += c.table[task-1][s]
			}
			c.table[task][s] += v
			c.Reach(task, s+1)
		}
		return true
	})
	return c
}

func (c *chain) check(t *testing.T) {
	t.Helper()
	for k := range c.table {
		for s, got := range c.table[k] {
			if got != k+1 {
				t.Fatalf("%d threads: task %d, step %d gives %d", Threads(), k, s, got)
			}
		}
	}
	clear(c.table[:])
}

// The sums come out as one thread makes them, each step done once, run after
// run, without allocation.
func TestPipeline(t *testing.T) {
	defer SetThreads(1)
	for _, threads := range []int{1, 2, 3, 5} {
		SetThreads(threads)
		c := newChain()
		for range 50 {
			c.Run()
			c.check(t)
		}
		if got := testing.AllocsPerRun(10, c.Run); got > 0 {
			t.Errorf("%d threads: a run allocates %g times", threads, got)
		}
	}
}

// Threads that stand still hold nobody up for good, and no step is lost or
// done twice.
func TestPipelineGoesOnWithoutTheLate(t *testing.T) {
	defer SetThreads(1)
	for _, threads := range []int{2, 3, 5} {
		SetThreads(threads)
		c := newChain()
		c.late = func(task, step int) {
			if (task*7+step)%61 == 0 {
				time.Sleep(100 * time.Microsecond)
			}
		}
		for range 10 {
			c.Run()
			c.check(t)
		}
	}
}

// A task that panics ends the run, although others wait for it.
func TestPipelinePanics(t *testing.T) {
	defer SetThreads(1)
	for _, threads := range []int{1, 2} {
		SetThreads(threads)
		c := newChain()
		c.late = func(task, _ int) {
			if task == 3 {
				panic("task is bad")
			}
		}
		if got := caught(c.Run); got != "task is bad" {
			t.Errorf("%d threads: recovered %v", threads, got)
		}
	}
}
