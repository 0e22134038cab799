package load

import (
	"errors"
	"fmt"
	"io/fs"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"
)

// Error says what is wrong with a file, and where.
type Error struct {
	File string // as the user named it
	Line int    // 1-based; 0 where no line can be named
	Text string // one sentence without its full stop
}

// Error prints file:line: what is wrong.
func (e *Error) Error() string {
	name := strings.Map(printable, e.File)
	if e.Line == 0 {
		return name + ": " + e.Text
	}
	return fmt.Sprintf("%s:%d: %s", name, e.Line, e.Text)
}

// printable replaces what could disturb a terminal; spaces stay.
func printable(r rune) rune {
	if r == utf8.RuneError || !unicode.IsPrint(r) {
		return '?'
	}
	return r
}

// notOpened turns an error of the operating system into one without the path
// it repeats.
func notOpened(name string, err error) error {
	var p *fs.PathError
	if errors.As(err, &p) {
		err = p.Err
	}
	return &Error{File: name, Text: err.Error()}
}

// quoted shows a piece of a file in a message: escaped, and cut when long.
func quoted(b []byte) string {
	const most = 40
	if len(b) > most {
		return strconv.QuoteToASCII(string(b[:most])) + "..."
	}
	return strconv.QuoteToASCII(string(b))
}
