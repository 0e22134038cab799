package choose

import (
	"cmp"

	"dwindle/engine/inspect"
)

// kindsInOrder is the order in which kinds of preconditioners are tried under
// one solver: the ones that help most often first.
var kindsInOrder = []string{"amg", "ict", "ilut", "mic", "fsai", "ilu", "ic", "schur", "poly", "ras", "ilutp", "milu",
	"block-jacobi", "ssor", "jacobi", "sor", "gs", "spai", "none"}

// kinds are all preconditioners under the solver that fits the matrix, and
// direct solves.
func (r Race) kinds() []string {
	var out []string
	add := func(solver, precond string) {
		for _, c := range r.Candidates {
			if c.Solver == solver && c.Precond == precond && r.admissible(c) {
				out = append(out, r.prefix()+c.Pairing)
			}
		}
	}
	base := r.base()
	if base != "cg" {
		out = append(out, r.underMinres()...)
	}
	for i, k := range kindsInOrder {
		if i == 3 && couldBeRegular(r.Facts) {
			add("richardson", r.factorisation())
		}
		add(base, k)
	}
	return out
}

// prefix is the preparation that every pairing of a race needs.
func (r Race) prefix() string {
	if r.Facts.Unreachable.Answer == inspect.Yes {
		return "project/"
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
		case !reached(h) || h.Direct || h.SPDM:
		case s == usual:
			return usual
		case other == "":
			other = s
		}
	}
	return cmp.Or(other, usual)
}

// underMinres are the definite preconditioners of a symmetric indefinite A.
func (r Race) underMinres() []string {
	if !symmetric(r.Facts) {
		return nil
	}
	preconds := []string{"schur"}
	if r.Facts.DiagNegative+r.Facts.DiagZero+r.Facts.DiagMissing == 0 {
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
