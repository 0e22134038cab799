package report

import (
	"fmt"
	"io"
	"math"

	"dwindle/engine/check"
)

// CheckDocument is the judgement of a solution from elsewhere.
type CheckDocument struct {
	Version  string
	Command  string // the exact command to repeat it
	Machine  Machine
	Tol      float64
	StopRule string // rhs, initial, backward or absolute
	System   System
	RHSGiven bool     // b was asked for, not taken for want of another
	Notes    []string // what was noticed while files were read
	Answer   *check.Answer
}

// CheckText writes the judgement: ASCII, at most Width columns, what matters
// first, then every measure.
func CheckText(w io.Writer, d CheckDocument) error {
	a := d.Answer
	item := func(label, text string) []string {
		return hang(fmt.Sprintf("%-*s", labelCols, label), plain(text), Width)
	}
	lines := item("SYSTEM", fmt.Sprintf("%s: %s, %s; %s", clip(orDash(plain(d.System.Name)), 44),
		plural(d.System.Unknowns, "unknown", "unknowns"), plural(d.System.Entries, "entry", "entries"), rhsText(d.System.RHS)))
	lines = append(lines, item("VERDICT", a.Verdict)...)
	if a.Said != nil {
		lines = append(lines, item("SAID", a.Said.Claim)...)
	}
	label := "ALSO"
	for _, h := range append(d.otherRHS(), a.Hints...) {
		lines = append(lines, item(label, h)...)
		label = ""
	}
	for _, n := range d.Notes {
		lines = append(lines, item("NOTE", n)...)
	}
	lines = appendPart(lines, measureTable(a))
	lines = appendPart(lines, fieldTable(a))
	lines = appendPart(lines, worstTable(a))
	lines = appendPart(lines, groundLines(d))
	return writeLines(w, lines)
}

// otherRHS warns where b is not the one that x was made for.
func (d CheckDocument) otherRHS() []string {
	switch {
	case !d.RHSGiven && (d.System.RHS == "ones" || d.System.RHS == "made"):
		return []string{"b is " + d.System.RHS + ", not from a file: if x was made for another b, nothing here holds; give it with --rhs"}
	}
	return nil
}

// measureTable lists every measure with its value and, for those that codes
// stop by, whether they hold.
func measureTable(a *check.Answer) []string {
	lines := []string{fmt.Sprintf("%-46s%12s  %s", "measure (r = b-Ax, D = diag A, A' transposed)", "value", "stops here")}
	var kind check.Kind
	for _, d := range a.Definitions {
		if d.Kind != kind {
			kind = d.Kind
			lines = append(lines, string(kind))
		}
		held := ""
		switch {
		case d.Holds && d.From > 0:
			held = fmt.Sprintf("from step %d", d.From)
		case d.Holds:
			held = "yes"
		case d.Stops:
			held = "no"
		}
		lines = append(lines, fmt.Sprintf("  %-44s%12s  %s", d.Formula, four(d.Value), held))
	}
	return lines
}

// fieldTable holds the residual against b field by field.
func fieldTable(a *check.Answer) []string {
	if a.Fields == nil {
		return nil
	}
	lines := []string{fmt.Sprintf("%-24s%10s%14s%16s%12s", "field", "rows", "||r||2/||b||2", "componentwise", "tolerance")}
	for _, f := range a.Fields {
		tol := "-"
		if f.Tol > 0 {
			tol = exact(f.Tol)
		}
		lines = append(lines, fmt.Sprintf("%-24s%10d%14s%16s%12s", clip(plain(f.Name), 23), f.Rows, four(f.Residual), four(f.Componentwise), tol))
	}
	return lines
}

// mostWorst is how many of the worst rows are told.
const mostWorst = 8

// worstTable lists the rows with the largest componentwise backward error.
func worstTable(a *check.Answer) []string {
	if len(a.Worst) == 0 {
		return nil
	}
	lines := []string{fmt.Sprintf("worst rows, by |r|i/(|A||x|+|b|)i; %s unsolved", plural(a.Unsolved, "row", "rows"))}
	for k, r := range a.Worst {
		if k == mostWorst {
			break
		}
		lines = append(lines, clip(fmt.Sprintf("  %-44s%12s", clip(plain(a.Names.Row(r.Row)), 43), four(r.Share)), Width))
	}
	return lines
}

// groundLines tell what the judgement rests on.
func groundLines(d CheckDocument) []string {
	a := d.Answer
	var lines []string
	say := func(format string, args ...any) {
		lines = append(lines, hang("", plain(fmt.Sprintf(format, args...)), Width)...)
	}
	say("b-Ax evaluated in twice the working precision: ||r||2 = %s, its rounding below %s (in plain double it could be %s)",
		four(a.Residual.Two), four(a.Residual.Bound), four(a.Residual.Plain))
	settled := "settled"
	if !a.Norms.TwoSettled {
		settled = "from below, not settled"
	}
	say("norms of A: 1 %s, inf %s, Frobenius %s, 2 %s (Lanczos, %s)", four(a.Norms.One), four(a.Norms.Inf), four(a.Norms.Fro), four(a.Norms.Two), settled)
	if d, ok := a.Definition("running"); ok {
		k := len(a.Running.Norms)
		say("||A||run is the norm of A that %s keeps as it goes, %s after 1 step, %s after %d; listed (%s) because its residual falls to that of x (estimated)",
			a.Running.Method, four(a.Running.Norms[0]), four(a.Running.Norms[k-1]), k, four(d.Value))
	}
	if f := a.Factor; f != nil {
		say("condition (%s factor, Hager and Higham): 1-norm %s (estimated), for the entries of this x %s", f.How, four(f.Condition), four(f.Reach))
	} else {
		say("%s", a.NoFactor)
	}
	if a.Digits < 17 {
		say("x is written with %s", plural(a.Digits, "digit", "digits"))
	}
	lines = append(lines, "fingerprint "+orDash(plain(d.System.Fingerprint)))
	return append(lines, hang("repeat with ", plain(d.Command)+" (dwindle "+plain(d.Version)+")", Width)...)
}

// four prints a measure in four digits; "-" where it is unknown.
func four(x float64) string {
	switch {
	case math.IsNaN(x):
		return "-"
	case math.IsInf(x, 0):
		return "infinite"
	}
	return fmt.Sprintf("%.3e", x)
}
