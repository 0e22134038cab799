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
)

// item is one entry of the head: a label and its text in growing forms. The
// first form is told whatever happens; a longer one where there is room, items
// of low rank first. Where even the first forms are too many lines, items of
// low worth give lines away first.
type item struct {
	label string
	forms []string
	rank  int
	worth int
}

// Head returns the lines that stand alone at the top of a report: at most
// HeadLines of at most Width ASCII characters. What is left out ends in "..."
// and is told in full further down.
func Head(d Document) []string {
	items := headItems(d)
	for total(items, nil) > HeadLines && slices.ContainsFunc(items, further) {
		at := len(items) - 1
		for !further(items[at]) {
			at--
		}
		items = slices.Delete(items, at, at+1)
	}
	form := longest(items)
	var out []string
	for i, n := range within(items, form) {
		label := items[i].label
		for _, l := range wrapTo(items[i].forms[form[i]], Width-labelCols, n) {
			out = append(out, strings.TrimRight(fmt.Sprintf("%-*s%s", labelCols, label, l), " "))
			label = ""
		}
	}
	return out
}

// further says whether an item is a finding after the first.
func further(it item) bool { return it.label == "" }

// needs is how many lines one form of an item takes.
func needs(it item, form int) int { return len(wrap(it.forms[form], Width-labelCols)) }

// total is how many lines the items take in the forms given, nil for the first.
func total(items []item, form []int) int {
	sum := 0
	for i, it := range items {
		if form == nil {
			sum += needs(it, 0)
		} else {
			sum += needs(it, form[i])
		}
	}
	return sum
}

// longest gives each item the longest form that there is room for, low ranks
// first.
func longest(items []item) []int {
	form := make([]int, len(items))
	order := make([]int, len(items))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int { return items[a].rank - items[b].rank })
	for _, i := range order {
		for k := range items[i].forms {
			was := form[i]
			if form[i] = k; total(items, form) > HeadLines {
				form[i] = was
			}
		}
	}
	return form
}

// within is how many lines each item gets: all it needs, unless that is more
// than the head has; then items of low worth go down to one line.
func within(items []item, form []int) []int {
	lines, spare := make([]int, len(items)), HeadLines
	for i, it := range items {
		lines[i] = needs(it, form[i])
		spare -= lines[i]
	}
	for worth := 0; spare < 0; worth++ {
		for i, it := range items {
			for it.worth == worth && spare < 0 && lines[i] > 1 {
				lines[i]--
				spare++
			}
		}
	}
	return lines
}
