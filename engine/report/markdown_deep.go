package report

import (
	"fmt"
	"strings"

	"dwindle/engine/choose"
	"dwindle/engine/trace"
)

// titled puts a heading above lines, if there are any.
func titled(title string, lines []string) []string {
	return headedLines("## "+title, appendPart(nil, lines))
}

// rankingList is the ranking as a table.
func rankingList(c choose.Choice) []string {
	if len(c.Ranked) == 0 {
		return nil
	}
	head, rule := "| pairing | to tolerance | likely | set-up | iterations | memory |", "| --- | --: | --: | --: | --: | --: |"
	for _, n := range choose.Sides {
		head, rule = head+fmt.Sprintf(" for %d b |", n), rule+" --: |"
	}
	lines := []string{head + " pays from |", rule + " --: |"}
	for _, r := range c.Ranked {
		if r.Reached {
			lines = append(lines, "| "+mark(r.Pairing)+" | "+strings.Join(rankedCells(r), " | ")+" |")
		}
	}
	if len(lines) == 2 {
		lines = nil
	}
	if missed := notReached(c); missed != "" {
		lines = appendPart(lines, []string{"Not reached by " + mark(missed) + "."})
	}
	return lines
}

// itemTable is a table of labelled texts.
func itemTable(items []labelled) []string {
	if len(items) == 0 {
		return nil
	}
	lines := []string{"| | |", "| --- | --- |"}
	for _, it := range items {
		lines = append(lines, "| "+mark(it.label)+" | "+mark(it.text)+" |")
	}
	return lines
}

// deepTables tell what each trial left beyond the table.
func deepTables(ts []trace.History) []string {
	var lines []string
	list, outpaced := singled(ts)
	for _, i := range list {
		if items := trialItems(ts[i]); len(items) > 0 {
			lines = appendPart(lines, headedLines("### "+mark(ts[i].Pairing), appendPart(nil, itemTable(items))))
		}
	}
	if len(lines) == 0 {
		return nil
	}
	if more := leftOut(outpaced); more != "" {
		lines = appendPart(lines, []string{mark(more) + "."})
	}
	return append([]string{"## Trials in detail"}, lines...)
}

func outcomeList(outcomes []choose.Outcome) []string {
	said := calibration(outcomes)
	if said == "" {
		return nil
	}
	lines := []string{said, "", "| pairing | predicted | value | came |", "| --- | --- | --: | --: |"}
	for _, o := range outcomes {
		lines = append(lines, fmt.Sprintf("| %s | %s | %s | %s |", mark(o.Pairing), mark(o.What), short(o.Predicted), short(o.Came)))
	}
	return lines
}
