package report

import (
	"slices"

	"dwindle/engine/trace"
)

// nothingText says why no pairing is recommended: what can be had instead, or
// what ended the trials before they reached the tolerance, and when the one
// that was nearest was expected to.
func nothingText(d Document) string {
	c := d.Choice
	if len(c.Reasons) > 0 {
		return plain(c.Reasons[0])
	}
	if len(d.Trials) == 0 {
		return "nothing yet: no pairing has been run"
	}
	text := "nothing yet: no pairing has reached the tolerance"
	switch {
	case slices.ContainsFunc(d.Trials, func(t trace.History) bool { return t.Stop == trace.TimeLimit }):
		text = "nothing yet: " + endedBy(d) + " before any pairing reached the tolerance"
	case slices.ContainsFunc(d.Trials, func(t trace.History) bool { return !t.Stop.Ended() }):
		text += "; trials are still going"
	}
	for _, r := range c.Ranked {
		if finite(r.Expected) && r.Expected > 0 {
			return text + "; " + plain(r.Pairing) + " was expected to in " + trace.Took(r.Expected)
		}
	}
	return text
}

// endedBy says which limit of time ended trials.
func endedBy(d Document) string {
	if s := d.Settings.Seconds; s > 0 && finite(s) {
		return "the run was ended after " + trace.Took(s)
	}
	return "the time limit of trials ended them"
}
