package load

import "dwindle/engine/linear"

// readBoeing reads a Harwell–Boeing or Rutherford–Boeing file: compressed
// columns on formatted cards.
func readBoeing(l *lines) (linear.System, error) {
	h, err := readHBHeader(l)
	if err == nil && h.cards[4] > 0 {
		err = h.readRHSHeader(l)
	}
	if err != nil {
		return linear.System{}, err
	}
	c := &collector{n: h.n, sym: h.sym, pattern: h.field == "pattern"}
	firstIndex, err := h.readPattern(l, c)
	if err == nil && h.field != "pattern" {
		err = h.readValues(l, c)
	}
	var b []float64
	if err == nil && h.cards[4] > 0 {
		b, err = h.readRHS(l)
	}
	if err == nil && !h.rhs.skipped {
		err = l.onlyBlank(false, "the last number")
	}
	if err != nil {
		return linear.System{}, err
	}
	s, err := c.system(l, h.title(), func(k int) int { return firstIndex + k/len(h.ind.fields) })
	s.Source.RHS = b
	s.Source.Notes = append(s.Source.Notes, h.rhs.notes...)
	return s, err
}

// readPattern reads the column pointers and the row indices. It returns the
// line on which the indices begin.
func (h *hbHeader) readPattern(l *lines, c *collector) (firstIndex int, err error) {
	ptr, err := h.readPointers(l)
	if err != nil {
		return 0, err
	}
	firstIndex = l.num + 1
	in := &cards{l: l, f: h.ind, what: "row index", n: h.entries}
	for j := range h.n {
		last := -1
		for k := ptr[j]; k < ptr[j+1]; k++ {
			r, err := in.integer()
			i := r - 1
			switch {
			case err != nil:
				return 0, err
			case i < 0 || i >= h.n:
				return 0, l.fail("row index %d of column %d lies outside; rows run from 1 to %d", r, j+1, h.n)
			case i <= last:
				return 0, l.fail("row index %d of column %d follows %d; the rows of a column must ascend", r, j+1, last+1)
			case h.sym == skew && i == j:
				return 0, l.fail("(%d,%d) is stored, but a skew-symmetric matrix has no diagonal", r, r)
			}
			last = i
			c.add(int32(i), int32(j), 1, h.entries-k)
		}
	}
	return firstIndex, nil
}

// readPointers reads where the columns begin, zero-based, n+1 of them.
func (h *hbHeader) readPointers(l *lines) ([]int, error) {
	in := &cards{l: l, f: h.ptr, what: "column pointer", n: h.n + 1}
	room := h.n + 1
	if l.size < 0 {
		room = min(room, pieceLen)
	}
	ptr := make([]int, 0, room)
	for j := 0; j <= h.n; j++ {
		p, err := in.integer()
		switch {
		case err != nil:
			return nil, err
		case j == 0 && p != 1:
			return nil, l.fail("the first column pointer is %d; it must be 1", p)
		case j > 0 && p-1 < ptr[j-1]:
			return nil, l.fail("column pointer %d is %d, less than the one before it", j+1, p)
		case p-1 > h.entries:
			return nil, l.fail("column pointer %d is %d; the header claims %d entries", j+1, p, h.entries)
		case j == h.n && p-1 != h.entries:
			return nil, l.fail("the last column pointer is %d; for the %d entries of the header it must be %d", p, h.entries, h.entries+1)
		}
		ptr = append(ptr, p-1)
	}
	return ptr, nil
}

// readValues reads the values of the entries already placed.
func (h *hbHeader) readValues(l *lines, c *collector) error {
	in := &cards{l: l, f: h.val, what: "value", n: h.entries}
	for _, p := range c.t.pieces {
		for k := range p {
			x, err := in.value()
			if err != nil {
				return err
			}
			c.note(h.field == "real", x)
			if x.val == 0 {
				c.zeros++
			}
			p[k].val = x.val
		}
	}
	return nil
}
