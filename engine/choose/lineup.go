package choose

import "dwindle/engine/inspect"

// scaleLimit is the ratio of row norms from which a scaled variant joins.
const scaleLimit = 1e4

// longCycleUpTo is the order up to which a restart length of 100 is cheap.
const longCycleUpTo = 100_000

// LineUp chooses the pairings of a session from the facts: methods whose
// assumptions hold, each with the preconditioners that can be built, plain
// ones first so that a gain can be told. today is left to the caller.
func LineUp(f *inspect.Facts, list []Candidate, today string) []string {
	var out []string
	add := func(prep, solver, precond string) {
		for _, c := range list {
			if c.Solver == solver && c.Precond == precond && c.Refused == "" && prep+c.Pairing != today {
				out = append(out, prep+c.Pairing)
			}
		}
	}
	badly := f.RowNorm.Min > 0 && f.RowNorm.Max/f.RowNorm.Min >= scaleLimit
	diag := f.DiagZero+f.DiagMissing == 0
	switch {
	case f.MatrixFree:
		add("", "cg", "none")
		add("", "minres", "none")
		add("", "gmres", "none")
	case f.Symmetric.Answer == inspect.Yes && f.Unreachable.Answer == inspect.Yes:
		add("", "minres", "none")
		add("project/", "cg", "none")
		add("project/", "cg", "jacobi")
	case f.Symmetric.Answer == inspect.Yes && couldBeDefinite(f):
		add("", "cg", "none")
		add("", "cg", "jacobi")
		add("", "cg", "ssor")
		add("", "cg", "ic")
	case f.Symmetric.Answer == inspect.Yes:
		add("", "minres", "none")
		if badly {
			add("scale/", "minres", "none")
		}
		add("", "gmres", "none")
		if diag {
			add("", "gmres", "ilu")
			add("", "bicgstab", "ilu")
		}
	default:
		add("", "bicgstab", "none")
		add("", "gmres", "none")
		if diag {
			add("", "bicgstab", "ilu")
			add("", "gmres", "ilu")
		}
		if badly || !diag {
			add("scale/", "gmres", "none")
			add("scale/", "bicgstab", "none")
		}
		if !diag && f.N <= longCycleUpTo {
			out = append(out, "gmres:100+none")
		}
		if badly && diag {
			add("scale/", "gmres", "ilu")
		}
	}
	return out
}

// couldBeDefinite says that nothing speaks against cg: no proof that A is
// indefinite, or A is semi-definite.
func couldBeDefinite(f *inspect.Facts) bool {
	if f.DiagNegative+f.DiagZero+f.DiagMissing > 0 {
		return false
	}
	return f.PositiveDefinite.Answer != inspect.No || f.Semidefinite.Answer == inspect.Yes
}
