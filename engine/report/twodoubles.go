package report

import (
	"fmt"

	"dwindle/engine/diagnose"
	"dwindle/engine/trace"
)

// ending is how a trial ended, with what a reader of "converged" must know.
func ending(t trace.History) string {
	if t.TwoDoubles && t.Stop == trace.Converged {
		return t.Stop.String() + " (x in two doubles)"
	}
	return t.Stop.String()
}

// useTwo says what to use where t, which keeps x in two doubles, is all that
// reached the tolerance: first what one double can be asked for, then t.
func useTwo(d Document, t trace.History) string {
	text := ""
	if h, ok := diagnose.Utmost(d.Facts, d.Trials); ok {
		text = fmt.Sprintf("%s at tol %.1g or --stop backward", plain(h.Pairing), diagnose.AskFor(h.TrueResidual))
		if right := diagnose.Right(h); right != "" {
			text += ": x " + right
		}
		text += "; "
	}
	text += fmt.Sprintf("for %s by rule %s %s, x in two doubles (%.2g left once rounded to one)",
		exact(d.Settings.Tol), orDash(plain(d.Settings.StopRule)), plain(t.Pairing), t.Rounded)
	for _, r := range d.Choice.Ranked {
		if r.Pairing == t.Pairing {
			for _, w := range rankedWords(r) {
				text += ", " + w
			}
			break
		}
	}
	return text
}

// twoJSON is what is known of x in two doubles, and of x against it.
type twoJSON struct {
	TwoDoubles bool      `json:"two_doubles"`
	Rounded    number    `json:"rounded_residual"` // null: x is one double
	Near       *nearJSON `json:"against_two_doubles"`
}

type nearJSON struct {
	Of         string `json:"of"`
	Error      number `json:"error"`
	Worst      number `json:"worst_entry_error"`
	Doubt      number `json:"doubt"`
	WorstDoubt number `json:"worst_entry_doubt"`
}

func toTwo(t trace.History) twoJSON {
	j := twoJSON{TwoDoubles: t.TwoDoubles, Rounded: unknown}
	if t.TwoDoubles && len(t.Records) > 0 {
		j.Rounded = number(t.Rounded)
	}
	if n := t.Near; n != nil {
		j.Near = &nearJSON{tame(n.Of), number(n.Error), number(n.Worst), number(n.Doubt), number(n.WorstDoubt)}
	}
	return j
}
