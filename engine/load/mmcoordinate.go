package load

import (
	"math"

	"dwindle/engine/linear"
)

func readMatrixMarket(l *lines) (linear.System, error) {
	h, err := readMMHeader(l)
	if err != nil {
		return linear.System{}, err
	}
	if err := checkOrder(l, h.rows, h.cols, h.stored); err != nil {
		return linear.System{}, err
	}
	c := h.collector()
	if h.array {
		return readArray(l, h, &c)
	}
	return readCoordinates(l, h, &c)
}

func (h *mmHeader) collector() collector {
	return collector{n: h.rows, sym: h.sym, pattern: h.field == "pattern"}
}

func readCoordinates(l *lines, h mmHeader, c *collector) (linear.System, error) {
	at := lineTable{next: l.num + 1}
	if err := h.parallel(l, c, &at); err != nil {
		return linear.System{}, err
	}
	if err := h.entries(l, c, &at, h.stored); err != nil {
		return linear.System{}, err
	}
	if c.t.n < h.stored {
		return linear.System{}, l.fail("the size line claims %d entries; the file ends after %d", h.stored, c.t.n)
	}
	if err := l.onlyBlank(true, "the last entry"); err != nil {
		return linear.System{}, err
	}
	return c.system(l, h.title(), at.line)
}

// entries reads entries until there are most of them or the text ends.
func (h *mmHeader) entries(l *lines, c *collector, at *lineTable, most int) error {
	for c.t.n < most {
		line, ok := l.next()
		if !ok {
			return l.err
		}
		if blank(line) || line[0] == '%' {
			continue
		}
		i, j, v, err := h.entry(l, c, line)
		if err != nil {
			return err
		}
		at.add(c.t.n, l.num)
		c.add(int32(i-1), int32(j-1), v, most-c.t.n)
	}
	return nil
}

// entry reads one line: row, column and, but for a pattern, value.
func (h *mmHeader) entry(l *lines, c *collector, line []byte) (i, j int, v float64, err error) {
	i, rest, ok := count(line)
	if !ok {
		return 0, 0, 0, badIndex(l, "row", rest)
	}
	if j, rest, ok = count(rest); !ok {
		return 0, 0, 0, badIndex(l, "column", rest)
	}
	if i < 1 || i > h.rows || j < 1 || j > h.cols {
		return 0, 0, 0, l.fail("(%d,%d) lies outside; indices run from 1 to %d", i, j, h.rows)
	}
	if h.sym == skew && i == j {
		return 0, 0, 0, l.fail("(%d,%d) is stored, but a skew-symmetric matrix has no diagonal", i, j)
	}
	v = 1
	if h.field != "pattern" {
		if v, rest, err = h.value(l, c, rest); err != nil {
			return 0, 0, 0, err
		}
	}
	if len(rest) > 0 && !blank(rest) {
		return 0, 0, 0, l.fail("the entry is followed by %s", quoted(skipBlank(rest)))
	}
	return i, j, v, nil
}

// value reads the value that stands first in s.
func (h *mmHeader) value(l *lines, c *collector, s []byte) (v float64, rest []byte, err error) {
	s = skipBlank(s)
	x, n := scanDecimal(s, false)
	if n == 0 || n < len(s) && !isBlank(s[n]) {
		return 0, s, badValue(l, s)
	}
	if h.field == "integer" && (x.point || x.exp) {
		return 0, s, l.fail("%s is not an integer, but the banner says integer", quoted(s[:n]))
	}
	if math.IsInf(x.val, 0) {
		return 0, s, l.fail("%s is too large for a double", quoted(s[:n]))
	}
	c.note(h.field == "real", x)
	return x.val, s[n:], nil
}

// note counts the digits of a value, if it is a real one, and an underflow.
func (c *collector) note(real bool, x decimal) {
	if real {
		c.digits.add(x)
	}
	if x.val == 0 && x.mant != 0 {
		c.tiny++
	}
}

// lineTable remembers the lines of entries that stand one a line, by the
// places where lines without an entry lie between.
type lineTable struct {
	next  int // line of the next entry if none lies between
	jumps []jump
}

type jump struct{ entry, line int }

func (t *lineTable) add(entry, line int) {
	if line != t.next || entry == 0 {
		t.jumps = append(t.jumps, jump{entry, line})
	}
	t.next = line + 1
}

func (t *lineTable) line(entry int) int {
	k := len(t.jumps) - 1
	for t.jumps[k].entry > entry {
		k--
	}
	return t.jumps[k].line + entry - t.jumps[k].entry
}
