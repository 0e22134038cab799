package report

import (
	"fmt"
	"io"
	"strings"
)

// Markdown writes the report for an issue tracker: the head and the chart as
// they are in text, the trials as a table, findings and choice as lists.
func Markdown(w io.Writer, d Document) error {
	lines := []string{"# " + mark(orDash(d.System.Name)), "", "```text"}
	lines = append(append(lines, Head(d)...), "```")
	if chart := Chart(d); len(chart) > 0 {
		lines = append(append(append(lines, "", "```text"), chart...), "```")
	}
	lines = appendPart(lines, titled("Trials", trialTable(d)))
	lines = appendPart(lines, titled("Findings", findingList(d)))
	lines = appendPart(lines, titled("Ranking", rankingList(d.Choice)))
	lines = appendPart(lines, choiceList(d))
	lines = appendPart(lines, titled("The system", itemTable(append(measureItems(d.Facts), studyItems(d.Facts)...))))
	lines = appendPart(lines, deepTables(d.Trials))
	lines = appendPart(lines, titled("Predictions", outcomeList(d.Choice.Outcomes)))
	lines = appendPart(lines, titled("Measured with", itemTable(append(settingItems(d), labelled{"fingerprint", orDash(d.System.Fingerprint)}))))
	return writeLines(w, lines)
}

// mark is plain text with the signs escaped that Markdown would obey.
func mark(s string) string {
	return strings.NewReplacer(`\`, `\\`, "|", `\|`, "`", "\\`", "*", `\*`, "_", `\_`, "<", "&lt;", "[", `\[`, "]", `\]`, "#", `\#`).Replace(plain(s))
}

func trialTable(d Document) []string {
	if len(d.Trials) == 0 {
		return []string{"No trial has been run."}
	}
	lines := []string{"| # | pairing | state | iterations | products | true residual | condition at least | set-up | own time |",
		"| --- | --- | --- | --: | --: | --: | --: | --: | --: |"}
	for i, t := range d.Trials {
		name := mark(t.Pairing)
		if t.Today {
			name += " (today)"
		}
		n := numbers(t)
		lines = append(lines, fmt.Sprintf("| %c | %s | %s | %s |", digit(i), name, ending(t),
			strings.Join(n[:], " | ")))
	}
	return lines
}

func findingList(d Document) []string {
	var lines []string
	for _, f := range leading(d.Findings) {
		lines = append(lines, "- **"+mark(string(f.Weight))+"** "+mark(findingText(f)))
		for _, e := range f.Evidence {
			lines = append(lines, "  - "+mark(evidenceText(e, d.Facts)))
		}
		if f.Advice != "" {
			lines = append(lines, "  - advice: "+mark(f.Advice))
		}
		if len(f.Try) > 0 {
			lines = append(lines, "  - try: "+mark(strings.Join(f.Try, " or ")))
		}
	}
	return lines
}

func choiceList(d Document) []string {
	var lines []string
	for _, r := range d.Choice.Reasons {
		lines = append(lines, "- because: "+mark(r))
	}
	for _, r := range d.Choice.Doubts {
		lines = append(lines, "- doubt: "+mark(r))
	}
	for _, r := range d.Choice.Settings {
		lines = append(lines, "- set: "+mark(r))
	}
	for _, r := range d.Choice.RuledOut {
		lines = append(lines, "- ruled out: "+mark(r.Pairing+": "+r.Reason))
	}
	return lines
}
