package load

import (
	"bytes"
	"strings"
)

// badIndex says what stands where an index should.
func badIndex(l *lines, which string, at []byte) error {
	w, _ := word(at)
	switch {
	case len(w) == 0:
		return l.fail("the %s index is missing", which)
	case w[0] >= '0' && w[0] <= '9' && len(bytes.Trim(w, "0123456789")) == 0:
		return l.fail("the %s index %s is out of range", which, quoted(w))
	}
	return l.fail("%s is not a %s index", quoted(w), which)
}

// badValue says what stands where a value should.
func badValue(l *lines, at []byte) error {
	w, _ := word(at)
	if len(w) == 0 {
		return l.fail("the value is missing")
	}
	switch strings.Trim(strings.ToLower(string(w)), "+-") {
	case "nan", "inf", "infinity":
		return l.fail("the value %s is not finite", quoted(w))
	}
	return l.fail("%s is not a number", quoted(w))
}
