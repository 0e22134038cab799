package choose

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

const (
	busyShare = 0.9   // CPU time over own time below which the machine was busy
	busyFrom  = 0.1   // own seconds from which CPU time is fine enough to tell
	tooShort  = 0.005 // seconds below which the clock cannot rank
	worth     = 0.1   // of a solve: gains below are taken for noise
)

// Rank orders the trials by the goal (empty: Seconds) and recommends the
// first, with what it rests on and what could overturn it. A trial may take
// limit iterations; 0: not known.
func Rank(f *inspect.Facts, trials []trace.History, findings []diagnose.Finding, goal string, limit int) Choice {
	c := Choice{Goal: goal, Outcomes: outcomes(trials, findings)}
	all := costs(trials)
	for i, h := range trials {
		if h.Stop == trace.Refused {
			continue
		}
		r := ranked(h, all[i], limit)
		r.Work, r.two, r.Today = work(f, h), h.TwoDoubles, h.Today
		r.shaky = h.Direct && f.Singular.Answer == inspect.Yes || h.UnsolvedRows > 0
		c.Ranked = append(c.Ranked, r)
	}
	slices.SortStableFunc(c.Ranked, func(a, b Ranked) int { return order(a, b, findings, goal) })
	settle(c.Ranked, findings, goal)
	breakEven(c.Ranked)
	if len(c.Ranked) == 0 || !c.Ranked[0].Reached {
		c.Reasons = utmost(f, trials)
		c.Doubts = doubts(f, trials, c)
		return c
	}
	first := c.Ranked[0]
	c.Pairing = first.Pairing
	c.Reasons = reasons(f, trials, c)
	c.Gain = gain(c.Ranked)
	c.Doubts = doubts(f, trials, c)
	return c
}

func reached(h trace.History) bool { return h.Stop == trace.Converged || h.Stop == trace.LeastSquares }

// inDouble says that a trial reached the target with x in one double.
func inDouble(h trace.History) bool { return reached(h) && !h.TwoDoubles }

func ranked(h trace.History, c cost, limit int) Ranked {
	nan := math.NaN()
	r := Ranked{Pairing: h.Pairing, Seconds: nan, Setup: c.setup, Runs: len(c.runs), Setups: c.setups, Iterations: h.Iterations,
		Memory: h.MemoryBytes, Reached: reached(h), BreakEven: nan, Low: nan, High: nan, Expected: nan, Beyond: nan, Safe: safe(h)}
	for i := range r.For {
		r.For[i] = nan
	}
	if !r.Reached {
		r.Expected, r.Beyond = expected(h, c, limit)
		return r
	}
	r.Seconds = c.own
	off := spread(h, c)
	solve := r.Seconds - r.Setup
	for i, k := range Sides {
		r.For[i] = r.Setup + float64(k)*further(h, solve)
	}
	r.For[0] = r.Seconds
	r.Low, r.High = math.Max(0, r.Seconds-off), r.Seconds+off
	return r
}

// order puts those that reached the target first, of these the ones without
// doubtful findings, then what the goal asks for.
func order(a, b Ranked, findings []diagnose.Finding, goal string) int {
	ka, kb := class(a, findings), class(b, findings)
	switch {
	case ka != kb:
		return ka - kb
	case ka == unreached:
		return lessFirst(a.Expected, b.Expected)
	case goal == Memory && a.Memory != b.Memory:
		return cmp.Compare(a.Memory, b.Memory)
	case goal == Robust && a.Safe != b.Safe:
		if a.Safe {
			return -1
		}
		return 1
	}
	return lessFirst(a.Seconds, b.Seconds)
}

// lessFirst orders numbers; those not known come last.
func lessFirst(a, b float64) int {
	switch {
	case math.IsNaN(a) && math.IsNaN(b):
		return 0
	case math.IsNaN(a):
		return 1
	case math.IsNaN(b):
		return -1
	}
	return cmp.Compare(a, b)
}

// unreached is the class of those that did not reach the target.
const unreached = 3

// class puts those first that nothing speaks against, then the doubtful ones,
// then those that keep x in two doubles, which nobody needs where one does.
func class(r Ranked, findings []diagnose.Finding) int {
	if !r.Reached {
		return unreached
	}
	if r.two {
		return 2
	}
	if r.shaky {
		return 1
	}
	for _, f := range findings {
		if f.Of(r.Pairing) && slices.Contains(doubtful, f.Rule) {
			return 1
		}
	}
	return 0
}

// doubtful are the rules that put a trial behind all that they do not speak
// of, although it reached the target: next time it may not.
var doubtful = []string{"unsolved-rows", "breakdown", "preconditioner-not-spd", "preconditioner-not-linear", "false-convergence"}

// breakEven fills in from how many right-hand sides each pairing beats the
// one with the cheapest set-up.
func breakEven(list []Ranked) {
	cheap := -1
	for i, r := range list {
		if r.Reached && !r.two && (cheap < 0 || r.Setup < list[cheap].Setup) {
			cheap = i
		}
	}
	for i := range list {
		r := &list[i]
		if cheap < 0 || !r.Reached || r.two || i == cheap {
			continue
		}
		q := list[cheap]
		gain := (q.Seconds - q.Setup) - (r.Seconds - r.Setup)
		if gain > worth*(q.Seconds-q.Setup) {
			r.BreakEven, r.Cheapest = math.Max(1, math.Ceil((r.Setup-q.Setup)/gain)), q.Pairing
		}
	}
}

func doubts(f *inspect.Facts, trials []trace.History, c Choice) []string {
	var out []string
	switch f.RHS {
	case "ones", "made", "unit":
		out = append(out, "counts on your own b may differ several-fold: give --rhs")
	}
	for _, h := range trials {
		if h.CPUShare < busyShare && h.OwnTime.Seconds() > busyFrom {
			out = append(out, "the machine was busy: pairings are compared by CPU time; trust the counts rather than the times")
			break
		}
	}
	if c.Pairing == "" {
		return out
	}
	out = append(out, notUnique(f)...)
	if c.Ranked[0].Seconds < tooShort {
		out = append(out, "the times are too short for the clock: ranked by counted work")
	} else {
		out = append(out, notToldApart(c)...)
	}
	out = append(out, overturned(c)...)
	out = append(out, unproved(f, trials, c)...)
	for _, h := range trials {
		if !h.Stop.Ended() {
			out = append(out, "trials are still going")
			break
		}
	}
	return out
}

// took prints a time.
func took(s float64) string { return trace.Took(s) }

// count prints a number of things.
func count(n int, thing string) string {
	if n == 1 {
		return "1 " + thing
	}
	return fmt.Sprintf("%d %ss", n, thing)
}
