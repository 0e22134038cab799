package load

import (
	"math"
	"slices"
	"sort"

	"dwindle/engine/linear"
)

// bothSides finds the first stored entry, in file order, whose mirror image
// is stored before it.
func (c *collector) bothSides() (at int, row, col int32, found bool) {
	if c.lower == 0 || c.upper == 0 {
		return 0, 0, 0, false
	}
	below := make([]uint64, 0, c.lower)
	c.t.each(func(_ int, i, j int32, _ float64) bool {
		if i > j {
			below = append(below, pairKey(i, j))
		}
		return true
	})
	slices.Sort(below)
	var pair uint64
	c.t.each(func(_ int, i, j int32, _ float64) bool {
		if i < j {
			pair = pairKey(j, i)
			_, found = slices.BinarySearch(below, pair)
		}
		return !found
	})
	if !found {
		return 0, 0, 0, false
	}
	first, seen := int32(-1), false
	c.t.each(func(k int, i, j int32, _ float64) bool {
		if i == j || pairKey(max(i, j), min(i, j)) != pair {
			return true
		}
		if seen && i != first {
			at, row, col = k, i, j
			return false
		}
		first, seen = i, true
		return true
	})
	return at, row, col, true
}

func pairKey(i, j int32) uint64 { return uint64(i)<<32 | uint64(j) }

// overflow finds the stored entry with which a sum of duplicates left the
// range of a double.
func (c *collector) overflow(a *linear.CSR, merged int) (at int, row, col int32, found bool) {
	if merged == 0 {
		return 0, 0, 0, false
	}
	bad := slices.IndexFunc(a.Val, func(v float64) bool { return math.IsInf(v, 0) || math.IsNaN(v) })
	if bad < 0 {
		return 0, 0, 0, false
	}
	i := sort.SearchInts(a.Ptr, bad+1) - 1
	row, col = int32(i), a.Col[bad]
	sum := 0.0
	c.t.each(func(k int, i, j int32, v float64) bool {
		if i == row && j == col || c.sym != general && i == col && j == row {
			at, sum = k, sum+v
		}
		return !math.IsInf(sum, 0)
	})
	return at, row, col, true
}
