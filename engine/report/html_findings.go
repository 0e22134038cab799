package report

import (
	"strings"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
)

// findingsPart tells every finding in full, the heaviest first.
func findingsPart(d Document) markup {
	var parts []markup
	for _, f := range leading(d.Findings) {
		parts = append(parts, findingPart(f, d.Facts))
	}
	if len(parts) == 0 && len(d.Trials) > 0 {
		return element("p", safe("Nothing was seen that slows or spoils a solve."))
	}
	return join(parts...)
}

func findingPart(f diagnose.Finding, facts *inspect.Facts) markup {
	claim := f.Claim
	if f.Subject != "" && f.Subject != diagnose.OnSystem && !strings.Contains(claim, f.Subject) {
		claim = f.Subject + ": " + claim
	}
	parts := []markup{element("p", element(`span class="tag"`, safe(string(f.Weight))), " ",
		element(`span class="small"`, safe("["+orDash(string(f.Certainty))+"]")), " ", safe(claim))}
	if f.Advice != "" {
		parts = append(parts, element("p", element("b", "Advice: "), safe(f.Advice)))
	}
	if len(f.Try) > 0 {
		var tries []markup
		for i, t := range f.Try {
			if i > 0 {
				tries = append(tries, " or ")
			}
			tries = append(tries, element("code", safe(t)))
		}
		parts = append(parts, element("p", element("b", "Try: "), join(tries...)))
	}
	var evidence []string
	for _, e := range f.Evidence {
		evidence = append(evidence, evidenceText(e, facts))
	}
	if len(evidence) > 0 {
		parts = append(parts, element(`p class="small"`, safe(strings.Join(evidence, "; "))))
	}
	return element(`div class="finding `+weightClass(f.Weight)+`"`, parts...) + "\n"
}

// weightClass is the class of a weight in the style sheet.
func weightClass(w diagnose.Weight) string {
	switch w {
	case diagnose.Blocker:
		return "blocker"
	case diagnose.Drag:
		return "drag"
	}
	return "note"
}
