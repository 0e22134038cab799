package linear

import "testing"

// Each part runs once, for any number of parts and threads, and a call
// allocates nothing.
func TestParallel(t *testing.T) {
	defer SetThreads(1)
	for _, threads := range []int{1, 2, 3} {
		SetThreads(threads)
		for _, parts := range []int{0, 1, 2, 7, 8, 9, 100} {
			seen := make([]int, parts)
			Parallel(parts, func(p int) { seen[p]++ })
			for p, times := range seen {
				if times != 1 {
					t.Errorf("%d threads, %d parts: part %d ran %d times", threads, parts, p, times)
				}
			}
		}
		sum := make([]int, 50)
		work := func(p int) { sum[p] += p }
		if got := testing.AllocsPerRun(20, func() { Parallel(50, work) }); got > 0 {
			t.Errorf("%d threads: a call allocates %g times", threads, got)
		}
		if got := caught(func() {
			Parallel(9, func(p int) {
				if p == 5 {
					panic("part is bad")
				}
			})
		}); got != "part is bad" {
			t.Errorf("%d threads: recovered %v", threads, got)
		}
	}
}
