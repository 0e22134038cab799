package report

import (
	"fmt"
	"math"
	"strings"

	"dwindle/engine/choose"
	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// headItems are the entries of the head, in their order.
func headItems(d Document) []item {
	items := []item{{"SYSTEM", []string{systemText(d)}, 0, 5}}
	if forms := todayForms(d); forms != nil {
		items = append(items, item{"TODAY", forms, 5, 3})
	}
	label := "WHY"
	for i, f := range why(d) {
		if i == maxWhy {
			break
		}
		items = append(items, item{label, clauses(findingText(f)), 1 + 2*i, 2})
		label = ""
	}
	if label != "" {
		items = append(items, item{label, []string{"nothing was seen that slows or spoils a solve"}, 1, 2})
	}
	return append(items,
		item{"USE", useForms(d), 6, 4},
		item{"DOUBT", doubtForms(d), 2, 1},
		item{"REPEAT", []string{orDash(plain(d.Command))}, 0, 6},
		item{"FINGERPRINT", fingerprintForms(d), 4, 0})
}

// systemText names the system, with what decides which methods apply before
// the counts.
func systemText(d Document) string {
	s := d.System
	var kind []string
	if f := d.Facts; f != nil {
		switch f.Symmetric.Answer {
		case inspect.Yes:
			kind = append(kind, "symmetric")
		case inspect.No:
			kind = append(kind, "not symmetric")
		}
		kind = append(kind, definiteWords(f)...)
	}
	words := []string{plural(s.Unknowns, "unknown", "unknowns") + ", " + plural(s.Entries, "entry", "entries"), rhsText(s.RHS)}
	if len(kind) > 0 {
		words = append([]string{strings.Join(kind, ", ")}, words...)
	}
	if s.Digits > 0 && s.Digits < 17 {
		words = append(words, fmt.Sprintf("written with %d digits", s.Digits))
	}
	return clip(orDash(plain(s.Name)), 44) + ": " + plain(strings.Join(words, "; "))
}

// definiteWords tell what is known of the signs of A's eigenvalues.
func definiteWords(f *inspect.Facts) []string {
	sure := func(f inspect.Fact) string { return " (" + orDash(string(f.Certainty)) + ")" }
	switch p, n, s := f.PositiveDefinite, f.NegativeDefinite, f.Semidefinite; {
	case p.Answer == inspect.Yes:
		return []string{"definite" + sure(p)}
	case n.Answer == inspect.Yes:
		return []string{"negative definite" + sure(n)}
	case p.Answer == inspect.No && s.Answer == inspect.Yes:
		return []string{"semi-definite and singular" + sure(p)}
	case p.Answer == inspect.No:
		return []string{"not definite" + sure(p)}
	case f.Symmetric.Answer == inspect.Yes:
		return []string{"definite or not is unknown"}
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

// todayForms tell how today's pairing ended; nil where none was given.
func todayForms(d Document) []string {
	for _, t := range d.Trials {
		if t.Today {
			return []string{plain(t.Pairing) + ": " + strings.Replace(Outcome(t), ", true residual ", ", at ", 1), plain(t.Pairing) + ": " + Outcome(t)}
		}
	}
	return nil
}

// Outcome tells how a trial ended, in one phrase.
func Outcome(t trace.History) string {
	if len(t.Records) == 0 {
		return strings.TrimSuffix(t.Stop.String()+" before it began: "+plain(t.Reason), ": ")
	}
	return fmt.Sprintf("%s after %s, %s, true residual %s", ending(t),
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

// useForms tell what is recommended and what it costs, then also the target
// that this was measured at.
func useForms(d Document) []string {
	c := d.Choice
	if c.Pairing == "" {
		return []string{nothingText(d)}
	}
	words := []string{plain(c.Pairing)}
	for _, t := range d.Trials {
		if t.Pairing != c.Pairing {
			continue
		}
		if t.TwoDoubles {
			return []string{useTwo(d, t)}
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
	text := strings.Join(words, ", ")
	return []string{text, text + ", tol " + exact(d.Settings.Tol) + " by rule " + orDash(plain(d.Settings.StopRule))}
}

func rankedWords(r choose.Ranked) []string {
	words := []string{
		fmt.Sprintf("%s in %s (set-up %s)", plural(r.Iterations, "it", "its"), trace.Took(r.Seconds), trace.Took(r.Setup)),
		memory(r.Memory),
	}
	if finite(r.BreakEven) && r.BreakEven > 1 {
		than := ""
		if r.Cheapest != "" {
			than = "beats " + plain(r.Cheapest) + " "
		}
		words = append(words, fmt.Sprintf("%sfrom %.0f right-hand sides on", than, math.Ceil(r.BreakEven)))
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
	case g.Times == 0:
		return ""
	case g.Times < leastGain:
		return "no gain over today's is measured"
	case g.ByWork:
		return times(g.Times) + " times less counted work than today's"
	}
	return times(g.Times) + " times today's speed"
}

// leastGain is the gain from which a change is worth a word.
const leastGain = 1.05

// doubtForms are the doubts in few words each, what stands before a colon, and
// in full.
func doubtForms(d Document) []string {
	if len(d.Choice.Doubts) == 0 {
		return []string{"none"}
	}
	var short, full []string
	for _, s := range d.Choice.Doubts {
		s = plain(s)
		full = append(full, s)
		s, _, _ = strings.Cut(s, ": ")
		short = append(short, s)
	}
	return []string{strings.Join(short, "; "), strings.Join(full, "; ")}
}

// printDigits is how much of the fingerprint stands in a head that has no room
// for all of it.
const printDigits = 16

// fingerprintForms are the fingerprint, if need be its beginning, with what
// made the numbers.
func fingerprintForms(d Document) []string {
	sum := plain(d.System.Fingerprint)
	short := orDash(clip(sum, printDigits+3))
	made := fmt.Sprintf(" dwindle %s, seed %d", orDash(plain(d.Version)), d.Settings.Seed)
	on := ", " + orDash(plain(d.Toolchain)) + "; " + orDash(plain(d.Machine.CPU)) + ", " + plural(d.Machine.Threads, "thread", "threads")
	return []string{short + made, short + made + on, orDash(sum) + made + on}
}

func orDash(s string) string {
	if s == "" {
		return "-"
	}
	return s
}
