package choose

import (
	"math"
	"slices"

	"dwindle/engine/trace"
)

const (
	blocks     = 8    // parts of a trial whose speeds are compared
	fewest     = 32   // iterations from which they are
	leastOff   = 0.05 // of the time: what a repetition differs by, at least
	briefOff   = 0.15 // the same of a trial too short to be taken apart
	coldCaches = 0.5  // of its own time that a trial loses for all that others took
)

// spread is by how many seconds the cost of a trial may be off: what its runs
// differ by where it was run again, else twice the standard error of its mean
// iteration, from the speeds of its parts; what rounding does to its number of
// iterations, where it was rerun; and a share of what the machine took away,
// for who works in between leaves the caches cold.
func spread(h trace.History, c cost) float64 {
	own, solve := c.own, c.solve()
	off := leastOff * own
	rel, ok := unsteady(h)
	switch {
	case len(h.Reruns) > 0:
		off = math.Max(off, (slices.Max(c.runs)-slices.Min(c.runs))/2) // half of it: the slowest of few may be the machine's doing
	case ok && !c.cpu: // speeds are by the clock
		off = math.Hypot(off, 2*rel*solve)
	default:
		off = briefOff * own
	}
	if len(h.Counts) > 0 && h.Iterations > 0 {
		low, high := slices.Min(h.Counts), slices.Max(h.Counts)
		off = math.Max(off, solve*math.Max(float64(h.Iterations-low), float64(high-h.Iterations))/float64(h.Iterations))
	}
	if h.CPUShare < 1 && h.CPUShare > 0 && len(h.Reruns) == 0 {
		off += coldCaches * own * (1 - h.CPUShare)
	}
	return off
}

// unsteady is the standard error of the mean time of an iteration, relative
// to it; false for a trial too short to say.
func unsteady(h trace.History) (float64, bool) {
	n := len(h.Records)
	if n < fewest {
		return 0, false
	}
	var x [blocks]float64
	mean := 0.0
	for i := range blocks {
		a, b := h.Records[i*(n-1)/blocks], h.Records[(i+1)*(n-1)/blocks]
		x[i] = (b.Clock - a.Clock).Seconds() / math.Max(1, float64(b.Iter-a.Iter))
		mean += x[i] / blocks
	}
	sum := 0.0
	for _, v := range x {
		sum += (v - mean) * (v - mean)
	}
	if mean <= 0 {
		return 0, false
	}
	return math.Sqrt(sum/(blocks-1)/blocks) / mean, true
}

// further is the seconds that one more right-hand side takes: measured on
// others where that was done, else as the first one did.
func further(h trace.History, solve float64) float64 {
	if len(h.Columns) == 0 {
		return solve
	}
	total := 0.0
	for _, c := range h.Columns {
		total += c.Seconds
	}
	return total / float64(len(h.Columns))
}

// expected is the seconds to the target of a trial that has not reached it,
// by its last prediction, or the iterations it would take where these are more
// than it may, limit (0: not known); NaN where there is none, or it never will.
func expected(h trace.History, c cost, limit int) (seconds, beyond float64) {
	nan, n := math.NaN(), len(h.Predictions)
	if n == 0 || h.Iterations == 0 || math.IsInf(h.Predictions[n-1].Total, 1) || hasFailed(h.Stop) {
		return nan, nan
	}
	total := math.Max(h.Predictions[n-1].Total, float64(h.Iterations+1))
	if limit > 0 && total > float64(limit) {
		return nan, total
	}
	return c.own + c.solve()/float64(h.Iterations)*(total-float64(h.Iterations)), nan
}

func hasFailed(s trace.Stop) bool {
	return s == trace.BrokeDown || s == trace.Diverged || s == trace.Stagnated || s == trace.Failed || s == trace.FalselyConverged
}

// safe says that theory stands behind the trial: a direct solve, or a method
// whose residual or error cannot grow, run without a mishap and not restarted.
func safe(h trace.History) bool {
	for _, e := range h.Events {
		if e.Kind != trace.Restart {
			return false
		}
	}
	return h.Direct || (h.Monotone || h.Energy) && !h.Restarted
}
