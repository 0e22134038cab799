package load

import "bytes"

// cards hands out the n numbers of one block of a Fortran formatted file,
// field by field as the format cuts the lines.
type cards struct {
	l    *lines
	f    cardFormat
	what string // what the numbers are, in the singular
	n, k int    // numbers in the block, numbers handed out
	card []byte
}

// next returns the next field without the blanks around it, and its place in
// the format.
func (c *cards) next() ([]byte, cardField, error) {
	at := c.k % len(c.f.fields)
	if at == 0 {
		if err := c.turn(); err != nil {
			return nil, cardField{}, err
		}
	}
	f := c.f.fields[at]
	c.k++
	var raw []byte
	if f.at < len(c.card) {
		raw = c.card[f.at:min(f.at+f.width, len(c.card))]
	}
	text := bytes.Trim(raw, " ")
	switch {
	case len(text) == 0:
		return nil, f, c.l.fail("%s %d of %d is missing", c.what, c.k, c.n)
	case len(raw) < f.width:
		return nil, f, c.l.fail("the line ends within %s %d of %d", c.what, c.k, c.n)
	case bytes.IndexByte(text, '\t') >= 0:
		return nil, f, c.l.fail("a tab stands in %s %d of %d; the format goes by columns", c.what, c.k, c.n)
	case c.k == c.n:
		return text, f, c.tail(f.at + f.width)
	}
	return text, f, nil
}

// turn goes to the next card.
func (c *cards) turn() error {
	card, ok := c.l.next()
	if !ok {
		return c.l.fail("the file ends before %s %d of %d", c.what, c.k+1, c.n)
	}
	c.card = card
	last := c.f.fields[len(c.f.fields)-1]
	return c.tail(last.at + last.width)
}

// tail checks that nothing stands on the card from a column on.
func (c *cards) tail(column int) error {
	if column < len(c.card) && !blank(c.card[column:]) {
		return c.l.fail("the last %s of the line (format %s) is followed by %s", c.what, c.f.text, quoted(skipBlank(c.card[column:])))
	}
	return nil
}

// integer returns the next whole number.
func (c *cards) integer() (int, error) {
	text, _, err := c.next()
	if err != nil {
		return 0, err
	}
	v, rest, ok := count(text)
	if !ok || len(rest) > 0 {
		return 0, c.l.fail("%s %d of %d is %s, not a whole number", c.what, c.k, c.n, quoted(text))
	}
	return v, nil
}
