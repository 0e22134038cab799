package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// falseFactor is how far the true residual must miss the target before a stop
// on the method's own number is called false.
const falseFactor = 10

// falseConvergence: the method's own number met the target while b−Ax was far
// from it, and not only as far as the accuracy floor holds it.
var falseConvergence = Rule{"false-convergence", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		for _, e := range events(h, trace.FalseStop) {
			if solved(h) && !asked(c, h) || !(e.Value > falseFactor*c.Tol) || h.FloorHits > 0 && !solved(h) && e.Value <= falseFactor*h.BestTrue {
				continue
			}
			f := Finding{Weight: Drag, Certainty: inspect.Measured, Subject: h.Pairing,
				Claim: fmt.Sprintf("its own number (%s norm) meets the target at it %d with %s; the true relative residual there is %s, %.1f decades above the target",
					h.Norm, e.Iter, num(e.Scale), num(e.Value), math.Log10(e.Value/c.Tol)),
				Advice: "test ||b-Ax||/||b|| itself" + askFor(c.Tol*c.Tol/e.Value),
				Evidence: []Evidence{
					{Quantity: "own number", Value: e.Scale, Unit: string(h.Norm), Iteration: int(e.Iter)},
					{Quantity: "true relative residual", Value: e.Value, Iteration: int(e.Iter)}}}
			if h.Stop.Ended() && !solved(h) {
				f.Weight = Blocker
				f.Claim += fmt.Sprintf("; it never came below %s", num(h.BestTrue))
			}
			out = append(out, f)
			break
		}
	}
	return out
}}

// finest is the smallest tolerance that is worth asking for in any norm: a few
// times the rounding unit.
const finest = 1e-15

// askFor says what tolerance of the method's own number would have done, if
// there is one.
func askFor(tol float64) string {
	if !(tol >= finest) {
		return ""
	}
	return fmt.Sprintf(", or ask for %.0e in this norm", tol)
}

// unsolvedRows: converged in the norm, but single rows are not. To scale is of
// use where a row is in small units; else the target of the whole is too large
// for it.
var unsolvedRows = Rule{"unsolved-rows", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		if h.Stop != trace.Converged || h.UnsolvedRows == 0 {
			continue
		}
		rows, worst := rowsOf(h.WorstRows)
		_, solver, precond := cut(h.Pairing)
		f := Finding{Weight: Drag, Certainty: inspect.Measured, Subject: h.Pairing,
			Claim: fmt.Sprintf("converged in the norm, but %s %s unsolved: componentwise error %s, worst in %s%s",
				count(h.UnsolvedRows, "row"), verb(h.UnsolvedRows, "is", "are"), num(worst), c.list(rows, 4), c.inField(rows)),
			Advice: "the norm of b hides what is missing in these rows: ask for a smaller tolerance, or per field (--fields, --tol-field)",
			Evidence: []Evidence{{Quantity: "componentwise backward error", Value: worst,
				Iteration: h.Iterations, Rows: rows}}}
		if h.SmallRows > 0 {
			f.Advice = "these rows are in small units: scale the rows, or ask per field (--fields, --tol-field)"
			f.Try = []string{"scale/" + solver + "+" + precond}
		}
		out = append(out, f)
	}
	return out
}}

func rowsOf(s []trace.RowShare) (rows []int, worst float64) {
	for _, r := range s {
		rows = append(rows, r.Row)
		worst = math.Max(worst, r.Share)
	}
	return rows, worst
}
