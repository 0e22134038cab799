package tui

import "unicode"

// prompt is one line of text being typed.
type prompt struct {
	label string
	text  string
}

// typed adds a rune; control characters are dropped.
func (p *prompt) typed(r rune) {
	if unicode.IsPrint(r) && len(p.text) < 200 {
		p.text += string(r)
	}
}

// press handles a key that edits and says whether it did.
func (p *prompt) press(key string) bool {
	switch key {
	case "backspace", "ctrl+h":
		if r := []rune(p.text); len(r) > 0 {
			p.text = string(r[:len(r)-1])
		}
	case "ctrl+u":
		p.text = ""
	default:
		return false
	}
	return true
}

// line is the prompt as drawn.
func (p *prompt) line(g glyphs, w int) string {
	s := p.label + ": " + g.clean(p.text) + "_"
	for width(s) > w && len(p.label) > 0 {
		return left(p.label+": ~"+tail(g.clean(p.text)+"_", w-len(p.label)-3), w)
	}
	return left(s, w)
}

// tail returns the last w cells of s.
func tail(s string, w int) string {
	r := []rune(s)
	for len(r) > 0 && width(string(r)) > w {
		r = r[1:]
	}
	return string(r)
}
