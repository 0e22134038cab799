package report

import (
	"fmt"

	"dwindle/engine/inspect"
)

// fieldText is what is known of one field of unknowns.
func fieldText(f inspect.FieldFacts) string {
	s := fmt.Sprintf("%s, norms %s to %s, diagonal %d > 0, %d < 0, %d zero; part of b %s", plural(f.Rows, "row", "rows"),
		sci(f.RowNorm.Min), sci(f.RowNorm.Max), f.DiagPositive, f.DiagNegative, f.DiagZero, sci(f.RHSNorm))
	if f.Block.Answer == inspect.Yes || f.Block.Answer == inspect.No {
		s += fmt.Sprintf("; block definite: %s (%s), %s", f.Block.Answer, f.Block.Certainty, f.Block.Why)
	}
	return s
}

type fieldFactsJSON struct {
	Name     string    `json:"name"`
	Rows     int       `json:"rows"`
	RHSNorm  number    `json:"rhs_norm"`
	RowNorm  [2]number `json:"row_norm"`
	Diagonal [2]number `json:"diagonal"`
	Positive int       `json:"diagonal_positive"`
	Negative int       `json:"diagonal_negative"`
	Zero     int       `json:"diagonal_zero"`
	Coupled  bool      `json:"coupled"`
	Definite factJSON  `json:"block_definite"`
}

// toFieldFacts lists the fields, never nil.
func toFieldFacts(f *inspect.Facts) []fieldFactsJSON {
	out := []fieldFactsJSON{}
	for _, g := range f.Fields {
		out = append(out, fieldFactsJSON{tame(g.Name), g.Rows, number(g.RHSNorm), ends(g.RowNorm), ends(g.Diag),
			g.DiagPositive, g.DiagNegative, g.DiagZero, g.Coupled, toFact(g.Block, f)})
	}
	return out
}
