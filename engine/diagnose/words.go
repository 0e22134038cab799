package diagnose

import (
	"fmt"
	"strings"

	"dwindle/engine/trace"
)

// none is the iteration of evidence that belongs to none.
const none = -1

// num prints a number in three digits.
func num(x float64) string { return fmt.Sprintf("%.3g", x) }

// name tells a row as its owner does: "row 4321 = 1042:rz", or by number.
func (c Case) name(row int) string { return c.Facts.Names.Row(row) }

// list tells at most k rows so.
func (c Case) list(rows []int, k int) string { return c.Facts.Names.List(rows, k) }

// carriers are the rows that together carry at least half of the shares that
// are known, the largest first, and how much they carry.
func carriers(shares []trace.RowShare) (rows []int, part float64) {
	for _, s := range shares {
		if part >= 0.5 && s.Share < 0.1 {
			break
		}
		rows = append(rows, s.Row)
		part += s.Share
	}
	return rows, part
}

// number is one piece of evidence that belongs to no iteration.
func number(quantity string, value float64, unit string) Evidence {
	return Evidence{Quantity: quantity, Value: value, Unit: unit, Iteration: none}
}

// seconds prints a time.
func seconds(s float64) string { return trace.Took(s) }

// solved says whether a trial ended with an answer.
func solved(h trace.History) bool {
	return h.Stop == trace.Converged || h.Stop == trace.LeastSquares
}

// inDouble says whether a trial ended with an answer that one double an unknown
// holds.
func inDouble(h trace.History) bool { return solved(h) && !h.TwoDoubles }

// cut takes a canonical pairing apart: preparations with their slash, solver,
// preconditioner. A file that the preconditioner names may hold either sign.
func cut(pairing string) (prep, solver, precond string) {
	rest := pairing
	plus := strings.IndexByte(rest, '+')
	if i := strings.IndexByte(rest, '/'); i >= 0 && (plus < 0 || i < plus) {
		prep, rest = rest[:i+1], rest[i+1:]
	}
	solver, precond, ok := strings.Cut(rest, "+")
	if !ok {
		precond = "none"
	}
	return prep, solver, precond
}

// events returns the events of one kind.
func events(h trace.History, k trace.Kind) []trace.Event {
	var out []trace.Event
	for _, e := range h.Events {
		if e.Kind == k {
			out = append(out, e)
		}
	}
	return out
}

// steps prints a number of iterations.
func steps(n int) string { return count(n, "iteration") }
