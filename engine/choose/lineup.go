package choose

import "dwindle/engine/inspect"

const (
	// scaleLimit is the ratio of row norms from which a scaled variant joins.
	scaleLimit = 1e4
	// even is the ratio of norms up to which equilibration changes nothing.
	even = 4
	// shortCycleUpTo is the order up to which the usual restart length never
	// restarts.
	shortCycleUpTo = 30
	// longCycleUpTo is the order up to which a restart length of 100 is cheap.
	longCycleUpTo = 100_000
	// directUpTo is the order up to which a direct solve joins.
	directUpTo = 100_000
	// multilevelFrom is the order from which a multilevel method joins.
	multilevelFrom = 1000
)

// LineUp chooses the pairings of a session from the facts: methods whose
// assumptions hold, each with the preconditioners that can be built, plain
// ones first so that a gain can be told, a direct solve where it is small.
// today is left to the caller.
func LineUp(f *inspect.Facts, list []Candidate, today string) []string {
	l := &lineUp{facts: f, list: list, today: today}
	switch {
	case f.MatrixFree:
		l.add("", "cg", "none")
		l.add("", "minres", "none")
		l.add("", "gmres", "none")
	case f.Symmetric.Answer == inspect.Yes && f.Unreachable.Answer == inspect.Yes:
		l.add("", "minres", "none")
		l.add("project/", "cg", "none")
		l.add("project/", "cg", "jacobi")
	case f.Symmetric.Answer == inspect.Yes && couldBeDefinite(f):
		l.definite()
	case f.Symmetric.Answer == inspect.Yes:
		l.indefinite()
	default:
		l.nonsymmetric()
	}
	return l.pairings
}

// lineUp collects pairings.
type lineUp struct {
	facts    *inspect.Facts
	list     []Candidate
	today    string
	pairings []string
}

// add joins the pairing where the catalogue has it and nothing refuses it.
func (l *lineUp) add(prep, solver, precond string) {
	for _, c := range l.list {
		if c.Solver == solver && c.Precond == precond && c.Refused == "" && prep+c.Pairing != l.today {
			l.pairings = append(l.pairings, prep+c.Pairing)
		}
	}
}

// direct joins a direct solve where the system is small and may be regular.
func (l *lineUp) direct(factorisation string) {
	if l.facts.N <= directUpTo && couldBeRegular(l.facts) {
		l.add("", "richardson", factorisation)
	}
}

func (l *lineUp) badlyScaled() bool { return badlyScaled(l.facts) }

func badlyScaled(f *inspect.Facts) bool {
	return f.RowNorm.Min > 0 && f.RowNorm.Max/f.RowNorm.Min >= scaleLimit
}

// uneven says that equilibration would change A at all.
func uneven(f *inspect.Facts) bool {
	return f.RowNorm.Max > even*f.RowNorm.Min || f.ColNorm.Max > even*f.ColNorm.Min
}

func fullDiagonal(f *inspect.Facts) bool { return f.DiagZero+f.DiagMissing == 0 }

func couldBeRegular(f *inspect.Facts) bool { return !f.SingularAtSight() }

func (l *lineUp) fullDiagonal() bool { return fullDiagonal(l.facts) }

func (l *lineUp) definite() {
	l.add("", "cg", "none")
	l.add("", "cg", "jacobi")
	l.add("", "cg", "ssor")
	l.add("", "cg", "ic")
	if l.facts.N >= multilevelFrom {
		l.add("", "cg", "amg")
	}
	l.direct("cholesky")
}

func (l *lineUp) indefinite() {
	l.add("", "minres", "none")
	if l.badlyScaled() {
		l.add("scale/", "minres", "none")
	}
	l.add("", "gmres", "none")
	if l.fullDiagonal() {
		l.add("", "gmres", "ilu")
		l.add("", "bicgstab", "ilu")
	}
	l.direct("ldl")
}

func (l *lineUp) nonsymmetric() {
	l.add("", "bicgstab", "none")
	l.add("", "gmres", "none")
	if l.fullDiagonal() {
		l.add("", "bicgstab", "ilu")
		l.add("", "gmres", "ilu")
	}
	if l.badlyScaled() || !l.fullDiagonal() && uneven(l.facts) {
		l.add("scale/", "gmres", "none")
		l.add("scale/", "bicgstab", "none")
	}
	switch {
	case l.fullDiagonal() && l.badlyScaled():
		l.add("scale/", "gmres", "ilu")
	case !l.fullDiagonal():
		l.add("match/", "gmres", "ilu")
		if l.facts.N > shortCycleUpTo && l.facts.N <= longCycleUpTo {
			l.pairings = append(l.pairings, "gmres:100+none")
		}
	}
	l.direct("lu")
}

// couldBeDefinite says that nothing speaks against cg: no proof that A is
// indefinite, or A is semi-definite.
func couldBeDefinite(f *inspect.Facts) bool {
	if f.DiagNegative+f.DiagZero+f.DiagMissing > 0 {
		return false
	}
	return f.PositiveDefinite.Answer != inspect.No || f.Semidefinite.Answer == inspect.Yes
}
