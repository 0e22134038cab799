package tui

import (
	"os"
	"strings"
)

// glyphs is one of the three sets of signs the screens are drawn with.
type glyphs int

const (
	dotGlyphs   glyphs = iota // braille dots, frame included: the width is never ambiguous
	lineGlyphs                // box-drawing strokes
	asciiGlyphs               // nothing above 126
)

// glyphNames is the one table of the sets, in the order the key walks.
var glyphNames = [...]string{dotGlyphs: "dot", lineGlyphs: "line", asciiGlyphs: "ascii"}

// String returns the name of the set.
func (g glyphs) String() string { return glyphNames[g] }

// next returns the set after g.
func (g glyphs) next() glyphs { return (g + 1) % glyphs(len(glyphNames)) }

// glyphsNamed returns the set called name, or the one that fits the locale.
func glyphsNamed(name string) glyphs {
	for g, n := range glyphNames {
		if n == name {
			return glyphs(g)
		}
	}
	if utf8Locale() {
		return dotGlyphs
	}
	return asciiGlyphs
}

// utf8Locale says whether the locale's character set is UTF-8.
func utf8Locale() bool {
	for _, name := range []string{"LC_ALL", "LC_CTYPE", "LANG"} {
		if v := os.Getenv(name); v != "" {
			v = strings.ToLower(v)
			return strings.Contains(v, "utf-8") || strings.Contains(v, "utf8")
		}
	}
	return false
}

// frameSet holds the signs of a chart's frame.
type frameSet struct {
	side, corner, base, tick, target, floor rune
}

// frames is the frame of each set.
var frames = [...]frameSet{
	dotGlyphs:   {'⡇', '⡏', '⠉', '⡏', '⠒', '⠂'},
	lineGlyphs:  {'│', '└', '─', '┬', '╌', '┈'},
	asciiGlyphs: {'|', '+', '-', '+', '-', '.'},
}
