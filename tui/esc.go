package tui

import (
	"strings"
	"time"
)

// patience is how long an escape key waits for the rest of a sequence that a
// slow link may have torn apart.
const patience = 100 * time.Millisecond

// escapes puts torn escape sequences together again. An arrow key whose bytes
// arrive in two reads is seen as the escape key and the letters "[B"; without
// this, it would close something and type letters.
type escapes struct {
	open bool   // an escape waits for its rest
	id   int    // of that escape
	rest string // what has come of it: "[", "[5", "O"
}

// torn names the keys by the rest of their sequences.
var torn = map[string]string{
	"[A": "up", "[B": "down", "[C": "right", "[D": "left", "[H": "home", "[F": "end", "[Z": "shift+tab",
	"OA": "up", "OB": "down", "OC": "right", "OD": "left", "OH": "home", "OF": "end",
	"[1~": "home", "[4~": "end", "[5~": "pgup", "[6~": "pgdown",
}

// begin opens a sequence and returns its id.
func (e *escapes) begin(rest string) int {
	e.open, e.rest = true, rest
	e.id++
	return e.id
}

// feed takes one rune. It returns whether the rune belongs to the open
// sequence, and the key when that is now complete; an unknown complete
// sequence gives "".
func (e *escapes) feed(r rune) (belongs bool, key string) {
	if !e.open {
		return false, ""
	}
	if e.rest == "" {
		if r == '[' || r == 'O' {
			e.rest = string(r)
			return true, ""
		}
		return false, ""
	}
	e.rest += string(r)
	if e.rest[0] == '[' && strings.ContainsRune("0123456789;<?", r) && len(e.rest) < 16 {
		return true, ""
	}
	e.open = false
	return true, torn[e.rest]
}

// end closes the sequence and says whether it was the escape key alone.
func (e *escapes) end() bool {
	alone := e.open && e.rest == ""
	e.open = false
	return alone
}
