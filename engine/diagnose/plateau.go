package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

const (
	flatSlope  = 0.2  // of the mean slope of the curve: less is flat
	flatShare  = 0.25 // of the iterations, from which a plateau is told
	flatLeast  = 10   // iterations
	lockBefore = 0.4  // a lock is tied to a plateau in whose last part it falls,
	lockAfter  = 0.25 // or that ended so much of its length before
)

// plateau: the error of cg stands still until small Ritz values have settled.
// Told of one trial, see plainest.
var plateau = Rule{"plateau", func(c Case) []Finding {
	h, ok := plainest(c, func(h trace.History) bool {
		_, ok := standstill(h)
		return ok && !outOfReach(c)
	})
	if !ok {
		return nil
	}
	p, _ := standstill(h)
	f := Finding{Weight: Note, Certainty: inspect.Measured, Subject: h.Pairing,
		Claim: fmt.Sprintf("its error is nearly flat from it %d to it %d (%s to %s of the first), when %s; then it falls %s-fold an iteration",
			p.from, p.to, num(p.high), num(p.low), settled(p.locks), num(p.after)),
		Advice: "a preconditioner that lifts the smallest eigenvalues, or deflation, takes the plateau away",
		Evidence: []Evidence{{Quantity: "energy error at the start, of the first", Value: p.high, Iteration: p.from},
			{Quantity: "energy error at the end, of the first", Value: p.low, Iteration: p.to}}}
	for _, l := range p.locks {
		f.Evidence = append(f.Evidence, Evidence{Quantity: "Ritz value that settled", Value: l.Value, Iteration: l.Iter})
	}
	return []Finding{f}
}}

// settled tells which Ritz values settled, and when.
func settled(locks []trace.Lock) string {
	if len(locks) == 1 {
		return fmt.Sprintf("the Ritz value %s settled (it %d)", num(locks[0].Value), locks[0].Iter)
	}
	words := ""
	for i, l := range locks {
		switch {
		case i == len(locks)-1:
			words += " and "
		case i > 0:
			words += ", "
		}
		words += num(l.Value)
	}
	return fmt.Sprintf("the Ritz values %s settled (its %d to %d)", words, locks[0].Iter, locks[len(locks)-1].Iter)
}

// still is a flat part of the curve of the energy error.
type still struct {
	from, to  int
	high, low float64      // the errors there
	after     float64      // the mean factor an iteration after it
	locks     []trace.Lock // that end it, by iteration
}

// standstill finds the longest flat part that a small settled Ritz value ends.
func standstill(h trace.History) (best still, ok bool) {
	e := h.EnergyErrors
	if len(e) < flatLeast {
		return best, false
	}
	last := e[len(e)-1]
	mean := math.Log(e[0].Lower/last.Lower) / float64(last.Iter)
	if !(mean > 0) {
		return best, false
	}
	for i := range e {
		for j := len(e) - 2; j > i; j-- {
			long := e[j].Iter - e[i].Iter
			if long <= best.to-best.from || float64(long) < flatShare*float64(h.Iterations) || long < flatLeast {
				break
			}
			if math.Log(e[i].Lower/e[j].Lower) > flatSlope*mean*float64(long) {
				continue
			}
			if l := locksAt(h, e[i].Iter, e[j].Iter); len(l) > 0 {
				best, ok = still{from: e[i].Iter, to: e[j].Iter, high: e[i].Lower, low: e[j].Lower, locks: l}, true
				best.after = math.Exp(math.Log(e[j].Lower/last.Lower) / float64(last.Iter-e[j].Iter))
			}
			break
		}
	}
	return best, ok
}

// locksAt are the small Ritz values that settled near the end of a flat part:
// the nearest, and those within a tenth of it, at most three.
func locksAt(h trace.History, from, to int) (out []trace.Lock) {
	long := float64(to - from)
	middle := math.Sqrt(h.Condition.Smallest * h.Condition.Largest)
	nearest := math.Inf(1)
	for _, l := range h.Locks {
		at := float64(l.Iter - to)
		if l.Value < middle && at >= -lockBefore*long && at <= lockAfter*long+2 {
			nearest = math.Min(nearest, math.Abs(at))
		}
	}
	for _, l := range h.Locks {
		at := math.Abs(float64(l.Iter - to))
		if l.Value < middle && at <= nearest+math.Max(2, long/20) && len(out) < 3 && !math.IsInf(nearest, 1) {
			out = append(out, l)
		}
	}
	return out
}
