package engine

import (
	"fmt"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
	"dwindle/engine/prepare"
	"dwindle/engine/report"
	"dwindle/engine/run"
	"dwindle/engine/trace"
)

// vectors collects what can be shown behind the findings: free directions of
// A, the unreachable part of b, directions of negative curvature, and of the
// chosen trial, else the last, the residual and the slowest direction.
func vectors(sys linear.System, d report.Document) []report.Vector {
	var out []report.Vector
	if d.Facts != nil && d.Facts.Study != nil {
		for i, v := range d.Facts.Study.Null {
			if v.Vector != nil {
				out = append(out, nullVector(i+1, v))
			}
		}
		for i, v := range d.Facts.Study.Left {
			if v.Vector != nil {
				out = append(out, leftVector(i+1, v))
			}
		}
	}
	if f := d.Facts; f != nil && f.Unreachable.Answer == inspect.Yes {
		sys.Null, sys.LeftNull = inspect.ZeroDirections(f), inspect.LeftDirections(f)
		if u := unreachable(sys); u != nil {
			out = append(out, report.Vector{Name: "unreachable", Values: u, Comment: fmt.Sprintf(
				"part of b that no x can reach, in the left null space as far as it is known: %.6g of the norm of b", linear.Norm2(u)/linear.Norm2(sys.B))})
		}
	}
	for _, t := range d.Trials {
		if v := t.Vectors[run.CurvatureVector]; v != nil {
			out = append(out, report.Vector{Name: report.VectorName(run.CurvatureVector, t.Pairing), Values: v,
				Comment: "direction p of negative curvature that " + t.Pairing + " met" + rayleigh(sys, v)})
		}
	}
	if t := shownTrial(d); t != nil {
		out = append(out, lastVectors(sys, *t)...)
	}
	return unlike(out)
}

// unlike gives vectors of one name a number each, so that no file takes the
// place of another.
func unlike(vs []report.Vector) []report.Vector {
	seen := map[string]int{}
	for i := range vs {
		name := vs[i].Name
		if seen[name]++; seen[name] > 1 {
			vs[i].Name = fmt.Sprintf("%s-no%d", name, seen[name])
		}
	}
	return vs
}

func nullVector(k int, v inspect.NullDirection) report.Vector {
	s := fmt.Sprintf("direction %d that A nearly maps to zero: to %.3g of its size after equilibration", k, v.Quotient)
	if v.Rigid != "" {
		s += ", a " + v.Rigid
	}
	return report.Vector{Name: report.VectorName("null", fmt.Sprint(k)), Values: v.Vector, Comment: s}
}

func leftVector(k int, v inspect.NullDirection) report.Vector {
	return report.Vector{Name: report.VectorName("left", fmt.Sprint(k)), Values: v.Vector, Comment: fmt.Sprintf(
		"direction y %d that the transpose of A maps to zero: to %.3g of its size after equilibration; what b has along it no x can reach", k, v.Quotient)}
}

// unreachable is the part of b in the left null space that the sums of A and
// the vectors of the system show; nil where it is no more than rounding.
func unreachable(s linear.System) []float64 {
	part, _ := prepare.OutOfReach(s)
	if part == nil || linear.Norm2(part) <= 1e-12*linear.Norm2(s.B) {
		return nil
	}
	return part
}

// shownTrial is the trial whose end is shown: the choice, else the last that ended.
func shownTrial(d report.Document) *trace.History {
	var last *trace.History
	for i := range d.Trials {
		t := &d.Trials[i]
		if t.Vectors[run.ResidualVector] == nil {
			continue
		}
		if last = t; t.Pairing == d.Choice.Pairing {
			break
		}
	}
	return last
}

// lastVectors are the residual of a trial and what it reduced slowest.
func lastVectors(sys linear.System, t trace.History) []report.Vector {
	r, how := t.Vectors[run.ResidualVector], t.Stop.String()
	if t.TwoDoubles {
		how += " with x in two doubles"
	}
	out := []report.Vector{{Name: report.VectorName(run.ResidualVector, t.Pairing), Values: r, Comment: fmt.Sprintf(
		"b-Ax at the end of %s (%s after %d its), of 2-norm %.6g", t.Pairing, how, t.Iterations, linear.Norm2(r))}}
	if v := t.Vectors[run.SlowestVector]; v != nil {
		what := "what the last fifth to third of the run still changed in x"
		if t.Stop == trace.Converged {
			what = "error that was left a fifth to a third of the run before its end: what it reduces slowest"
		}
		out = append(out, report.Vector{Name: report.VectorName(run.SlowestVector, t.Pairing), Values: v,
			Comment: fmt.Sprintf("difference of the iterates of %s at the end and on the way, %s%s", t.Pairing, what, rayleigh(sys, v))})
	}
	return out
}

// rayleigh adds the Rayleigh quotient of A at v to a comment, where A is at hand: of a
// reopened session it is not, until a pairing is added.
func rayleigh(sys linear.System, v []float64) string {
	if sys.A == nil {
		return ""
	}
	av := make([]float64, len(v))
	sys.A.Apply(av, v)
	return fmt.Sprintf("; p'Ap/p'p = %.6g", linear.Dot(v, av)/linear.Dot(v, v))
}
