package linear

import (
	"fmt"
	"strings"
)

// RowNames are the names that the owner of a system gave its rows. The zero
// value knows no names: rows are told by number alone. Rows count from 0 here
// and from 1 in what is printed.
type RowNames struct {
	Labels  []string // one a row, printable; empty where a row has none; nil if none were given
	Fields  []string // the fields of unknowns; nil if none are known
	FieldOf []int32  // the field of each row
}

// RowNames returns the names of the system's rows.
func (s System) RowNames() RowNames { return RowNames{s.Labels, s.Fields, s.FieldOf} }

// Label returns the label of a row, empty where it has none.
func (r RowNames) Label(row int) string {
	if row < 0 || row >= len(r.Labels) {
		return ""
	}
	return r.Labels[row]
}

// Field returns the name of the field of a row, empty where it is not known.
func (r RowNames) Field(row int) string {
	if row < 0 || row >= len(r.FieldOf) {
		return ""
	}
	return r.Fields[r.FieldOf[row]]
}

// Short tells a row without the word: "4321", "4321 = 1042:rz" where it has a
// label, or "4321 (rz)" where only its field is known.
func (r RowNames) Short(row int) string {
	if l := r.Label(row); l != "" {
		return fmt.Sprintf("%d = %s", row+1, l)
	}
	if f := r.Field(row); f != "" {
		return fmt.Sprintf("%d (%s)", row+1, f)
	}
	return fmt.Sprint(row + 1)
}

// Row tells a row: "row 4321 = 1042:rz".
func (r RowNames) Row(row int) string { return "row " + r.Short(row) }

// List tells at most most rows: "rows 1, 2, ..."; one row as Row does.
func (r RowNames) List(rows []int, most int) string {
	if len(rows) == 1 {
		return r.Row(rows[0])
	}
	words := make([]string, 0, most+1)
	for i, row := range rows {
		if i == most {
			words = append(words, "...")
			break
		}
		words = append(words, r.Short(row))
	}
	return "rows " + strings.Join(words, ", ")
}

// Both tells a few rows in a sentence: "rows 1, 2 and 3".
func (r RowNames) Both(rows ...int) string {
	words := make([]string, len(rows))
	for i, row := range rows {
		words[i] = r.Short(row)
	}
	switch k := len(words) - 1; {
	case k < 0:
		return "no row"
	case k == 0:
		return "row " + words[0]
	default:
		return "rows " + strings.Join(words[:k], ", ") + " and " + words[k]
	}
}
