package linear

import (
	"sync"
	"testing"
)

// A panic of a kernel, on whichever thread it strikes, reaches the caller, and
// the team is there for the next call.
func TestPanicReachesTheCaller(t *testing.T) {
	defer SetThreads(1)
	const n = 40 * Block
	for _, threads := range []int{1, 2, 3} {
		SetThreads(threads)
		for bad := 0; bad < 40; bad += 13 {
			j := begin(func(_ *job, _, _, block int) {
				if block == bad {
					panic("block is bad")
				}
			}, n)
			if got := caught(j.finish); got != "block is bad" {
				t.Errorf("%d threads, block %d: recovered %v", threads, bad, got)
			}
			if got := caught(func() { Dot(make([]float64, n), make([]float64, n-1)) }); got == nil {
				t.Error("a short operand did not panic")
			}
			o := drawn(n)
			if s := Dot(o.x, o.x); s <= 0 {
				t.Errorf("after a panic: %g", s)
			}
		}
	}
}

// A column outside the matrix is an index error of the caller's, whichever
// thread meets it.
func TestBadColumnPanics(t *testing.T) {
	defer SetThreads(1)
	a := plateMatrix(100)
	a.Col[a.Ptr[9000]] = int32(a.NCols)
	x, y := make([]float64, a.NCols), make([]float64, a.NRows)
	for _, threads := range []int{1, 2} {
		SetThreads(threads)
		if got := caught(func() { a.Apply(y, x) }); got == nil {
			t.Errorf("%d threads: no panic", threads)
		}
	}
}

func caught(f func()) (p any) {
	defer func() { p = recover() }()
	f()
	return nil
}

// Every block of a job is worked on exactly once, however many threads there
// are.
func TestEachBlockOnce(t *testing.T) {
	defer SetThreads(1)
	for threads := 1; threads <= 6; threads++ {
		SetThreads(threads)
		for _, blocks := range []int{0, 1, 7, 8, 9, 31, 64, 101} {
			seen := make([]float64, blocks)
			j := begin(func(j *job, lo, hi, block int) {
				j.x[block] += float64(hi - lo)
			}, blocks*Block)
			j.x = seen
			j.finish()
			for b, s := range seen {
				if s != Block {
					t.Fatalf("%d threads: %g elements of block %d of %d were worked on", threads, s, b, blocks)
				}
			}
		}
	}
}

// Calls from several goroutines, with the number of threads changing between
// them, give what each would give alone.
func TestTeamIsShared(t *testing.T) {
	defer SetThreads(1)
	var wg sync.WaitGroup
	for g := range 4 {
		wg.Go(func() {
			o := drawn((9 + g) * Block)
			want := Dot(o.x, o.y)
			for i := range 100 {
				if i%25 == g {
					SetThreads(1 + (i+g)%3)
				}
				if got := Dot(o.x, o.y); got != want {
					t.Errorf("goroutine %d: %g, want %g", g, got, want)
					return
				}
			}
		})
	}
	wg.Wait()
}

// Workers that fell asleep wake up for the next job and for the end.
func TestWorkersWake(t *testing.T) {
	defer SetThreads(1)
	o := drawn(20 * Block)
	SetThreads(3)
	want := Dot(o.x, o.y)
	for range 5 {
		for _, w := range theTeam.workers {
			for !w.asleep.Load() { // after its spins
			}
		}
		if got := Dot(o.x, o.y); got != want {
			t.Fatalf("woken team: %g, want %g", got, want)
		}
	}
}
