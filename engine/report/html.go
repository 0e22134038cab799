package report

import (
	"io"

	"gonum.org/v1/plot/vg"
)

// HTML writes the report as one page that stands alone: it loads nothing,
// needs no script, follows the reader's choice of a light or dark ground and
// prints. The same document gives the same bytes.
func HTML(w io.Writer, d Document) error {
	title := orDash(d.System.Name)
	page := join(
		"<!DOCTYPE html>\n<html lang=\"en\">\n<head>\n<meta charset=\"utf-8\"/>\n"+
			"<meta name=\"viewport\" content=\"width=device-width, initial-scale=1\"/>\n"+
			"<meta name=\"generator\" content=\"dwindle\"/>\n",
		element("title", safe("dwindle: "+title)), "\n<style>", style, "</style>\n</head>\n<body>\n",
		element("h1", safe(title)), headPart(d), "\n<main>\n",
		section("Findings", findingsPart(d)),
		section("Residuals", racePart(d), trialsPart(d)),
		section("What to use", choicePart(d)),
		section("Cost", costPart(d)),
		section("Trials one by one", trialPictures(d), stopsPart(d), auditsPart(d)),
		section("Spectra", spectrumPart(d)),
		section("Predictions and what came of them", outcomesPart(d)),
		section("The system", systemPart(d)),
		section("How it was measured", measuredPart(d)),
		"</main>\n</body>\n</html>\n")
	_, err := io.WriteString(w, string(page))
	return err
}

// headPart is the head of the text report, uncut.
func headPart(d Document) markup {
	var parts []markup
	for _, it := range headItems(d) {
		parts = append(parts, element("dt", safe(it.label)), element("dd", safe(it.forms[len(it.forms)-1])), "\n")
	}
	return element(`dl class="head"`, parts...)
}

// drawn makes a figure of a picture in two widths, for broad pages and narrow
// ones; nothing where there is nothing to draw.
func drawn(draw func(w, h vg.Length) (picture, bool), broad, narrow [2]vg.Length, label string, caption markup) markup {
	b, ok := draw(broad[0], broad[1])
	n, also := draw(narrow[0], narrow[1])
	if !ok || !also {
		return ""
	}
	return figure(join(b.svg("broad", label), n.svg("narrow", label)), caption)
}

// small makes a figure of a picture in one width, which fits any page.
func small(p picture, ok bool, label string, caption markup) markup {
	if !ok {
		return ""
	}
	return figure(p.svg("plain", label), caption)
}
