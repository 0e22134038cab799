package engine

import (
	"fmt"
	"strconv"
	"strings"

	"dwindle/engine/linear"
	"dwindle/engine/run"
)

// settingsOf says a pairing in the terms of its methods, a line each, so that
// it can be carried into any code: what is done to A first, the iteration, the
// preconditioner, when to stop.
func (s *Session) settingsOf(pairing string) []string {
	m, err := run.Parse(pairing)
	if err != nil {
		return nil
	}
	var out []string
	for i, p := range m.Preps {
		out = append(out, fmt.Sprintf("before, step %d: %s%s", i+1, p.Entry.Title, terms(p.Entry.Params, p.Values)))
	}
	solver := "solver: " + m.Solver.Title + terms(m.Solver.Params, m.SolverValues)
	switch {
	case m.Solver.InTwoDoubles(m.SolverValues):
		solver += "; x is the unevaluated sum of two doubles, and b - Ax is evaluated anew in twice the working precision at every step"
	case m.Precond.Exact && m.From == "":
		solver += "; one step with a complete factorisation solves the system"
	}
	precond := "preconditioner: " + m.Precond.Title + terms(m.Precond.Params, m.PrecondValues)
	if m.PrecondValues.Is("store", "single") {
		precond += "; the factors are computed in double precision, their off-diagonal entries rounded to single and kept so, products and sums are in double"
	}
	if m.From != "" {
		precond += "; built from " + m.From
	}
	return append(out, solver, precond, "stop: "+s.stopTerms(), "start: "+s.startTerms())
}

// terms lists parameters by name and value.
func terms(params []linear.Param, v linear.Values) string {
	var words []string
	for _, p := range params {
		if p.Quiet && p.Name == "parts" && v.Int(p.Name) == 1 {
			continue // x in one double, as anywhere
		}
		words = append(words, p.Name+" "+value(p, v))
	}
	if len(words) == 0 {
		return ""
	}
	return " (" + strings.Join(words, ", ") + ")"
}

func value(p linear.Param, v linear.Values) string {
	switch p.Kind {
	case linear.Choice:
		return v.Choice(p.Name)
	case linear.Path:
		return v.Path(p.Name)
	}
	return strconv.FormatFloat(v.Real(p.Name), 'g', -1, 64)
}

func (s *Session) stopTerms() string {
	tol := strconv.FormatFloat(s.opt.Tol, 'g', -1, 64)
	switch run.StopRule(s.opt.StopRule) {
	case run.StopInitial:
		return "|b - Ax| <= " + tol + " |b - Ax0|, 2-norms, measured afresh"
	case run.StopBackward:
		return "|b - Ax| <= " + tol + " (|A||x| + |b|), maximum norms, measured afresh"
	case run.StopAbsolute:
		return "|b - Ax| <= " + tol + ", 2-norm, measured afresh"
	}
	return "|b - Ax| <= " + tol + " |b|, 2-norms, measured afresh"
}

func (s *Session) startTerms() string {
	if s.opt.Guess != "" {
		return "the given guess"
	}
	return "zero"
}
