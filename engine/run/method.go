package run

import (
	"fmt"
	"slices"
	"strings"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
	"dwindle/engine/precond"
	"dwindle/engine/prepare"
	"dwindle/engine/trace"
)

// Prep is one preparation with its parameters.
type Prep struct {
	Entry  prepare.Entry
	Values linear.Values
}

// Method is a pairing resolved against the catalogues.
type Method struct {
	Name          string // canonical
	Preps         []Prep
	Solver        krylov.Entry
	SolverValues  linear.Values
	Precond       precond.Entry
	PrecondValues linear.Values
	From          string // the file M is built from; empty: from A
}

// Parse reads one pairing (without ranges) and resolves it. The error names
// what is not known, with what is.
func Parse(text string) (Method, error) {
	var m Method
	p, err := linear.ParsePairing(text)
	if err != nil {
		return m, err
	}
	canon := linear.Pairing{From: p.From}
	m.From = p.From
	for _, q := range p.Preps {
		e, ok := prepare.Lookup(q.Name)
		if !ok {
			return m, unknown("preparation", q.Name, names(prepare.Catalogue, func(e prepare.Entry) string { return e.Name }))
		}
		v, err := linear.Resolve(q.Name, e.Params, q.Args)
		if err != nil {
			return m, err
		}
		m.Preps = append(m.Preps, Prep{e, v})
		canon.Preps = append(canon.Preps, linear.Part{Name: q.Name, Args: v.Args()})
	}
	var ok bool
	if m.Solver, ok = krylov.Lookup(p.Solver.Name); !ok {
		return m, unknown("solver", p.Solver.Name, names(krylov.Catalogue, func(e krylov.Entry) string { return e.Name }))
	}
	if m.SolverValues, err = linear.Resolve(p.Solver.Name, m.Solver.Params, p.Solver.Args); err != nil {
		return m, err
	}
	if m.Precond, ok = precond.Lookup(p.Precond.Name); !ok {
		return m, unknown("preconditioner", p.Precond.Name, names(precond.Catalogue, func(e precond.Entry) string { return e.Name }))
	}
	if m.PrecondValues, err = linear.Resolve(p.Precond.Name, m.Precond.Params, p.Precond.Args); err != nil {
		return m, err
	}
	canon.Solver = linear.Part{Name: p.Solver.Name, Args: m.SolverValues.Args()}
	canon.Precond = linear.Part{Name: p.Precond.Name, Args: m.PrecondValues.Args()}
	m.Name = canon.String()
	return m, nil
}

func names[E any](list []E, name func(E) string) []string {
	out := make([]string, len(list))
	for i, e := range list {
		out[i] = name(e)
	}
	return out
}

// unknown says that there is no such method, with the name that was probably
// meant, or else with all there are.
func unknown(what, name string, known []string) error {
	if near := nearest(name, known); near != "" {
		return fmt.Errorf("no %s is called %q; did you mean %s?", what, name, near)
	}
	return fmt.Errorf("no %s is called %q; there are %s", what, name, strings.Join(known, ", "))
}

// inTwoDoubles says whether the method keeps x in two doubles.
func (m Method) inTwoDoubles() bool { return m.Solver.InTwoDoubles(m.SolverValues) }

// watched returns the norm the solver watches in the prepared system. Without
// a preconditioner every norm of M⁻¹r is that of r.
func (m Method) watched() trace.Norm {
	w := m.Solver.Watched(m.SolverValues)
	if m.Precond.Name == "none" && (w == trace.PrecondNorm || w == trace.LeftNorm) {
		return trace.TwoNorm
	}
	return w
}

// norm returns the norm the method's own number is in.
func (m Method) norm() trace.Norm {
	w := m.watched()
	if w == trace.TwoNorm && slices.ContainsFunc(m.Preps, func(p Prep) bool { return p.Entry.Scales }) {
		return trace.ScaledNorm
	}
	return w
}
