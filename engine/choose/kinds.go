package choose

import (
	"cmp"
	"slices"
	"strings"

	"dwindle/engine/inspect"
)

// kindsInOrder is the order in which kinds of preconditioners are tried under
// one solver: the ones that help most often first.
var kindsInOrder = []string{"amg", "ict", "ilut", "mic", "fsai", "ilu", "ic", "schur", "poly", "ras", "ilutp", "milu",
	"block-jacobi", "ssor", "jacobi", "sor", "spai", "none"}

// kinds are all preconditioners under the solver that fits the matrix, and
// direct solves.
func (r Race) kinds() []string {
	var out []string
	add := func(solver, precond string) {
		for _, c := range r.Candidates {
			if c.Solver == solver && c.Precond == precond && r.admissible(c) {
				out = append(out, r.prepared(c)...)
			}
		}
	}
	base := r.base()
	if base != "cg" {
		out = append(out, r.underMinres()...)
	}
	if !fullDiagonal(r.Facts) && !symmetric(r.Facts) && r.prefix() != projected {
		for _, c := range r.Candidates {
			if c.Solver == "gmres" && c.Precond == "ilutp" && r.admissible(c) {
				out = append(out, "scale/"+c.Pairing) // pivots make up for the zeros
			}
		}
	}
	for i, k := range kindsInOrder {
		if i == 3 && couldBeRegular(r.Facts) && r.prefix() != projected {
			add("richardson", r.factorisation())
		}
		if base == "cg" && slices.Contains(twins, k) {
			continue
		}
		add(base, k)
	}
	return out
}

// twins are what their symmetric counterparts do as well on a definite A.
var twins = []string{"ilu", "milu"}

// byPivots are the preconditioners that divide by pivots taken as they come.
var byPivots = []string{"ilu", "ilut", "milu", "ras", "block-jacobi"}

// prepared is the candidate with the preparation that it needs here: where the
// diagonal holds zeros, what divides by pivots has A permuted first, and one that
// fills in is tried as A stands as well. It is nothing where the preparation does
// not go with it.
func (r Race) prepared(c Candidate) []string {
	prefix := r.prefix()
	if !fullDiagonal(r.Facts) && slices.Contains(byPivots, c.Precond) {
		if prefix == projected || c.Symmetric {
			return nil // a permutation of rows alone takes the symmetry
		}
		matched := strings.Replace(prefix, "/", ",", 1) + "match/" + c.Pairing
		if c.Precond == "ilut" { // what fills in may make the pivots
			return []string{matched, prefix + c.Pairing}
		}
		return []string{matched}
	}
	return []string{prefix + c.Pairing}
}

// Preparations that all pairings of a race are given.
const (
	projected = "project/"
	pruned    = "prune/"
)

// prefix is the preparation that every pairing of a race needs.
func (r Race) prefix() string {
	switch {
	case r.Facts.Unreachable.Answer == inspect.Yes:
		return projected
	case r.Facts.MostlyZeros():
		return pruned
	}
	return ""
}

// base is the solver under which preconditioners are compared: one that takes
// any, and has reached the target where one has.
func (r Race) base() string {
	if symmetric(r.Facts) && couldBeDefinite(r.Facts) {
		return "cg"
	}
	const usual = "bicgstab"
	other := ""
	for _, h := range r.Trials {
		s := bare(split(h.Pairing).solver)
		switch {
		case !inDouble(h) || h.Direct || r.takesDefiniteM(s):
		case s == usual:
			return usual
		case other == "":
			other = s
		}
	}
	return cmp.Or(other, usual)
}

// takesDefiniteM says that a solver assumes M symmetric positive definite.
func (r Race) takesDefiniteM(solver string) bool {
	return slices.ContainsFunc(r.Candidates, func(c Candidate) bool { return c.Solver == solver && c.SPDM })
}

// underMinres are the definite preconditioners of a symmetric indefinite A.
func (r Race) underMinres() []string {
	if !symmetric(r.Facts) {
		return nil
	}
	preconds := []string{"schur"}
	if r.Facts.DiagNegative == 0 && fullDiagonal(r.Facts) {
		preconds = append(preconds, "jacobi")
	}
	var out []string
	for _, p := range preconds {
		for _, c := range r.Candidates {
			if c.Solver == "minres" && c.Precond == p && r.admissible(c) {
				out = append(out, r.prefix()+c.Pairing)
			}
		}
	}
	return out
}

func (r Race) factorisation() string {
	switch {
	case symmetric(r.Facts) && couldBeDefinite(r.Facts):
		return "cholesky"
	case symmetric(r.Facts):
		return "ldl"
	}
	return "lu"
}

func symmetric(f *inspect.Facts) bool { return f.Symmetric.Answer == inspect.Yes }
