package load

import (
	"fmt"

	"dwindle/engine/linear"
)

// readArray reads a dense matrix, column by column, one value a line. Zeros
// are what such a file writes for "no entry": they are not stored, and that
// is noted.
func readArray(l *lines, h mmHeader, c *collector) (linear.System, error) {
	i, j, zeros := h.top(0), 0, 0
	err := h.eachValue(l, c, func(k int, v float64) {
		if v == 0 {
			zeros++
		} else {
			c.add(int32(i), int32(j), v, h.stored-k)
		}
		if i++; i == h.rows {
			j++
			i = h.top(j)
		}
	})
	if err != nil {
		return linear.System{}, err
	}
	s, err := c.system(l, h.title(), nil) // an array never stores both sides
	if err != nil {
		return linear.System{}, err
	}
	if zeros > 0 {
		s.Source.Notes = append(s.Source.Notes, fmt.Sprintf("Zeros of the array were left out: %d of %d values.", zeros, h.stored))
	}
	s.Source.Stored = h.stored
	return s, nil
}

// top is the first row, zero-based, that an array stores of column j.
func (h mmHeader) top(j int) int {
	switch h.sym {
	case symmetric:
		return j
	case skew:
		return j + 1
	}
	return 0
}

// eachValue reads the values of an array file, one a line, to the end of the
// file.
func (h mmHeader) eachValue(l *lines, c *collector, visit func(k int, v float64)) error {
	for k := 0; k < h.stored; {
		line, ok := l.next()
		if !ok {
			return l.fail("the size line claims %d values; the file ends after %d", h.stored, k)
		}
		if blank(line) || line[0] == '%' {
			continue
		}
		v, rest, err := h.value(l, c, line)
		if err != nil {
			return err
		}
		if len(rest) > 0 && !blank(rest) {
			return l.fail("an array holds one value a line; this one is followed by %s", quoted(skipBlank(rest)))
		}
		visit(k, v)
		k++
	}
	return l.onlyBlank(true, "the last value")
}
