package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
)

// empty: rows or columns of A hold nothing but zeros.
var empty = Rule{"empty-row", func(c Case) []Finding {
	f := c.Facts
	if f.EmptyRowCount+f.EmptyColCount == 0 {
		return nil
	}
	g := Finding{Weight: Drag, Certainty: inspect.Proved, Subject: OnSystem,
		Advice: "delete these rows and columns, or put 1 on their diagonal and 0 into b: then the rest can be solved",
		Evidence: []Evidence{{Quantity: "empty rows", Value: float64(f.EmptyRowCount), Iteration: none, Rows: f.EmptyRows},
			{Quantity: "empty columns", Value: float64(f.EmptyColCount), Iteration: none, Rows: f.EmptyCols}}}
	columns := fmt.Sprintf("%s %s no entry (%s of %s): nothing determines %s", count(f.EmptyColCount, "column"), verb(f.EmptyColCount, "holds", "hold"),
		verb(f.EmptyColCount, "that", "those"), c.list(f.EmptyCols, 4), verb(f.EmptyColCount, "its unknown", "their unknowns"))
	rows := fmt.Sprintf("%s %s no entry (%s)", count(f.EmptyRowCount, "row"), verb(f.EmptyRowCount, "holds", "hold"), c.list(f.EmptyRows, 4))
	switch {
	case f.EmptyRowCount == 0:
		g.Claim = columns
	case f.EmptyColCount == 0:
		g.Claim = rows + ": whatever x is, they give 0"
	case f.Symmetric.Answer == inspect.Yes:
		g.Claim = rows + fmt.Sprintf(": nothing determines %s", verb(f.EmptyRowCount, "its unknown", "their unknowns"))
	default:
		g.Claim = rows + "; " + columns
	}
	return []Finding{g}
}}

// allEmpty says that what the weaker finding counts are no more than the empty
// rows.
func allEmpty(strong, weak Finding) bool {
	return len(weak.Evidence) > 0 && len(strong.Evidence) > 0 && weak.Evidence[0].Value <= strong.Evidence[0].Value
}
