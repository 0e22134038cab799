package engine

import (
	"fmt"
	"sort"
	"strings"

	"dwindle/engine/choose"
	"dwindle/engine/krylov"
	"dwindle/engine/linear"
	"dwindle/engine/precond"
	"dwindle/engine/run"
)

// predictUpTo is the order up to which the list of candidates tells what an
// exact factorisation takes: beyond, the prediction itself takes a while, and
// is left to the trial.
const predictUpTo = 20_000

// candidates describes every solver with every preconditioner, at default
// parameters, for a system that offers h. Where memory is positive, what each
// takes is predicted, once a preconditioner, and held against it.
func candidates(h run.Have, memory int64) []choose.Candidate {
	bytes := map[string]int64{} // of each preconditioner; -1: not predicted
	var list []choose.Candidate
	for _, e := range krylov.Catalogue {
		for _, p := range precond.Catalogue {
			if p.InUserUnits {
				continue // needs a file: typed, not listed
			}
			m, err := run.Parse(e.Name + "+" + p.Name)
			if err != nil {
				panic("engine: " + err.Error()) // a mistake in a catalogue
			}
			if _, known := bytes[p.Name]; !known {
				bytes[p.Name] = predicted(m, h, memory)
			}
			list = append(list, candidate(m, h, memory, bytes[p.Name]))
		}
	}
	place := func(c choose.Candidate) int { // the list is by solver already
		switch {
		case c.Refused != "":
			return 2
		case c.Baseline:
			return 1
		}
		return 0
	}
	sort.SliceStable(list, func(i, j int) bool { return place(list[i]) < place(list[j]) })
	return list
}

// predicted is the memory of the method's preconditioner, or -1.
func predicted(m run.Method, h run.Have, memory int64) int64 {
	if memory <= 0 || m.Precond.Exact && h.Order() > predictUpTo {
		return -1
	}
	return m.PrecondMemory(h)
}

func candidate(m run.Method, h run.Have, memory, precond int64) choose.Candidate {
	c := choose.Candidate{Pairing: m.Name, Solver: m.Solver.Name, Precond: m.Precond.Name,
		Memory: -1, Refused: m.Refuse(h),
		Symmetric: m.Solver.Assumes&linear.AssumesSymmetric != 0,
		Definite:  m.Solver.Assumes&linear.AssumesDefinite != 0,
		SPDM:      m.Solver.Assumes&linear.AssumesSymmetricM != 0,
		Baseline:  m.Solver.Baseline, Summary: m.Solver.Title + ", " + m.Precond.Title,
		Direct:     m.Precond.Exact && m.From == "",
		SymmetricA: m.Precond.Assumes&linear.AssumesSymmetric != 0,
		DefiniteA:  m.Precond.Assumes&linear.AssumesDefinite != 0}
	if precond >= 0 {
		c.Memory = precond + m.SolverMemory(h)
	}
	for _, p := range m.Preps {
		c.Preps = append(c.Preps, p.Entry.Name)
	}
	switch {
	case c.Refused != "" && m.Solver.Needs&linear.NeedsTransposeM != 0 && !m.Precond.Transposes && strings.Contains(c.Refused, m.Precond.Name+" has none"):
		c.Cause = "the solver needs products with the transpose of M, and this preconditioner has none"
	case strings.HasPrefix(c.Refused, m.Precond.Name+" needs "):
		c.Cause = "the preconditioner" + strings.TrimPrefix(c.Refused, m.Precond.Name)
	case c.Refused != "":
	case c.SPDM && !m.Precond.Symmetric:
		c.Refused = fmt.Sprintf("%s needs a symmetric preconditioner; %s is not", c.Solver, c.Precond)
		c.Cause = "the solver needs a symmetric preconditioner, and this one is not"
	case memory > 0 && c.Memory > memory:
		c.Refused = fmt.Sprintf("needs %s, more than the limit %s", run.Bytes(c.Memory), run.Bytes(memory))
		c.Cause = "it needs more memory than the limit " + run.Bytes(memory)
	}
	return c
}
