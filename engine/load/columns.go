package load

import "math"

// readColumns reads a plain file: every line holds the same number of
// numbers.
func (p *picker) readColumns() error {
	l := p.l
	for {
		line, ok := l.next()
		if !ok {
			break
		}
		if s := skipBlank(line); len(s) == 0 || s[0] == '%' || s[0] == '#' {
			continue
		}
		if err := p.row(line); err != nil {
			return err
		}
	}
	switch {
	case l.err != nil:
		return l.err
	case len(p.v) != p.n:
		return l.fail("the vector has %d rows; the matrix has %d", len(p.v), p.n)
	}
	return nil
}

// row reads one line; the first one tells how many columns there are.
func (p *picker) row(line []byte) error {
	cols := 0
	pick := math.NaN()
	for rest := skipBlank(line); len(rest) > 0; rest = skipBlank(rest) {
		x, n := scanDecimal(rest, false)
		if n == 0 || n < len(rest) && !isBlank(rest[n]) {
			return badValue(p.l, rest)
		}
		if math.IsInf(x.val, 0) {
			return p.l.fail("%s is too large for a double", quoted(rest[:n]))
		}
		if cols++; cols == max(p.col, 1) {
			pick = x.val
		}
		rest = rest[n:]
	}
	switch {
	case p.cols == 0:
		if err := p.setColumns(cols); err != nil {
			return err
		}
	case cols != p.cols:
		return p.l.fail("the line holds %d numbers, the ones before it %d", cols, p.cols)
	}
	if len(p.v) == p.n {
		return p.l.fail("the vector has more than the %d rows of the matrix", p.n)
	}
	p.v = append(p.v, pick)
	return nil
}
