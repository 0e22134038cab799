package tui

import (
	"os"
	"strings"

	"github.com/charmbracelet/lipgloss"
	"github.com/muesli/termenv"
)

// ink is a foreground of the 16 ANSI colours as an SGR run; the empty ink
// prints in the terminal's own colour. White and blue are left out: each
// vanishes on a common background.
type ink string

// The inks.
const (
	plain  ink = ""
	strong ink = "1"
	faint  ink = "2"
	good   ink = "32"
	bad    ink = "31"
	care   ink = "33"
)

// curveInks tell neighbouring curves apart; the digit is the identity, the
// colour only a help.
var curveInks = [...]ink{"36", "35", "32", "33", "31", "95", "92", "96"}

// inkOf is the ink of trial id.
func inkOf(id int) ink { return curveInks[(id-1+len(curveInks))%len(curveInks)] }

// inkOfMark is the ink of a state mark.
func inkOfMark(mark byte) ink {
	switch mark {
	case '+':
		return good
	case '!', 'x':
		return bad
	case '=', '#':
		return care
	}
	return plain
}

// coloured says whether out may show colours: NO_COLOR, CLICOLOR=0 and
// terminals without colour answer no. It asks the environment, never the
// terminal.
func coloured(out *os.File) bool {
	return lipgloss.NewRenderer(out).ColorProfile() != termenv.Ascii
}

// brush paints text, or leaves it as it is when colours are off.
type brush bool

// paint returns s in ink i, blanks at its end outside of it, where they can be
// left out. Text to be measured must be clipped before.
func (on brush) paint(i ink, s string) string {
	if !on || i == plain || s == "" {
		return s
	}
	text := strings.TrimRight(s, " ")
	return "\x1b[" + string(i) + "m" + text + "\x1b[m" + s[len(text):]
}
