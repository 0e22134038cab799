package tui

import (
	"slices"
	"strings"
	"unicode"

	"github.com/charmbracelet/x/ansi"
)

// spelled gives the ASCII form of the signs that findings and names use.
var spelled = strings.NewReplacer(
	"‖", "||", "−", "-", "–", "-", "—", "-", "≤", "<=", "≥", ">=", "≈", "~", "≠", "!=",
	"×", "x", "·", "*", "√", "sqrt ", "∞", "inf", "→", "->", "±", "+-", "…", "...",
	"ᵀ", "^T", "ᴴ", "^H", "∈", "in", "⌈", "", "⌉", "",
	"α", "alpha", "β", "beta", "γ", "gamma", "δ", "delta", "ε", "eps", "η", "eta", "θ", "theta", "κ", "cond",
	"λ", "lambda", "μ", "mu", "ρ", "rho", "σ", "sigma", "τ", "tau", "ω", "omega",
	"’", "'", "‘", "'", "“", "\"", "”", "\"",
)

// raised and lowered are the signs of exponents and indices, and what they
// stand for at the same place.
const raised, raisedPlain = "⁰¹²³⁴⁵⁶⁷⁸⁹⁺⁻", "0123456789+-"
const lowered, loweredPlain = "₀₁₂₃₄₅₆₇₈₉", "0123456789"

// spell writes s in ASCII: known signs by name, a run of raised ones after
// "^", a run of lowered ones after "_".
func spell(s string) string {
	var b strings.Builder
	run := rune(0)
	for _, r := range spelled.Replace(s) {
		if at := runeIndex(raised, r); at >= 0 {
			if run != '^' {
				b.WriteByte('^')
			}
			run = '^'
			b.WriteByte(raisedPlain[at])
			continue
		}
		if at := runeIndex(lowered, r); at >= 0 {
			if run != '_' {
				b.WriteByte('_')
			}
			run = '_'
			b.WriteByte(loweredPlain[at])
			continue
		}
		run = 0
		b.WriteRune(r)
	}
	return b.String()
}

// runeIndex is the place of r among the runes of s, -1 if it is not there.
func runeIndex(s string, r rune) int { return slices.Index([]rune(s), r) }

// clean makes foreign text safe to print on one line: control characters and
// escape sequences vanish, blanks become one space, signs that are drawn in
// no cell or that change their neighbours are dropped. In the ASCII set,
// known signs are spelled out and the rest become "?".
func (g glyphs) clean(s string) string {
	s = ansi.Strip(strings.ToValidUTF8(s, "?"))
	if g == asciiGlyphs {
		s = spell(s)
	}
	var b strings.Builder
	blank := false
	for _, r := range s {
		switch {
		case unicode.IsSpace(r):
			blank = b.Len() > 0
			continue
		case !unicode.IsPrint(r) || unicode.In(r, unicode.Mn, unicode.Me):
			continue
		case g == asciiGlyphs && r > 126:
			r = '?'
		}
		if blank {
			b.WriteByte(' ')
			blank = false
		}
		b.WriteRune(r)
	}
	return b.String()
}

// width is the number of cells of s.
func width(s string) int { return ansi.StringWidth(s) }

// clip cuts s to w cells; "~" as the last one says that more was there.
func clip(s string, w int) string {
	if w <= 0 {
		return ""
	}
	return ansi.Truncate(s, w, "~")
}

// left clips s to w cells and fills it with blanks on the right.
func left(s string, w int) string {
	s = clip(s, w)
	return s + blanks(w-width(s))
}

// right clips s to w cells and fills it with blanks on the left.
func right(s string, w int) string {
	s = clip(s, w)
	return blanks(w-width(s)) + s
}

// ends joins two texts so that the second ends at column w; the first gives
// way.
func ends(a, b string, w int) string {
	if b = clip(b, w); b == "" {
		return left(a, w)
	}
	return left(a, w-width(b)-1) + " " + b
}

// blanks is n spaces, none if n is negative.
func blanks(n int) string { return strings.Repeat(" ", max(n, 0)) }

// wrap breaks s at blanks into lines of at most w cells; a longer word is
// clipped.
func wrap(s string, w int) []string {
	var lines []string
	line := ""
	for _, word := range strings.Fields(s) {
		switch {
		case line == "":
			line = clip(word, w)
		case width(line)+1+width(word) <= w:
			line += " " + word
		default:
			lines = append(lines, line)
			line = clip(word, w)
		}
	}
	if line != "" {
		lines = append(lines, line)
	}
	return lines
}
