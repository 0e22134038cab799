package choose

import (
	"cmp"
	"slices"

	"dwindle/engine/diagnose"
)

const (
	likeWork = 1.3   // ratio of counted work within which trials are taken for alike
	roughly  = 4.0   // the clock is trusted with this factor, however short the times,
	hiccup   = 0.001 // but with no seconds below: a pause of the machine is as long
	nearby   = 1.15  // times the first's seconds: those further off are not like it, however unsteady
)

// plainness are the names of methods from the plainest on, as one would
// rather carry them into a code.
var plainness = []string{"none", "jacobi", "cholesky", "ldl", "lu", "ssor", "sgs", "gs", "sor", "ic", "ilu", "mic", "milu",
	"richardson", "cg", "cr", "minres", "gmres", "bicgstab"}

// plainer compares two pairings by how plain they are: without a preparation
// first, then by preconditioner, then by solver.
func plainer(a, b string) int {
	p, q := split(a), split(b)
	return cmp.Or(len(p.preps)-len(q.preps), place(p.precond)-place(q.precond), place(p.solver)-place(q.solver))
}

// place is that of a method among the plain ones; its parameters do not count.
func place(method string) int {
	if i := slices.Index(plainness, bare(method)); i >= 0 {
		return i
	}
	return len(plainness)
}

// settle puts the trials that the clock does not tell apart from the first in
// an order of their own: by counted work, and of those of much the same work
// today's first, since nothing speaks for a change, then by how plain they are.
func settle(list []Ranked, findings []diagnose.Finding, goal string) {
	if len(list) == 0 || !list[0].Reached || goal == Memory {
		return
	}
	first := list[0]
	var head, rest []Ranked
	for i, r := range list {
		if i == 0 || alike(first, r, findings, goal) {
			head = append(head, r)
		} else {
			rest = append(rest, r)
		}
	}
	slices.SortStableFunc(head, func(a, b Ranked) int { return cmp.Compare(a.Work, b.Work) })
	same := 1
	for same < len(head) && head[same].Work <= likeWork*head[0].Work {
		same++
	}
	slices.SortStableFunc(head[:same], func(a, b Ranked) int {
		return cmp.Or(today(a)-today(b), plainer(a.Pairing, b.Pairing))
	})
	copy(list, append(head, rest...))
}

// today puts the pairing that the user's code runs first.
func today(r Ranked) int {
	if r.Today {
		return 0
	}
	return 1
}

// like says that times too short for the clock may be much the same.
func like(seconds, best float64) bool {
	return seconds < tooShort && seconds <= roughly*best+hiccup
}

// alike says that the clock does not tell r from the first. Of short times it
// does where both were repeated and their ranges lie apart.
func alike(first, r Ranked, findings []diagnose.Finding, goal string) bool {
	if !r.Reached || class(r, findings) != class(first, findings) || goal == Robust && r.Safe != first.Safe {
		return false
	}
	if first.Seconds < tooShort {
		return like(r.Seconds, first.Seconds) && (min(first.Runs, r.Runs) <= againTimes || r.Low <= first.High || r.Seconds <= nearby*first.Seconds)
	}
	return r.Low <= first.High && r.Seconds <= nearby*first.Seconds
}
