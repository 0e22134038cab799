package report

import (
	"fmt"
	"io"
	"slices"
	"strings"

	"dwindle/engine/choose"
	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// Text writes the report that is read and pasted: ASCII, at most Width
// columns, Head first, then the chart, the trials, the findings in full, and
// what the choice rests on.
func Text(w io.Writer, d Document) error {
	lines := Head(d)
	lines = appendPart(lines, Chart(d))
	lines = appendPart(lines, trialLines(d))
	lines = appendPart(lines, findingLines(d.Findings, d.Facts))
	lines = appendPart(lines, choiceLines(d))
	lines = appendPart(lines, headedLines("second look at the system", itemLines(studyItems(d.Facts))))
	lines = appendPart(lines, deepLines(d.Trials))
	lines = appendPart(lines, outcomeLines(d.Choice.Outcomes))
	lines = appendPart(lines, settingLines(d))
	return writeLines(w, lines)
}

// appendPart adds a part behind an empty line, if it has any line.
func appendPart(lines, part []string) []string {
	if len(part) == 0 {
		return lines
	}
	return append(append(lines, ""), part...)
}

func writeLines(w io.Writer, lines []string) error {
	_, err := io.WriteString(w, strings.Join(trimmed(lines), "\n")+"\n")
	return err
}

// trimmed takes the blanks off the ends of lines.
func trimmed(lines []string) []string {
	for i := range lines {
		lines[i] = strings.TrimRight(lines[i], " ")
	}
	return lines
}

// trialLines is the table of trials: each has a line with its digit and
// pairing, one with its state and numbers, and the reason of its ending where
// there is one, less what a trial before has said in the same words.
func trialLines(d Document) []string {
	if len(d.Trials) == 0 {
		return []string{"no trial has been run"}
	}
	const row = "%-24s%8s%9s%10s%9s%9s%9s"
	lines := []string{fmt.Sprintf(row, "trial", "its", "products", "true res", "cond >=", "set-up", "own")}
	said := map[string]bool{}
	for i, t := range d.Trials {
		name := fmt.Sprintf("%c %s", digit(i), orDash(plain(t.Pairing)))
		if t.Today {
			name += "  (today)"
		}
		lines = append(lines, clip(name, Width))
		n := numbers(t)
		state := fmt.Sprintf("  %c %s", t.Stop.Mark(), t.Stop)
		lines = append(lines, clip(fmt.Sprintf(row, state, n[0], n[1], n[2], n[3], n[4], n[5]), Width))
		if t.Reason != "" {
			lines = append(lines, hang("    ", plain(unsaid(t.Reason, said)), Width)...)
		}
	}
	return lines
}

// unsaid is a reason without a first clause that has been said already.
func unsaid(reason string, said map[string]bool) string {
	first, rest, more := strings.Cut(reason, "; ")
	if more && said[first] {
		return rest
	}
	said[first] = true
	return reason
}

// numbers are a trial's iterations, products, true residual, condition,
// set-up time and own time; "-" for all where it never began.
func numbers(t trace.History) [6]string {
	if len(t.Records) == 0 {
		return [6]string{"-", "-", "-", "-", "-", "-"}
	}
	condition := "-"
	if t.Condition.Of != "" && !t.Condition.Negative {
		condition = sci(t.Condition.Estimate)
	}
	return [6]string{fmt.Sprint(t.Iterations), fmt.Sprint(t.Products), sci(t.TrueResidual), condition,
		trace.Took(t.SetupTime.Seconds()), trace.Took(t.OwnTime.Seconds())}
}

// findingLines tells every finding in full, rows by the names that facts know.
func findingLines(fs []diagnose.Finding, facts *inspect.Facts) []string {
	if len(fs) == 0 {
		return nil
	}
	lines := []string{"findings"}
	for _, f := range leading(fs) {
		lines = append(lines, hang("- ", string(f.Weight)+" "+findingText(f), Width)...)
		for _, e := range f.Evidence {
			lines = append(lines, hang("    ", evidenceText(e, facts), Width)...)
		}
		if f.Advice != "" {
			lines = append(lines, hang("  advice: ", plain(f.Advice), Width)...)
		}
		if len(f.Try) > 0 {
			lines = append(lines, hang("  try: ", plain(strings.Join(f.Try, " or ")), Width)...)
		}
	}
	return lines
}

func evidenceText(e diagnose.Evidence, facts *inspect.Facts) string {
	s := e.Quantity + " = "
	switch {
	case e.Unit == "s":
		s += trace.Took(e.Value)
	case finite(e.Value):
		s += strings.TrimSpace(fmt.Sprintf("%.6g %s", e.Value, e.Unit))
	default:
		s += strings.TrimSpace("- " + e.Unit)
	}
	if e.Iteration >= 0 {
		s += fmt.Sprintf(", iteration %d", e.Iteration)
	}
	return plain(s + rowText(e.Rows, facts))
}

// rowText lists rows, counted from 1, with the names that facts know; many are
// cut short.
func rowText(rows []int, facts *inspect.Facts) string {
	const most = 8
	if len(rows) == 0 {
		return ""
	}
	s, comma := ", row", ""
	if len(rows) > 1 {
		s += "s"
	}
	if facts != nil && (facts.Names.Labels != nil || facts.Names.Fields != nil) {
		comma = ","
	}
	for i, r := range rows {
		if i == most {
			return s + fmt.Sprintf(" and %d more", len(rows)-most)
		}
		if i > 0 {
			s += comma
		}
		s += " " + rowName(r, facts)
	}
	return s
}

// rowName is the number of a row, counted from 1, with the name that facts
// know.
func rowName(row int, facts *inspect.Facts) string {
	if facts == nil {
		return fmt.Sprint(row + 1)
	}
	return facts.Names.Short(row)
}

// choiceLines gives the ranking with what it rests on.
func choiceLines(d Document) []string {
	var lines []string
	for i, r := range d.Choice.Ranked {
		if r.Reached {
			what := strings.Join(append(rankedWords(r), aheadWords(r)...), ", ")
			lines = append(lines, hang(fmt.Sprintf("%2d ", i+1), plain(r.Pairing)+": "+what, Width)...)
		}
	}
	if missed := notReached(d.Choice); missed != "" {
		lines = append(lines, hang(" - ", plain("not reached by "+missed), Width)...)
	}
	if len(lines) > 0 {
		lines = append([]string{"ranking, " + orderWords(d.Choice.Goal)}, lines...)
	}
	for _, r := range d.Choice.Reasons {
		lines = append(lines, hang("because: ", plain(r), Width)...)
	}
	for _, r := range d.Choice.Doubts {
		lines = append(lines, hang("doubt: ", plain(r), Width)...)
	}
	for _, s := range d.Choice.Settings {
		lines = append(lines, hang("set: ", plain(s), Width)...)
	}
	for _, r := range d.Choice.RuledOut {
		lines = append(lines, hang("ruled out: ", plain(r.Pairing+": "+r.Reason), Width)...)
	}
	return lines
}

// aheadWords tell the range thought likely and the time for many right-hand
// sides.
func aheadWords(r choose.Ranked) []string {
	var words []string
	if s := likely(r); s != "-" {
		words = append(words, "likely "+s)
	}
	for i, n := range choose.Sides {
		if n > 1 && r.For[i] > 0 {
			words = append(words, fmt.Sprintf("for %d b %s", n, trace.Took(r.For[i])))
		}
	}
	return words
}

// orderWords say what a ranking goes by.
func orderWords(goal string) string {
	switch goal {
	case choose.Memory:
		return "by memory of those that reached the tolerance"
	case choose.Robust:
		return "first what is safe by theory, then by own time to the tolerance"
	}
	return "by own time to the tolerance, near the first by counted work"
}

// notReached lists the pairings that did not reach the tolerance, with the time
// in which they were expected to, where that is known.
func notReached(c choose.Choice) string {
	var list []string
	for _, r := range c.Ranked {
		switch {
		case r.Reached:
		case r.Expected > 0 && finite(r.Expected):
			list = append(list, r.Pairing+" (expected in "+trace.Took(r.Expected)+")")
		case r.Beyond > 0:
			list = append(list, fmt.Sprintf("%s (not within its iterations: about %.0f are foreseen)", r.Pairing, r.Beyond))
		default:
			list = append(list, r.Pairing)
		}
	}
	return strings.Join(list, ", ")
}

// settingLines tells under what conditions the numbers were measured.
func settingLines(d Document) []string {
	lines := []string{"measured with"}
	lines = append(lines, itemLines(settingItems(d))...)
	lines = append(lines, hang("repeat with ", plain(d.Command), Width)...)
	return append(lines, hang("fingerprint ", orDash(plain(d.System.Fingerprint)), Width)...)
}

// settingItems are the conditions of the measurement: settings, machine,
// versions.
func settingItems(d Document) []labelled {
	s, m := d.Settings, d.Machine
	limits := "iterations at the default"
	if s.Iterations > 0 {
		limits = fmt.Sprintf("at most %d iterations", s.Iterations)
	}
	if s.Seconds > 0 {
		limits += ", " + exact(s.Seconds) + " s"
	}
	machine := orDash(m.CPU) + ", " + plural(m.Threads, "thread", "threads")
	if m.MemoryLimit > 0 {
		machine += ", memory limit " + memory(m.MemoryLimit)
	}
	tolerance := fmt.Sprintf("%s, rule %s", exact(s.Tol), orDash(s.StopRule))
	if s.FieldTols != "" {
		tolerance += ", and of fields " + s.FieldTols
	}
	items := []labelled{
		{"tolerance", tolerance},
		{"limits", limits},
		{"machine", machine},
		{"versions", fmt.Sprintf("dwindle %s, %s, seed %d", orDash(d.Version), orDash(d.Toolchain), s.Seed)}}
	if forms := secondForms(d.Trials); forms != "" {
		items = append(items, labelled{"products", "with A stored also by " + forms})
	}
	return items
}

// secondForms lists the forms of A beside plain rows that products ran on.
func secondForms(ts []trace.History) string {
	var forms []string
	for _, t := range ts {
		if t.Storage != "" && t.Storage != "rows" && !slices.Contains(forms, t.Storage) {
			forms = append(forms, t.Storage)
		}
	}
	return strings.Join(forms, ", ")
}
