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
	lines = appendPart(lines, measureLines(d.Facts))
	lines = appendPart(lines, findingLines(d.SystemOnly().Findings, d.Facts))
	return writeLines(w, lines)
}

func factLines(f *inspect.Facts) []string {
	var lines []string
	for _, n := range allFacts(f) {
		answer := string(n.fact.Answer)
		if answer == "" {
			answer = string(inspect.Unknown)
		}
		label := fmt.Sprintf("%-18s%-8s%-10s", strings.ReplaceAll(n.name, "_", " "),
			clip(plain(answer), 7), clip(plain(string(n.fact.Certainty)), 9))
		lines = append(lines, hang(label, plain(n.fact.Why+rowText(n.fact.Rows, f)), Width)...)
	}
	return lines
}

// measureLines are the numbers that are no yes-or-no facts.
func measureLines(f *inspect.Facts) []string {
	if f == nil {
		return nil
	}
	lines := []string{
		"format            " + orDash(plain(f.Format)),
		fmt.Sprintf("stored            %d, of them %d duplicates summed, %d zeros", f.Stored, f.Duplicates, f.ExplicitZeros),
		fmt.Sprintf("right-hand side   %s, 2-norm %s", orDash(plain(string(f.RHS))), sci(f.RHSNorm)),
	}
	if f.Complete && !f.MatrixFree {
		lines = append(lines,
			fmt.Sprintf("entries a row     %.0f to %.0f, bandwidth %d", f.RowEntries.Min, f.RowEntries.Max, f.Bandwidth),
			fmt.Sprintf("row norms         %s to %s (rows %s, %s)", sci(f.RowNorm.Min), sci(f.RowNorm.Max), rowName(f.RowNorm.MinRow, f), rowName(f.RowNorm.MaxRow, f)),
			fmt.Sprintf("column norms      %s to %s (columns %s, %s)", sci(f.ColNorm.Min), sci(f.ColNorm.Max), rowName(f.ColNorm.MinRow, f), rowName(f.ColNorm.MaxRow, f)),
			fmt.Sprintf("Gershgorin        %s to %s", sci(f.Gershgorin.Min), sci(f.Gershgorin.Max)),
			fmt.Sprintf("norms of A        inf %s, 1 %s, Frobenius %s", sci(f.NormInf), sci(f.NormOne), sci(f.NormFro)))
	}
	var out []string
	for _, l := range lines {
		out = append(out, hang(l[:18], l[18:], Width)...)
	}
	for _, n := range f.Notes {
		out = append(out, hang("note              ", plain(n), Width)...)
	}
	return out
}
