package choose

import (
	"fmt"
	"slices"
	"strings"

	"dwindle/engine/inspect"
)

// Against says which fact speaks against a candidate that could run, or
// nothing.
func Against(f *inspect.Facts, c Candidate) string {
	switch {
	case f == nil:
		return ""
	case c.Symmetric && f.Symmetric.Answer == inspect.No:
		return "the solver assumes A symmetric, and it is not"
	case c.SymmetricA && f.Symmetric.Answer == inspect.No:
		return "the preconditioner assumes A symmetric, and it is not"
	case c.Definite && !couldBeDefinite(f):
		return "the solver assumes A positive definite, and it is not"
	case c.DefiniteA && !couldBeDefinite(f):
		return "the preconditioner assumes A positive definite, and it is not"
	case c.Direct && f.SingularAtSight():
		return "A is singular: it has no complete factorisation"
	}
	return ""
}

// RuledOut lists what the facts rule out, one entry a cause.
func RuledOut(f *inspect.Facts, list []Candidate) []Ruled {
	var causes []string
	by := map[string][]Candidate{}
	for _, c := range list {
		why := c.Cause
		if why == "" {
			why = c.Refused
		}
		if why == "" {
			why = Against(f, c)
		}
		if why == "" {
			continue
		}
		if by[why] == nil {
			causes = append(causes, why)
		}
		by[why] = append(by[why], c)
	}
	out := make([]Ruled, len(causes))
	for i, why := range causes {
		out[i] = Ruled{Pairing: group(by[why]), Reason: why}
	}
	return out
}

// group names many pairings in short: their solvers, +, their
// preconditioners.
func group(list []Candidate) string {
	var solvers, preconds []string
	for _, c := range list {
		if !slices.Contains(solvers, c.Solver) {
			solvers = append(solvers, c.Solver)
		}
		if !slices.Contains(preconds, c.Precond) {
			preconds = append(preconds, c.Precond)
		}
	}
	if len(list) == 1 {
		return list[0].Pairing
	}
	s := fmt.Sprintf("%s + %s", some(solvers, 6, "solvers"), some(preconds, 12, "preconditioners"))
	if len(list) < len(solvers)*len(preconds) {
		s = fmt.Sprintf("%d pairings of %s", len(list), s)
	}
	return s
}

// some names up to most.
func some(names []string, most int, what string) string {
	if len(names) <= most {
		return strings.Join(names, ", ")
	}
	return fmt.Sprintf("%d %s", len(names), what)
}
