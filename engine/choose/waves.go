package choose

import (
	"cmp"
	"slices"
	"strconv"
	"strings"

	"dwindle/engine/trace"
)

const (
	leads   = 2.0 // times the best's time up to which a trial leads
	leaders = 3   // so many preconditioners, and solvers, are looked at more closely
)

// untried returns the next pairings of a race, at most so many: first what
// findings about the system offer, then every kind of preconditioner under one
// solver, then the other solvers with the preconditioners that lead, then
// parameters around the leaders, preparations of them, and last what is unlike
// anything tried. What would break down in its set-up as others have is left out,
// and a direct solve while others are expected sooner.
func (r Race) untried(most int) []string {
	var out []string
	for _, wave := range []func() []string{r.offers, r.kinds, r.solvers, r.parameters, r.preparations, r.unlike} {
		for _, p := range wave() {
			if len(out) == most {
				return out
			}
			if !r.Tried[p] && p != r.Today && !slices.Contains(out, p) && !r.fated(p) && !r.waits(p) {
				out = append(out, p)
			}
		}
		if len(out) > 0 {
			return out // what comes next depends on how these do
		}
	}
	return out
}

// offers are what findings about the system offer to try.
func (r Race) offers() []string { return r.Offers }

// admissible says that nothing known speaks against the candidate.
func (r Race) admissible(c Candidate) bool {
	return c.Refused == "" && Against(r.Facts, c) == "" && (!c.Baseline || c.Direct)
}

// leading are the trials that reached the target in about the best's time,
// the best first.
func (r Race) leading() []*trace.History {
	best, found := r.best()
	if !found {
		return nil
	}
	var out []*trace.History
	for i := range r.Trials {
		if h := &r.Trials[i]; inDouble(*h) && h.OwnTime.Seconds() <= leads*best.OwnTime.Seconds() {
			out = append(out, h)
		}
	}
	slices.SortStableFunc(out, func(a, b *trace.History) int { return cmp.Compare(a.OwnTime, b.OwnTime) })
	return out
}

// solvers are all other solvers with the preconditioners that lead.
func (r Race) solvers() []string {
	var out []string
	seen := map[string]bool{}
	for _, h := range r.leading() {
		p := split(h.Pairing)
		if h.Direct || seen[bare(p.precond)] || len(seen) == leaders {
			continue
		}
		seen[bare(p.precond)] = true
		for _, s := range solversInOrder {
			for _, c := range r.Candidates {
				if c.Solver == s && c.Precond == bare(p.precond) && r.admissible(c) && !r.sharesFate(s, p) {
					q := split(c.Pairing)
					out = append(out, parts{p.preps, q.solver, p.precond}.String())
				}
			}
		}
	}
	return out
}

// kin are the solvers that rest on the same products with a shadow vector as
// bicgstab, and break down where it does.
var kin = []string{"cgs", "tfqmr", "bicgstabl"}

// sharesFate says that a solver is kin of bicgstab, which has broken down with
// these preparations and this preconditioner, or at its first steps with any.
func (r Race) sharesFate(solver string, p parts) bool {
	if !slices.Contains(kin, solver) {
		return false
	}
	for _, h := range r.Trials {
		q := split(h.Pairing)
		if bare(q.solver) == "bicgstab" && h.Stop == trace.BrokeDown && len(h.Records) > 0 &&
			(h.Iterations <= 2 || q.preps == p.preps && q.precond == p.precond) {
			return true
		}
	}
	return false
}

// solversInOrder is the order in which solvers are tried with what leads.
var solversInOrder = []string{"cg", "minres", "bicgstab", "gmres", "idr", "bicgstabl", "cr", "cgs", "tfqmr", "qmr", "fcg", "gmresdr", "dcg", "gcr", "symmlq"}

// parameters are the neighbours of the leaders' parameters.
func (r Race) parameters() []string {
	var out []string
	for i, h := range r.leading() {
		if i == leaders {
			break
		}
		p := split(h.Pairing)
		for _, q := range neighbours(p.precond) {
			out = append(out, parts{p.preps, p.solver, q}.String())
		}
		for _, q := range neighbours(p.solver) {
			if h.Iterations <= min(cycleOf(p.solver), cycleOf(q)) {
				continue // neither restarts: the same iterates
			}
			out = append(out, parts{p.preps, q, p.precond}.String())
		}
	}
	return out
}

// cycleOf is the restart length of a method; 0 of one that does not restart.
func cycleOf(solver string) int {
	name, arg, _ := strings.Cut(solver, ":")
	if name != "gmres" && name != "gcr" {
		return 0
	}
	m, _ := strconv.Atoi(arg)
	return m
}

// preparations are orders and scalings for the best that is no direct solve.
func (r Race) preparations() []string {
	for _, h := range r.leading() {
		p := split(h.Pairing)
		if h.Direct || p.preps != "" {
			continue
		}
		var out []string
		if ordered(bare(p.precond)) {
			out = append(out, "rcm/"+h.Pairing)
		}
		if uneven(r.Facts) && (badlyScaled(r.Facts) || !symmetric(r.Facts)) {
			out = append(out, "scale/"+h.Pairing)
		}
		if !fullDiagonal(r.Facts) {
			out = append(out, "match/"+h.Pairing)
		}
		return out
	}
	return nil
}

// ordered says that the order of the rows changes what the preconditioner is,
// or how fast it is applied.
func ordered(precond string) bool {
	return slices.Contains([]string{"ic", "mic", "ict", "ilu", "milu", "ilut", "ilutp", "ssor", "sgs", "sor", "gs", "ras", "block-jacobi"}, precond)
}

// unlike are pairings of another kind than all that a race has seen so far,
// and, where nothing has converged, the strongest there are.
func (r Race) unlike() []string {
	var out []string
	pairs := [][2]string{{"gmres", "ilut"}, {"bicgstab", "ilut"}, {"gmresdr", "ilu"}, {"idr", "jacobi"}, {"gmres", "amg"}, {"lsmr", "none"}, {"cgnr", "none"}}
	if _, found := r.best(); !found {
		pairs = append(pairs, [2]string{"minres", "jacobi"}, [2]string{"gmres", "ilutp"}, [2]string{"gmres", "ras"}, [2]string{"idr", "ilu"}, [2]string{"gmres", "none"})
	}
	for _, p := range pairs {
		for _, c := range r.Candidates {
			if c.Solver == p[0] && c.Precond == p[1] && r.admissible(c) {
				out = append(out, r.prepared(c)...)
			}
		}
	}
	return out
}
