package load

import (
	"path/filepath"
	"strings"
)

// shortName is the base name of a path in printable ASCII, one column a
// character: anything else (controls, escapes, tabs, wide or combining
// characters) becomes a question mark.
func shortName(path string) string {
	return strings.Map(func(r rune) rune {
		if r < ' ' || r > '~' {
			return '?'
		}
		return r
	}, filepath.Base(path))
}
