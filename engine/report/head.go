package report

import (
	"fmt"
	"slices"
	"strings"
)

// The shape of the text report.
const (
	Width     = 78 // columns
	HeadLines = 12 // at most
	labelCols = 12
	maxWhy    = 3 // findings in the head
	whole     = 2 // items up to this rank are not cut for the sake of others
	wanted    = 3 // nor those up to this one for a finding after the first
	mostLines = 6 // of one item
)

// item is one entry of the head: a label, a text, and which item is served
// first (low rank) when a line is left over.
type item struct {
	label, text string
	rank        int
}

// Head returns the lines that stand alone at the top of a report: at most
// HeadLines of at most Width ASCII characters. What does not fit ends in
// "..." and is told in full further down.
func Head(d Document) []string {
	items := headItems(d)
	for least(items) > HeadLines && slices.ContainsFunc(items, further) {
		at := len(items) - 1
		for !further(items[at]) {
			at--
		}
		items = slices.Delete(items, at, at+1) // told in full further down
	}
	lines := allot(items)
	var out []string
	for i, it := range items {
		label := it.label
		for _, l := range wrapTo(it.text, Width-labelCols, lines[i]) {
			out = append(out, strings.TrimRight(fmt.Sprintf("%-*s%s", labelCols, label, l), " "))
			label = ""
		}
	}
	return out
}

// further says whether an item is a finding after the first.
func further(it item) bool { return it.label == "" }

// least is how many lines items need, what is wanted whole.
func least(items []item) int {
	sum := 0
	for _, it := range items {
		if it.rank <= wanted {
			sum += needs(it)
		} else {
			sum++
		}
	}
	return sum
}

// needs is how many lines an item takes whole, up to mostLines.
func needs(it item) int { return min(len(wrap(it.text, Width-labelCols)), mostLines) }

// allot gives each item a line, those of the lowest ranks all they need as far
// as there is room, and what is left to the others in turn.
func allot(items []item) []int {
	lines := make([]int, len(items))
	spare := HeadLines - len(items)
	for i := range lines {
		lines[i] = 1
	}
	for pass := range HeadLines {
		for rank := range HeadLines {
			for i, it := range items {
				for it.rank == rank && spare > 0 && lines[i] < needs(it) && (rank <= whole || lines[i] <= pass) {
					lines[i]++
					spare--
				}
			}
		}
	}
	return lines
}
