package tui

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"dwindle/engine/inspect"
)

// factRow is one line of the facts.
type factRow struct{ label, answer, sure, why string }

// line is the row in w cells; the picked one carries ">".
func (r factRow) line(picked bool, w int) string {
	mark := "  "
	if picked {
		mark = "> "
	}
	answer := 22
	if w < 60 {
		answer = 18
	}
	rest := r.why
	if r.sure != "" && w < 60 {
		rest = r.sure // the reason stands below, in full
	} else if r.sure != "" {
		rest = strings.TrimSuffix(r.sure+", "+r.why, ", ")
	}
	return left(mark+left(r.label, 19)+" "+left(r.answer, answer)+" "+rest, w)
}

// factRows lists everything known about the system, most asked first.
func factRows(f *inspect.Facts, g glyphs) []factRow {
	if f == nil {
		return nil
	}
	rows := append(sizeRows(f), answerRows(f)...)
	rows = append(rows, numberRows(f)...)
	rows = append(rows, fieldFacts(f)...)
	rows = append(rows, rhsRows(f)...)
	for _, note := range f.Notes {
		rows = append(rows, factRow{label: "note", why: note})
	}
	for i, r := range rows {
		rows[i] = factRow{g.clean(r.label), g.clean(r.answer), g.clean(r.sure), g.clean(r.why)}
	}
	return rows
}

// sizeRows are the plain numbers of the system and its file.
func sizeRows(f *inspect.Facts) []factRow {
	rows := []factRow{{"unknowns", count(f.N), "", ""}}
	if f.MatrixFree {
		return append(rows, factRow{"entries", none, "", "given as products only"})
	}
	each := ""
	if f.N > 0 {
		each = fmt.Sprintf("%.1f a row, %s", float64(f.Entries)/float64(f.N), rangeText(f.RowEntries, value, f))
	}
	rows = append(rows, factRow{"entries", count(f.Entries), "", each})
	if f.Format != "" {
		rows = append(rows, factRow{"stored in the file", count(f.Stored), "", fmt.Sprintf("%s duplicates, %s explicit zeros; %s",
			count(f.Duplicates), count(f.ExplicitZeros), f.Format)})
	}
	if f.Digits > 0 {
		open := "every value came through exactly"
		if f.Delta > 0 {
			open = "each entry is known to " + sci(f.Delta) + " of itself"
		}
		rows = append(rows, factRow{"digits in the file", value(float64(f.Digits)), "", open})
	}
	return append(rows, factRow{"bandwidth", count(f.Bandwidth), "", ""})
}

// labelledFact is a fact under its words.
type labelledFact struct {
	label string
	fact  inspect.Fact
}

// answerRows are the facts with a yes or a no.
func answerRows(f *inspect.Facts) []factRow {
	list := []labelledFact{
		{"symmetric", f.Symmetric}, {"pattern symmetric", f.PatternSymmetric},
		{"positive definite", f.PositiveDefinite}, {"negative definite", f.NegativeDefinite},
		{"singular", f.Singular}, {"row sums zero", f.RowSumsZero}, {"column sums zero", f.ColSumsZero},
		{"b out of reach", f.Unreachable}, {"one triangle only", f.TriangleOnly},
	}
	if f.SymmetricPart.Answer != "" {
		list = slices.Insert(list, 3, labelledFact{"(A+A^T)/2 definite", f.SymmetricPart})
	}
	var rows []factRow
	for _, l := range list {
		answer := string(l.fact.Answer)
		if answer == "" {
			answer = none
		}
		sure := string(l.fact.Certainty)
		if l.fact.Answer == inspect.Unknown {
			sure = ""
		}
		rows = append(rows, factRow{l.label, answer, sure, withRows(l.fact.Why, l.fact.Rows, f)})
	}
	return rows
}

// numberRows are the ranges and counts.
func numberRows(f *inspect.Facts) []factRow {
	if f.MatrixFree {
		return nil
	}
	rows := []factRow{
		diagonalRow(f),
		{"diagonal size", pair(f.Diag), "", decadesText(f.Diag, f)},
		{"row norms", pair(f.RowNorm), "", decadesText(f.RowNorm, f)},
		{"column norms", pair(f.ColNorm), "", decadesText(f.ColNorm, f)},
		{"norms of A", sci(f.NormInf), "", fmt.Sprintf("max norm; Frobenius %s, one %s", sci(f.NormFro), sci(f.NormOne))},
		{"asymmetry", sci(f.Asymmetry), "", "||A-A^T||_F / ||A||_F; decides nothing"},
		{"Gershgorin", pair(f.Gershgorin), "", fmt.Sprintf("ends from rows %s and %s", rowName(f.Gershgorin.MinRow, f), rowName(f.Gershgorin.MaxRow, f))},
		{"dominant rows", share(f.Dominant, f.N), "", fmt.Sprintf("%s of them strictly", count(f.StrictlyDominant))},
		{"components", count(f.Components), "", ""},
		{"empty rows, columns", fmt.Sprintf("%d, %d", f.EmptyRowCount, f.EmptyColCount), "", withRows("", f.EmptyRows, f)},
	}
	if f.Singletons > 0 {
		rows = append(rows, factRow{"decoupled rows", count(f.Singletons), "",
			withRows("diagonal "+pair(f.SingletonDiag)+", the others "+pair(f.RestDiag), f.SingletonRows, f)})
	}
	return rows
}

// diagonalRow tells the signs of the diagonal.
func diagonalRow(f *inspect.Facts) factRow {
	answer := "mixed"
	switch f.N {
	case f.DiagPositive:
		answer = "all positive"
	case f.DiagNegative:
		answer = "all negative"
	}
	why := fmt.Sprintf("%d > 0, %d < 0, %d zero, %d missing", f.DiagPositive, f.DiagNegative, f.DiagZero, f.DiagMissing)
	return factRow{"diagonal signs", answer, "", withRows(why, f.DiagRows, f)}
}

// fieldFacts are what is known of each field of unknowns.
func fieldFacts(f *inspect.Facts) []factRow {
	var rows []factRow
	for _, g := range f.Fields {
		why := fmt.Sprintf("norms %s; diagonal %d > 0, %d < 0, %d zero; part of b %s",
			pair(g.RowNorm), g.DiagPositive, g.DiagNegative, g.DiagZero, sci(g.RHSNorm))
		if g.Block.Answer == inspect.Yes || g.Block.Answer == inspect.No {
			why += fmt.Sprintf("; block definite: %s (%s), %s", g.Block.Answer, g.Block.Certainty, g.Block.Why)
		}
		rows = append(rows, factRow{"field " + g.Name, count(g.Rows) + " rows", "", why})
	}
	return rows
}

// rhsRows tell of the right-hand side.
func rhsRows(f *inspect.Facts) []factRow {
	why := "norm " + sci(f.RHSNorm)
	if f.ZeroRHS {
		why = "b = 0: x = 0"
	}
	return []factRow{{"right-hand side", string(f.RHS), "", why}}
}

// pair writes the ends of a range.
func pair(r inspect.Range) string { return sci(r.Min) + " .. " + sci(r.Max) }

// rangeText writes a range with the rows that attain its ends.
func rangeText(r inspect.Range, number func(float64) string, f *inspect.Facts) string {
	return fmt.Sprintf("min %s (row %s), max %s (row %s)", number(r.Min), rowName(r.MinRow, f), number(r.Max), rowName(r.MaxRow, f))
}

// decadesText says how far a range of magnitudes stretches, and in which
// rows it ends.
func decadesText(r inspect.Range, f *inspect.Facts) string {
	if !(r.Min > 0) || !(r.Max >= r.Min) {
		return ""
	}
	return fmt.Sprintf("%.1f decades, rows %s and %s", math.Log10(r.Max/r.Min), rowName(r.MinRow, f), rowName(r.MaxRow, f))
}

// share writes part of n in per cent.
func share(part, n int) string {
	if n == 0 {
		return none
	}
	return fmt.Sprintf("%.0f %%", 100*float64(part)/float64(n))
}

// withRows adds row numbers, counted from 1, to a phrase, with the names that
// facts know.
func withRows(text string, rows []int, facts *inspect.Facts) string {
	if len(rows) == 0 {
		return text
	}
	words := make([]string, 0, 5)
	for _, r := range rows[:min(len(rows), 4)] {
		words = append(words, rowName(r, facts))
	}
	if len(rows) > 4 {
		words = append(words, "...")
	}
	between := " "
	if facts != nil && (facts.Names.Labels != nil || facts.Names.Fields != nil) {
		between = ", "
	}
	return strings.TrimPrefix(text+"; rows "+strings.Join(words, between), "; ")
}

// rowName is the number of a row, counted from 1, with the name that facts
// know.
func rowName(row int, facts *inspect.Facts) string {
	if facts == nil {
		return fmt.Sprint(row + 1)
	}
	return facts.Names.Short(row)
}
