package report

import (
	"fmt"

	"dwindle/engine/choose"
	"dwindle/engine/trace"
)

// headedLines puts a heading above lines, if there are any.
func headedLines(heading string, lines []string) []string {
	if len(lines) == 0 {
		return nil
	}
	return append([]string{heading}, lines...)
}

// deepLines tell what each trial left beyond the table.
func deepLines(ts []trace.History) []string {
	var lines []string
	list, outpaced := singled(ts)
	for _, i := range list {
		items := trialItems(ts[i])
		if len(items) == 0 {
			continue
		}
		lines = append(lines, clip(fmt.Sprintf("%c %s", digit(i), plain(ts[i].Pairing)), Width))
		lines = append(lines, itemLines(items)...)
	}
	if more := leftOut(outpaced); more != "" && len(lines) > 0 {
		lines = append(lines, more)
	}
	return headedLines("trials in detail", lines)
}

// outcomeLines hold predictions against what came of them.
func outcomeLines(outcomes []choose.Outcome) []string {
	said := calibration(outcomes)
	if said == "" {
		return nil
	}
	lines := hang("predictions: ", said, Width)
	for _, o := range outcomes {
		lines = append(lines, hang("  ", plain(fmt.Sprintf("%s, %s: %s, came %s", o.Pairing, o.What, short(o.Predicted), short(o.Came))), Width)...)
	}
	return lines
}
