package spectrum

import (
	"math"
	"slices"
	"sort"
)

// Locked is an eigenvalue that a run of conjugate gradients has found.
type Locked struct {
	Cluster
	Iter int // steps after which a Ritz value was within a thousandth of the gap of it
}

// Locks tells when the outermost eigenvalues locked: of the clusters of the
// whole run, the low smallest and the high largest that are settled, by rising
// Iter. The Ritz values of the first k steps are counted near each by Sturm
// sequences, and k is found by bisection, for a Ritz value that has settled
// stays (Paige 1980). The cost is some 12 (low+high) passes over the steps.
func Locks(clusters []Cluster, alphas, betas []float64, low, high int) []Locked {
	var out []Locked
	take := func(c Cluster) bool {
		if !c.Settled() {
			return false
		}
		out = append(out, Locked{c, lockedAt(c, alphas, betas)})
		return true
	}
	first := 0
	for ; first < len(clusters) && low > 0; first++ {
		if take(clusters[first]) {
			low--
		}
	}
	for i := len(clusters) - 1; i >= first && high > 0; i-- {
		if take(clusters[i]) {
			high--
		}
	}
	slices.SortStableFunc(out, func(a, b Locked) int { return a.Iter - b.Iter })
	return out
}

// lockedAt is the least k whose Ritz values come near the cluster.
func lockedAt(c Cluster, alphas, betas []float64) int {
	reach := settledGap * math.Min(c.Gap, math.Abs(c.Value))
	from, to := c.Value-reach, c.Value+reach
	k := sort.Search(len(alphas)-1, func(i int) bool {
		n := belowFactored(alphas[:i+1], betas[:i+1], [probes]float64{from, to, from, to})
		return n[1] > n[0]
	})
	return k + 1
}
