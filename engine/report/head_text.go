package report

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"dwindle/engine/choose"
	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// headItems are the entries of the head, in their order.
func headItems(d Document) []item {
	items := []item{
		{"SYSTEM", systemText(d), wanted},
		{"TODAY", todayText(d), 6},
	}
	label := "WHY"
	why := leading(d.Findings)
	for i, f := range why {
		if i == maxWhy {
			break
		}
		text := findingText(f)
		if i > 0 {
			text, _, _ = strings.Cut(text, "; ") // the first clause, whole or not at all
		}
		items = append(items, item{label, text, whole})
		label = ""
	}
	if len(why) == 0 {
		items = append(items, item{label, "no finding: nothing was seen that slows or spoils a solve", 4})
	}
	return append(items,
		item{"USE", useText(d), 1},
		item{"DOUBT", doubtText(d), 5},
		item{"REPEAT", repeatText(d), 0},
		item{"FINGERPRINT", orDash(plain(d.System.Fingerprint)), 7})
}

// leading returns the findings with blockers first and notes last, otherwise
// in the order given. That b is not the user's is told on other lines, and so
// is by how much today's pairing is beaten, where there is a cause to tell.
func leading(fs []diagnose.Finding) []diagnose.Finding {
	cause := slices.ContainsFunc(fs, func(f diagnose.Finding) bool {
		return f.Weight != diagnose.Note && f.Rule != "today-beaten"
	})
	fs = diagnose.Fold(fs)
	var out []diagnose.Finding
	for _, w := range []diagnose.Weight{diagnose.Blocker, diagnose.Drag, diagnose.Note} {
		for _, f := range fs {
			if f.Weight == w && f.Rule != "not-your-rhs" && !(cause && f.Rule == "today-beaten") {
				out = append(out, f)
			}
		}
	}
	return out
}

func systemText(d Document) string {
	s := d.System
	words := []string{plural(s.Unknowns, "unknown", "unknowns"), plural(s.Entries, "entry", "entries")}
	if f := d.Facts; f != nil {
		switch f.Symmetric.Answer {
		case inspect.Yes:
			words = append(words, "symmetric")
		case inspect.No:
			words = append(words, "not symmetric")
		}
		words = append(words, definiteWords(f)...)
	}
	text := clip(orDash(plain(s.Name)), 44) + ": " + plain(strings.Join(words, ", ")) + "; " + rhsText(s.RHS)
	if s.Digits > 0 && s.Digits < 17 {
		text += fmt.Sprintf("; written with %d digits", s.Digits)
	}
	return text
}

// definiteWords tell what is known of the signs of A's eigenvalues.
func definiteWords(f *inspect.Facts) []string {
	sure := func(f inspect.Fact) string { return " (" + orDash(string(f.Certainty)) + ")" }
	switch p, s := f.PositiveDefinite, f.Semidefinite; {
	case p.Answer == inspect.Yes:
		return []string{"definite" + sure(p)}
	case p.Answer == inspect.No && s.Answer == inspect.Yes:
		return []string{"semi-definite and singular" + sure(p)}
	case p.Answer == inspect.No:
		return []string{"not definite" + sure(p)}
	}
	return nil
}

// rhsText says where b is from, and that it is not the user's when it is not.
func rhsText(rhs string) string {
	switch rhs {
	case "file":
		return "b from a file"
	case "embedded":
		return "b stored with the matrix"
	case "ones":
		return "b = ones, not yours"
	case "made":
		return "b made from a random x, not yours"
	case "unit":
		return "b = one unit row, not yours"
	case "":
		return "b not known"
	}
	return "b: " + plain(rhs)
}

func todayText(d Document) string {
	for _, t := range d.Trials {
		if t.Today {
			return plain(t.Pairing) + ": " + Outcome(t)
		}
	}
	return "not given; --today PAIRING tells the gain over your code's"
}

// Outcome tells how a trial ended, in one phrase.
func Outcome(t trace.History) string {
	if len(t.Records) == 0 {
		return strings.TrimSuffix(t.Stop.String()+" before it began: "+plain(t.Reason), ": ")
	}
	return fmt.Sprintf("%s after %s, %s, true residual %s", t.Stop,
		plural(t.Iterations, "it", "its"), trace.Took(t.OwnTime.Seconds()), sci(t.TrueResidual))
}

// findingText is a finding with its certainty, and its subject unless the
// claim names it.
func findingText(f diagnose.Finding) string {
	claim, subject := plain(f.Claim), plain(f.Subject)
	if subject != "" && subject != diagnose.OnSystem && !strings.Contains(claim, subject) {
		claim = subject + ": " + claim
	}
	return "[" + orDash(plain(string(f.Certainty))) + "] " + claim
}

func useText(d Document) string {
	c := d.Choice
	if c.Pairing == "" {
		if len(c.Reasons) > 0 {
			return plain(c.Reasons[0])
		}
		return "nothing yet: no pairing has reached the tolerance"
	}
	words := []string{plain(c.Pairing)}
	for _, t := range d.Trials {
		if t.Pairing != c.Pairing {
			continue
		}
		if t.Direct {
			words[0] += " (direct)"
		}
		if t.Stop != trace.Converged {
			words[0] += " (" + t.Stop.String() + ")"
		}
		break
	}
	for _, r := range c.Ranked {
		if r.Pairing == c.Pairing {
			words = append(words, rankedWords(r)...)
			break
		}
	}
	if gain := gainText(d); gain != "" {
		words = append(words, gain)
	}
	return strings.Join(append(words, "tol "+exact(d.Settings.Tol)+" by rule "+orDash(plain(d.Settings.StopRule))), ", ")
}

func rankedWords(r choose.Ranked) []string {
	words := []string{
		fmt.Sprintf("%s in %s (set-up %s)", plural(r.Iterations, "it", "its"), trace.Took(r.Seconds), trace.Took(r.Setup)),
		memory(r.Memory),
	}
	if finite(r.BreakEven) && r.BreakEven > 1 {
		words = append(words, fmt.Sprintf("pays from %.0f right-hand sides on", math.Ceil(r.BreakEven)))
	}
	return words
}

func gainText(d Document) string {
	g := d.Choice.Gain
	for _, t := range d.Trials {
		if t.Today && t.Pairing == d.Choice.Pairing {
			return "as today"
		}
	}
	switch {
	case !finite(g) || g <= 0:
		return ""
	case g > 0.95 && g < 1.05:
		return "as fast as today"
	}
	return times(g) + " times today's speed"
}

func doubtText(d Document) string {
	if len(d.Choice.Doubts) == 0 {
		return "none"
	}
	return plain(strings.Join(d.Choice.Doubts, "; "))
}

func repeatText(d Document) string {
	return fmt.Sprintf("%s (dwindle %s, %s, seed %d; %s, %s)", orDash(plain(d.Command)), orDash(plain(d.Version)), orDash(plain(d.Toolchain)),
		d.Settings.Seed, orDash(plain(d.Machine.CPU)), plural(d.Machine.Threads, "thread", "threads"))
}

func orDash(s string) string {
	if s == "" {
		return "-"
	}
	return s
}
