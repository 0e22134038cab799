package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// zeroDiagonal: zeros stand on the diagonal, so that no method that divides by
// it applies as A stands.
var zeroDiagonal = Rule{"zero-diagonal", func(c Case) []Finding {
	f := c.Facts
	zeros := f.DiagZero + f.DiagMissing
	if zeros == 0 || f.MatrixFree {
		return nil
	}
	g := Finding{Weight: Note, Certainty: inspect.Proved, Subject: OnSystem,
		Claim: fmt.Sprintf("%d of %d diagonal entries are zero (%s): jacobi, ssor, ic and ilu:0 cannot be built as A stands",
			zeros, f.N, c.list(f.DiagRows, 3)),
		Advice:   "permute A to a diagonal without zeros first (match), or factorise with pivoting",
		Try:      []string{"match/gmres:30+ilu:0", "gmres:30+ilutp"},
		Evidence: []Evidence{{Quantity: "zero diagonal entries", Value: float64(zeros), Unit: fmt.Sprintf("of %d", f.N), Iteration: none, Rows: f.DiagRows}}}
	if f.Symmetric.Answer == inspect.Yes && f.DiagZero+f.DiagMissing < f.N {
		g.Advice = "treat it as a saddle system by blocks (schur), or permute A to a diagonal without zeros (match)"
		g.Try = []string{"gmres:30+schur", "match/gmres:30+ilu:0"}
	}
	_, answered := quickest(c)
	for _, h := range c.Trials {
		if c.Race && answered && !h.Today {
			continue // nobody asked for it
		}
		if h.Stop == trace.BrokeDown && len(h.Notes.Broke) > 0 && h.Notes.Broke[0].Value == 0 {
			g.Weight = Drag
		}
	}
	return []Finding{g}
}}
