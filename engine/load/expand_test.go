package load

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"

	"dwindle/engine/linear"
)

// Rows come out as FromEntries makes them, however they are filled.
func TestRows(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 10))
	for _, width := range []int{3, 40, 400} {
		for _, spread := range []int{width, 100000} { // with many duplicates, with few
			n := 50
			c := &collector{n: n}
			var entries []linear.Entry
			for k := range n * width {
				e := linear.Entry{I: r.IntN(n), J: r.IntN(spread) % n, V: math.Exp(20 * r.NormFloat64())}
				entries = append(entries, e)
				c.add(int32(e.I), int32(e.J), e.V, n*width-k)
			}
			for _, threads := range []int{1, 3} {
				onThreads(threads, func() {
					a, merged, err := c.matrix(context.Background())
					if err != nil || merged != len(entries)-a.Entries() {
						t.Fatalf("%d merged, %v", merged, err)
					}
					sameMatrix(t, a, linear.FromEntries(n, n, entries))
				})
			}
		}
	}
}

// Rows without duplicates are sorted, short ones and long ones.
func TestSortRows(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 12))
	for _, n := range []int{1, 2, 31, 32, 33, 1000} {
		var entries []linear.Entry
		c := &collector{n: n}
		for i := range min(n, 40) {
			for _, j := range r.Perm(n) {
				entries = append(entries, linear.Entry{I: i, J: j, V: r.Float64()})
				c.add(int32(i), int32(j), entries[len(entries)-1].V, n)
			}
		}
		a, merged, err := c.matrix(context.Background())
		if merged != 0 || err != nil {
			t.Fatalf("%d merged, %v", merged, err)
		}
		sameMatrix(t, a, linear.FromEntries(n, n, entries))
	}
}
