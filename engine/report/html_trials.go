package report

import (
	"fmt"
	"slices"
	"strconv"

	"gonum.org/v1/plot/vg"

	"dwindle/engine/trace"
)

// racePart is the picture of all residuals with what its signs mean.
func racePart(d Document) markup {
	a := newAxis(d.Trials)
	caption := join(safe("Residual over b in each method's own norm, against "+a.title()+". The number is the trial's, a ring its true residual where it was measured last, the dashed line the tolerance; the choice is drawn thick. "), legend(d))
	return drawn(func(w, h vg.Length) (picture, bool) { return racePicture(d, w, h) },
		[2]vg.Length{820, 380}, [2]vg.Length{340, 300}, "Residuals of all trials", caption)
}

// legend names the curves.
func legend(d Document) markup {
	var parts []markup
	for i, t := range d.Trials {
		if len(t.Records) > 0 {
			parts = append(parts, element(hued("span", "key", i), safe(string(digit(i))+"\u00a0"+t.Pairing)), " ")
		}
	}
	return join(parts...)
}

// hued is a tag in the hue of trial i.
func hued(tag, class string, i int) string {
	return fmt.Sprintf(`%s class="%s s%d"`, tag, class, i%hues)
}

// trialsPart is the table of trials, with the reason of each ending where there
// is one to tell.
func trialsPart(d Document) markup {
	columns := []column{{"", false}, {"pairing", false}, {"ending", false}, {"its", true}, {"own time", true}, {"set-up", true}, {"memory", true},
		{"products", true}, {"true residual", true}, {"own residual", true}, {"backward error", true}, {"componentwise", true}, {"condition at least", true}}
	var rows [][]markup
	for i, t := range d.Trials {
		row := []markup{element(hued("span", "key", i), safe(string(digit(i)))), pairingCell(d, t), safe(ending(t))}
		for _, s := range trialCells(t) {
			row = append(row, safe(s))
		}
		rows = append(rows, row)
		if t.Reason != "" {
			rows = append(rows, []markup{safe(t.Reason)})
		}
	}
	return table(columns, rows)
}

// trialCells are the numbers of a trial, dashes where it never began.
func trialCells(t trace.History) []string {
	n := numbers(t)
	if len(t.Records) == 0 {
		return []string{"-", "-", "-", "-", "-", "-", "-", "-", "-", "-"}
	}
	return []string{n[0], n[5], n[4], memory(t.MemoryBytes), n[1], n[2], sci(t.Residual), sci(t.Backward), sci(t.Componentwise), n[3]}
}

func pairingCell(d Document, t trace.History) markup {
	m := element("code", safe(orDash(t.Pairing)))
	if t.Today {
		m += " (today)"
	}
	if t.Pairing == d.Choice.Pairing && t.Pairing != "" {
		m = element("b", m)
	}
	return m
}

// mostPictures is how many trials are drawn one by one.
const mostPictures = 16

// order lists the trials that can be drawn, those that matter most first: the
// choice, today's, then as ranked, then as run.
func order(d Document) []int {
	var out []int
	add := func(match func(trace.History) bool) {
		for i, t := range d.Trials {
			if len(t.Records) > 0 && match(t) && !slices.Contains(out, i) {
				out = append(out, i)
			}
		}
	}
	add(func(t trace.History) bool { return t.Pairing == d.Choice.Pairing })
	add(func(t trace.History) bool { return t.Today })
	for _, r := range d.Choice.Ranked {
		add(func(t trace.History) bool { return t.Pairing == r.Pairing })
	}
	add(func(trace.History) bool { return true })
	return out
}

// trialPictures draws the trials one by one.
func trialPictures(d Document) markup {
	var parts []markup
	list := order(d)
	for _, i := range list[:min(len(list), mostPictures)] {
		p, ok := trialPicture(d, i, 350, 220)
		name := join(element(hued("span", "key", i), safe(string(digit(i))+" "+d.Trials[i].Pairing)), safe(": "+trialCaption(d.Trials[i])))
		parts = append(parts, small(p, ok, "Convergence of "+d.Trials[i].Pairing, name))
	}
	body := join(parts...)
	if body == "" {
		return ""
	}
	note := "Against iterations. Line: own number. Dots: true residual, measured afresh. Dashed: tolerance. Dotted: accuracy floor. " +
		"Rings with letters: where a code with that rule would have stopped, at the true residual it would have had. " +
		"Shaded or thin in the tolerance's colour: energy norm of the error, relative to the first. Ticks on top: a Ritz value locked; thick, with copies."
	if more := len(list) - mostPictures; more > 0 {
		note += fmt.Sprintf(" %s not drawn.", plural(more, "further trial is", "further trials are"))
	}
	return join(element(`p class="small"`, safe(note)), element(`div class="many"`, body))
}

// stopsPart is the table of where common stopping rules would have ended each
// trial, with the true residual there.
func stopsPart(d Document) markup {
	columns := []column{{"pairing", false}}
	for _, s := range stopLetters {
		columns = append(columns, column{s.rule, true})
	}
	var rows [][]markup
	for _, t := range d.Trials {
		row, any := []markup{element("code", safe(t.Pairing))}, false
		for _, s := range stopLetters {
			said := stopText(t, s.rule)
			any = any || said != "-"
			row = append(row, safe(said))
		}
		if any {
			rows = append(rows, row)
		}
	}
	if len(rows) == 0 {
		return ""
	}
	return join(element("h3", "Where common stopping rules would have ended it"), table(columns, rows),
		element(`p class="small"`, safe("iteration (true residual over b there)")))
}

func stopText(t trace.History, rule string) string {
	for _, m := range t.WouldStop {
		if m.Rule == rule && m.Iter >= 0 {
			s := strconv.Itoa(m.Iter)
			if finite(m.True) {
				s += " (" + sci(m.True) + ")"
			}
			return s
		}
	}
	return "-"
}

// auditsPart holds the audits of the drawn trials, folded away.
func auditsPart(d Document) markup {
	columns := []column{{"iteration", true}, {"own time", true}, {"products", true}, {"own residual", true}, {"true residual", true}}
	var parts []markup
	list := order(d)
	for _, i := range list[:min(len(list), mostPictures)] {
		var rows [][]markup
		for _, r := range audited(d.Trials[i], 24) {
			rows = append(rows, words(fmt.Sprint(r.Iter), trace.Took(r.Clock.Seconds()), fmt.Sprint(r.MatVecs), sci(r.Residual), sci(r.Audit)))
		}
		if len(rows) > 0 {
			parts = append(parts, element("details", element("summary", safe("History of "+d.Trials[i].Pairing)), table(columns, rows)), "\n")
		}
	}
	return join(parts...)
}

// audited are the audited records, at most most of them, the last among them.
func audited(t trace.History, most int) []trace.Record {
	var all []trace.Record
	for _, r := range t.Records {
		if r.Audited() {
			all = append(all, r)
		}
	}
	if len(all) <= most {
		return all
	}
	var out []trace.Record
	for k := range most {
		out = append(out, all[k*(len(all)-1)/(most-1)])
	}
	return out
}
