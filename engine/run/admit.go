package run

import (
	"fmt"

	"dwindle/engine/linear"
)

// Have is what a system offers to methods; found once.
type Have struct {
	n        int
	matrix   *linear.CSR
	transpo  bool
	zeroDiag int  // rows whose diagonal entry is zero or missing
	zeroRow  int  // the first of them
	split    bool // the unknowns fall into two blocks
	names    linear.RowNames
}

// Order returns the order of the system.
func (h Have) Order() int { return h.n }

// Offers finds what the system offers.
func Offers(s linear.System) Have {
	h := Have{n: s.N(), matrix: s.Matrix(), names: s.RowNames()}
	_, h.transpo = linear.As[linear.Transposer](s.A)
	if h.matrix == nil {
		return h
	}
	h.split = s.Second != nil
	d := make([]float64, h.n)
	h.matrix.Diagonal(d)
	for i := h.n - 1; i >= 0; i-- {
		if d[i] == 0 {
			h.zeroDiag++
			h.zeroRow = i
		}
	}
	h.split = h.split || h.zeroDiag > 0 && h.zeroDiag < h.n
	return h
}

// Refuse returns why the method cannot run on such a system, empty if it can.
func (m Method) Refuse(h Have) string {
	for _, p := range m.Preps {
		if why := lacking(p.Entry.Name, p.Entry.Needs, h); why != "" {
			return why
		}
	}
	if why := lacking(m.Solver.Name, m.Solver.Needs, h); why != "" {
		return why
	}
	if why := m.refuseTwoDoubles(h); why != "" {
		return why
	}
	if m.Solver.Needs&linear.NeedsTransposeM != 0 && m.Precond.Name != "none" && !m.Precond.Transposes {
		return m.Solver.Name + " needs products with the transpose of M; " + m.Precond.Name + " has none"
	}
	if m.Solver.Assumes&linear.AssumesFixedM != 0 && !m.Precond.Fixed {
		return m.Precond.Name + " changes from step to step: only flexible methods may use it"
	}
	if len(m.Preps) > 0 && (m.Precond.InUserUnits || m.From != "") {
		return "a matrix of your own belongs to A as it stands, not to a prepared one"
	}
	if m.From != "" {
		return "" // what M needs, it needs of the other matrix
	}
	return lacking(m.Precond.Name, m.Precond.Needs, h)
}

// refuseTwoDoubles says why x cannot be kept in two doubles: the residual needs
// the entries, and those that a preparation has rounded anew belong to another
// solution. Reorderings carry both doubles back.
func (m Method) refuseTwoDoubles(h Have) string {
	if !m.inTwoDoubles() {
		return ""
	}
	for _, p := range m.Preps {
		if p.Entry.Rounds {
			return p.Entry.Name + " rounds A or b anew: x in two doubles would solve another system"
		}
	}
	return lacking(m.Solver.Name+" in two doubles", linear.NeedsEntries, h)
}

func lacking(name string, needs linear.Has, h Have) string {
	switch {
	case needs&linear.NeedsEntries != 0 && h.matrix == nil:
		return name + " needs the entries of A; only products are given"
	case needs&linear.NeedsSplit != 0 && !h.split:
		return name + " needs two blocks of unknowns: some zeros on the diagonal, or --split FILE"
	case needs&linear.NeedsTranspose != 0 && !h.transpo:
		return name + " needs products with the transpose"
	case needs&linear.NeedsDiagonal != 0 && h.zeroDiag > 0:
		return fmt.Sprintf("%s needs a nonzero diagonal: %d of %d entries are zero, the first in %s",
			name, h.zeroDiag, h.n, h.names.Row(h.zeroRow))
	}
	return ""
}

// Memory returns the bytes the method takes beyond the system itself, known
// before anything is allocated.
func (m Method) Memory(h Have) int64 {
	total := m.SolverMemory(h) + m.PrecondMemory(h)
	if h.matrix == nil {
		return total
	}
	for _, p := range m.Preps {
		if p.Entry.Estimate != nil {
			total += p.Entry.Estimate(h.matrix, p.Values)
		}
	}
	return total
}

// SolverMemory returns the bytes of the solver's own vectors.
func (m Method) SolverMemory(h Have) int64 {
	if m.Solver.Memory == nil {
		return 0
	}
	return m.Solver.Memory(h.n, m.SolverValues)
}

// PrecondMemory returns the bytes of the preconditioner. For an exact one this
// predicts its factorisation.
func (m Method) PrecondMemory(h Have) int64 {
	if h.matrix == nil || m.Precond.Estimate == nil {
		return 0
	}
	b, _ := m.Precond.Estimate(h.matrix, m.PrecondValues)
	return b
}
