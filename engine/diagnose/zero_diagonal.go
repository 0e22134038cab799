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
		Claim: fmt.Sprintf("%d of %d diagonal entries %s zero (%s): jacobi, ssor, ic and ilu:0 cannot be built as A stands",
			zeros, f.N, verb(zeros, "is", "are"), c.list(f.DiagZeroRows, 3)),
		Evidence: []Evidence{{Quantity: "zero diagonal entries", Value: float64(zeros), Unit: fmt.Sprintf("of %d", f.N), Iteration: none, Rows: f.DiagZeroRows}}}
	c.aroundZeros(&g, f.Symmetric.Answer == inspect.Yes && zeros < f.N)
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

// aroundZeros tells what goes without a full diagonal: of a saddle system its
// blocks, of another one pivoting. A complete factorisation is not offered of a
// singular A, nor where it has broken down.
func (c Case) aroundZeros(g *Finding, saddle bool) {
	part, whole, direct := "factorise with pivoting, incompletely after scaling (ilutp)", " or completely (lu)", "richardson:1+lu"
	g.Try = []string{"scale/gmres:30+ilutp:1e-3,10,0.1"}
	if saddle {
		part, whole, direct = "treat it as a saddle system by blocks (minres with schur)", ", or factorise with pivots of order 1 and 2 (ldl)", "richardson:1+ldl"
		g.Try = []string{"minres+schur:diagonal,incomplete"}
	}
	g.Advice = part
	if c.Facts.Singular.Answer != inspect.Yes && !unbuilt(c, direct) {
		g.Advice += whole
		g.Try = append(g.Try, direct)
	}
}
