package report

import (
	"fmt"
	"io"
	"strings"

	"dwindle/engine/inspect"
)

// Facts writes what is known of the system without any trial, as text: the
// facts with their certainty, the numbers behind them, and the findings that
// concern the system.
func Facts(w io.Writer, d Document) error {
	lines := hang("SYSTEM      ", systemText(d), Width)
	lines = append(lines, hang("FINGERPRINT ", orDash(plain(d.System.Fingerprint)), Width)...)
	lines = appendPart(lines, factLines(d.Facts))
	lines = appendPart(lines, itemLines(measureItems(d.Facts)))
	lines = appendPart(lines, itemLines(studyItems(d.Facts)))
	lines = appendPart(lines, findingLines(d.SystemOnly().Findings, d.Facts))
	return writeLines(w, lines)
}

// shorter are the names of facts that are too long for their column.
var shorter = map[string]string{
	"negative_eigenvalues":    "eigenvalues < 0",
	"symmetric_part_definite": "(A+A^T)/2 definite",
}

const factCols = 19 // of the name

// factLines are the facts with their answer; that of the symmetric part is told
// only where it is not A.
func factLines(f *inspect.Facts) []string {
	var lines []string
	for _, n := range allFacts(f) {
		if n.name == "symmetric_part_definite" && (f == nil || f.SymmetricPart.Answer == "") {
			continue
		}
		answer := string(n.fact.Answer)
		if answer == "" {
			answer = string(inspect.Unknown)
		}
		sure := string(n.fact.Certainty)
		if answer == string(inspect.Unknown) {
			sure = "" // of nothing
		}
		name, long := shorter[n.name]
		if !long {
			name = strings.ReplaceAll(n.name, "_", " ")
		}
		label := fmt.Sprintf("%-*s%-8s%-10s", factCols, name, clip(plain(answer), 7), clip(plain(sure), 9))
		lines = append(lines, hang(label, plain(n.fact.Why+rowText(n.fact.Rows, f)), Width)...)
	}
	return lines
}

// measureItems are the numbers that are no yes-or-no facts.
func measureItems(f *inspect.Facts) []labelled {
	if f == nil {
		return nil
	}
	items := []labelled{
		{"format", orDash(f.Format)},
		{"stored", fmt.Sprintf("%d, of them %d duplicates summed, %d zeros", f.Stored, f.Duplicates, f.ExplicitZeros)},
		{"right-hand side", fmt.Sprintf("%s, 2-norm %s", orDash(string(f.RHS)), sci(f.RHSNorm))},
	}
	if f.Complete && !f.MatrixFree {
		items = append(items,
			labelled{"entries a row", fmt.Sprintf("%.0f to %.0f, bandwidth %d", f.RowEntries.Min, f.RowEntries.Max, f.Bandwidth)},
			labelled{"row norms", fmt.Sprintf("%s to %s (rows %s, %s)", sci(f.RowNorm.Min), sci(f.RowNorm.Max), rowName(f.RowNorm.MinRow, f), rowName(f.RowNorm.MaxRow, f))},
			labelled{"column norms", fmt.Sprintf("%s to %s (columns %s, %s)", sci(f.ColNorm.Min), sci(f.ColNorm.Max), rowName(f.ColNorm.MinRow, f), rowName(f.ColNorm.MaxRow, f))},
			labelled{"Gershgorin", fmt.Sprintf("%s to %s", sci(f.Gershgorin.Min), sci(f.Gershgorin.Max))},
			labelled{"norms of A", fmt.Sprintf("inf %s, 1 %s, Frobenius %s", sci(f.NormInf), sci(f.NormOne), sci(f.NormFro))})
	}
	for _, g := range f.Fields {
		items = append(items, labelled{"field " + g.Name, fieldText(g)})
	}
	for _, n := range f.Notes {
		items = append(items, labelled{"note", n})
	}
	return items
}

// itemLines are items as text, each under its label.
func itemLines(items []labelled) []string {
	var out []string
	for _, it := range items {
		out = append(out, hang(fmt.Sprintf("%-*s", factCols, clip(plain(it.label), factCols-1)), plain(it.text), Width)...)
	}
	return out
}
