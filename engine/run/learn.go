package run

import (
	"math"

	"dwindle/engine/spectrum"
	"dwindle/engine/trace"
)

const (
	soonest   = 16   // iterations before the first look
	retell    = 1.25 // how far a trial grows between two looks at its error,
	relearn   = 1.5  // and between two at its eigenvalues
	takeApart = 60   // nanoseconds a squared step that a Lanczos matrix costs, taken apart
	share     = 0.05 // of a trial's own work that looks may cost while it runs
	most      = 3000 // steps looked at while it runs
	small     = 900  // steps looked at at the end, whatever the work was
	smallDay  = 2000 // of today's pairing
	first     = 300  // of a longer trial, the first of its steps; the share allows more
	lowLocks  = 12   // Ritz values told, at each end
	highLocks = 6
	mostEnd   = 6000 // steps looked at at the end, where the work allows
)

// learned is what was made of a trial's coefficients so far.
type learned struct {
	errors int     // iterations at which to tell the errors again
	next   int     // iterations at which to take the Lanczos matrix apart again
	spent  float64 // nanoseconds that looks have cost, by count of work
	cycles int     // whole cycles seen of a restarted method
	nextAt int     // the cycle to look at next
}

// coefficients keeps α and β of one step of conjugate gradients.
func (t *Trial) coefficients(alpha, beta float64) {
	t.mu.Lock()
	t.hist.Alphas, t.hist.Betas = append(t.hist.Alphas, alpha), append(t.hist.Betas, beta)
	t.mu.Unlock()
}

// learn looks at the coefficients at growing iterations, off the clock.
func (t *Trial) learn() {
	t.seeCycle()
	k := len(t.hist.Alphas)
	if t.limits.NoNorm {
		return
	}
	if k >= max(t.learned.errors, soonest) {
		t.learned.errors = int(math.Ceil(retell * float64(k)))
		t.tellErrors()
	}
	if k < max(t.learned.next, soonest) || k > most {
		return
	}
	t.learned.next = int(math.Ceil(relearn * float64(k)))
	cost := takeApart * float64(k) * float64(k)
	if t.learned.spent+cost > share*t.work(k) {
		return
	}
	t.learned.spent += cost
	t.tellLocks(k)
}

// work is the nanoseconds that k steps take at the least, by counts, so that
// what is looked at does not depend on the machine.
func (t *Trial) work(k int) float64 {
	entries := 0
	if a := t.sys.Matrix(); a != nil {
		entries = a.Entries()
	}
	return float64(k) * float64(entries+5*t.sys.N()) / 4
}

// learnAll is the last look: at everything where the work allows, else at the
// first steps.
func (t *Trial) learnAll(stop trace.Stop) {
	k := len(t.hist.Alphas)
	if k == 0 || t.limits.NoNorm || t.ended() || stop == trace.Cancelled || stop == trace.Outpaced || stop == trace.Failed {
		return
	}
	t.tellErrors()
	looked := t.lookedAt(k, stop)
	c, ghosts := t.tellLocks(looked)
	if len(c) == 0 || looked < k {
		return
	}
	t.mu.Lock()
	t.hist.Delay = ghosts
	t.mu.Unlock()
	if stop == trace.Converged {
		t.tellWithout(c)
	}
}

// lookedAt is how many of k steps, from the first, the last look takes apart.
// Where the time is used up, few: all trials end at once.
func (t *Trial) lookedAt(k int, stop trace.Stop) int {
	whole := small
	switch {
	case t.hist.Today:
		whole = smallDay
	case stop == trace.TimeLimit:
		whole = first
	}
	allowed := min(mostEnd, int(math.Sqrt(share*t.work(k)/takeApart)))
	if k <= max(whole, allowed) {
		return k
	}
	return max(first, allowed)
}

// tellLocks takes the Lanczos matrix of the first k steps apart and writes
// which Ritz values have settled. It returns the clusters and how many of the
// steps went into ghosts.
func (t *Trial) tellLocks(k int) (c []spectrum.Cluster, ghosts int) {
	alphas, betas := t.hist.Alphas[:k], t.hist.Betas[:k]
	q, ok := spectrum.Gauss(alphas, betas)
	if !ok {
		return nil, 0
	}
	c = q.Clusters()
	var out []trace.Lock
	for _, l := range spectrum.Locks(c, alphas, betas, lowLocks, highLocks) {
		out = append(out, trace.Lock{Value: l.Value, Iter: l.Iter, Copies: l.Copies, Weight: l.Weight})
	}
	t.mu.Lock()
	t.hist.Locks = out
	t.mu.Unlock()
	return c, q.Ghosts(c)
}
