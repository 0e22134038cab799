package report

import (
	"strings"
	"unicode"
)

// plainer turns the mathematical signs that findings use into ASCII.
var plainer = strings.NewReplacer(
	"⁻¹", "^-1", "ᵀ", "^T", "ᴴ", "^H", "²", "^2", "³", "^3",
	"₀", "0", "₁", "1", "₂", "2", "∞", "inf", "‖", "||", "√", "sqrt ",
	"−", "-", "–", "-", "—", "-", "×", "x", "·", "*", "∘", "*", "÷", "/", "±", "+-",
	"≤", "<=", "≥", ">=", "≠", "/=", "≈", "~", "→", "->", "⇒", "=>", "∈", " in ",
	"…", "...", "‘", "'", "’", "'", "“", `"`, "”", `"`, "Σ", "sum ", "Π", "prod ",
	"α", "alpha", "β", "beta", "γ", "gamma", "δ", "delta", "ε", "eps", "θ", "theta",
	"κ", "kappa", "λ", "lambda", "μ", "mu", "π", "pi", "ρ", "rho", "σ", "sigma", "τ", "tau", "ω", "omega",
)

// plain returns s as one line of printable ASCII: signs are spelled out, runs
// of blanks and line ends become one blank, anything else becomes "?". No
// escape survives it.
func plain(s string) string {
	var b strings.Builder
	blank := false
	for _, r := range plainer.Replace(s) {
		switch {
		case unicode.IsSpace(r):
			blank = b.Len() > 0
			continue
		case r < ' ' || r > '~':
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

// clip shortens plain text to w characters, ending in "...".
func clip(s string, w int) string {
	switch {
	case len(s) <= w:
		return s
	case w <= 3:
		return s[:max(w, 0)]
	}
	return strings.TrimRight(s[:w-3], " ") + "..."
}

// wrap breaks plain text into lines of at most w characters, at blanks where
// it can; an empty text is one empty line.
func wrap(s string, w int) []string {
	var lines []string
	for len(s) > w {
		cut := strings.LastIndexByte(s[:w+1], ' ')
		if cut <= 0 {
			cut = w
		}
		lines = append(lines, strings.TrimRight(s[:cut], " "))
		s = strings.TrimLeft(s[cut:], " ")
	}
	return append(lines, s)
}

// wrapTo wraps to at most n lines; the last ends in "..." where text is left,
// after a clause or at least a word.
func wrapTo(s string, w, n int) []string {
	lines := wrap(s, w)
	if len(lines) <= n {
		return lines
	}
	last := lines[n-1]
	if i := strings.LastIndex(last, "; "); i > 0 {
		last = last[:i]
	}
	if len(last)+4 > w {
		last = wrap(last, w-4)[0]
	}
	return append(lines[:n-1], last+" ...")
}

// hang wraps text behind a label: the label on the first line, blanks of the
// same width before the others.
func hang(label, text string, w int) []string {
	lines := wrap(text, w-len(label))
	for i := range lines {
		lines[i] = label + lines[i]
		label = strings.Repeat(" ", len(label))
	}
	return lines
}

// Paragraph returns text as plain lines of at most Width columns, the first
// behind label, the others indented as far.
func Paragraph(label, text string) []string { return trimmed(hang(label, plain(text), Width)) }
