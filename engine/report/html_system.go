package report

import (
	"strings"

	"dwindle/engine/inspect"
)

// systemPart is what is known of the system without any trial: pattern,
// numbers, second look, facts, and what each trial left beyond the tables.
func systemPart(d Document) markup {
	if d.Facts == nil {
		return ""
	}
	p, ok := patternPicture(d.Facts.Pattern, 240)
	pattern := small(p, ok, "Pattern of A", "Where the entries of A lie; darker is denser.")
	numbers := list(measureItems(d.Facts))
	return join(element(`div class="many"`, pattern, numbers),
		headed("Second look", list(studyItems(d.Facts))), headed("Facts", factTable(d.Facts)), headed("Trials in detail", detailPart(d)))
}

// headed is a part under a smaller heading; nothing where it is empty.
func headed(title string, body markup) markup {
	if body == "" {
		return ""
	}
	return join(element("h3", safe(title)), body)
}

// list is a table of labelled texts.
func list(items []labelled) markup {
	var rows []markup
	for _, it := range items {
		rows = append(rows, element("tr", element("td", safe(it.label)), element("td", safe(it.text))), "\n")
	}
	if len(rows) == 0 {
		return ""
	}
	return element(`div class="wide"`, element(`table class="items"`, element("tbody", rows...)))
}

func factTable(f *inspect.Facts) markup {
	var rows [][]markup
	for _, n := range allFacts(f) {
		answer := string(n.fact.Answer)
		if answer == "" {
			answer = string(inspect.Unknown)
		}
		rows = append(rows, words(strings.ReplaceAll(n.name, "_", " "), answer, string(n.fact.Certainty), n.fact.Why+rowText(n.fact.Rows, f)))
	}
	return table([]column{{"fact", false}, {"answer", false}, {"certainty", false}, {"why", false}}, rows)
}

// detailPart tells what each trial left beyond the tables.
func detailPart(d Document) markup {
	var parts []markup
	for _, t := range d.Trials {
		if items := trialItems(t); len(items) > 0 {
			parts = append(parts, element("p", element("code", safe(t.Pairing))), list(items))
		}
	}
	return join(parts...)
}

// measuredPart is under what conditions the numbers were measured, and how to
// repeat them.
func measuredPart(d Document) markup {
	return join(list(settingItems(d)), element("p", "Repeat with ", element("code", safe(orDash(d.Command)))))
}
