package load

import (
	"bytes"
	"strings"
)

// hbHeader is what the first lines of a Harwell–Boeing or Rutherford–Boeing
// file say (Duff, Grimes, Lewis, ACM TOMS 15, 1989, and RAL-TR-97-031, 1997).
type hbHeader struct {
	rutherford bool   // Rutherford–Boeing: no right-hand side
	cards      [5]int // lines: total, pointers, indices, values, right-hand sides
	field      string // real, integer or pattern
	sym        symmetry
	n, entries int
	ptr, ind   cardFormat
	val        cardFormat // unless a pattern
	rhs        hbRHS
}

// title names the format for people.
func (h hbHeader) title() string {
	name := "Harwell-Boeing"
	if h.rutherford {
		name = "Rutherford-Boeing"
	}
	return name + " " + h.field + " " + [...]string{"unsymmetric", "symmetric", "skew-symmetric"}[h.sym] + " assembled"
}

// column cuts the columns from..to-1 out of a card.
func column(card []byte, from, to int) []byte {
	if from >= len(card) {
		return nil
	}
	return bytes.Trim(card[from:min(to, len(card))], " \t")
}

// readHBHeader reads the four or five header lines.
func readHBHeader(l *lines) (h hbHeader, err error) {
	var card [5][]byte
	for k := range 4 {
		line, ok := l.next()
		if !ok {
			return h, l.fail("the header ends after %d of 4 lines", k)
		}
		card[k] = line
		switch k {
		case 1:
			err = h.parseCounts(l, line)
		case 2:
			err = h.parseType(l, line)
		case 3:
			err = h.parseFormats(l, line)
		}
		if err != nil {
			return h, err
		}
	}
	return h, nil
}

// parseCounts reads how many lines each block takes; a blank count is 0.
func (h *hbHeader) parseCounts(l *lines, card []byte) error {
	names := [5]string{"lines in total", "pointer lines", "index lines", "value lines", "right-hand side lines"}
	h.rutherford = len(column(card, 56, 70)) == 0
	for k := range h.cards {
		if err := countColumn(l, card, 14*k, names[k], &h.cards[k]); err != nil {
			return err
		}
	}
	return nil
}

// countColumn reads the 14 columns that start at from.
func countColumn(l *lines, card []byte, from int, what string, v *int) error {
	text := column(card, from, from+14)
	if len(text) == 0 {
		return nil
	}
	var ok bool
	var rest []byte
	if *v, rest, ok = count(text); !ok || len(rest) > 0 {
		return l.fail("the number of %s, columns %d to %d, is %s", what, from+1, from+14, quoted(text))
	}
	return nil
}

// parseType reads the type and the shape.
func (h *hbHeader) parseType(l *lines, card []byte) error {
	code := strings.ToLower(string(column(card, 0, 3)))
	if len(code) != 3 {
		return l.fail("the matrix type, three letters, is %s", quoted([]byte(code)))
	}
	if code != string(column(card, 0, 3)) {
		h.rutherford = false
	}
	var rows, cols int
	for k, v := range []*int{&rows, &cols, &h.entries} {
		if err := countColumn(l, card, 14*(k+1), [...]string{"rows", "columns", "entries"}[k], v); err != nil {
			return err
		}
	}
	fields := map[byte]string{'r': "real", 'i': "integer", 'p': "pattern"}
	switch h.field = fields[code[0]]; {
	case code[0] == 'c':
		return l.fail("complex values are not read yet")
	case h.field == "":
		return l.fail("the matrix type %s begins with none of R, I, P", quoted([]byte(code)))
	case code[2] == 'e':
		return l.fail("the matrix is given as elements, not assembled; only assembled ones are read")
	case code[2] != 'a':
		return l.fail("the matrix type %s does not end with A, assembled", quoted([]byte(code)))
	}
	if err := h.parseSymmetry(l, code); err != nil {
		return err
	}
	if rows > maxOrder || cols > maxOrder {
		return l.fail("the size %d x %d is not read; %d rows are the most", rows, cols, maxOrder)
	}
	h.n = rows
	return checkOrder(l, rows, cols, h.entries)
}

func (h *hbHeader) parseSymmetry(l *lines, code string) error {
	switch code[1] {
	case 'u', 'r':
	case 's':
		h.sym = symmetric
	case 'z':
		h.sym = skew
	case 'h':
		return l.fail("hermitian goes with complex values, which are not read yet")
	default:
		return l.fail("the matrix type %s has none of S, U, Z, R in its middle", quoted([]byte(code)))
	}
	if h.sym == skew && h.field == "pattern" {
		return l.fail("a pattern has no values, so that it cannot be skew-symmetric")
	}
	return nil
}

// parseFormats reads the formats and checks that the counts fit them and that
// the rest of the file can hold the numbers.
func (h *hbHeader) parseFormats(l *lines, card []byte) (err error) {
	if h.ptr, err = parseCardFormat(string(column(card, 0, 16)), true); err != nil {
		return l.fail("column pointers: %v", err)
	}
	if h.ind, err = parseCardFormat(string(column(card, 16, 32)), true); err != nil {
		return l.fail("row indices: %v", err)
	}
	text := string(column(card, 32, 52))
	needs := h.ptr.bytes(h.n+1) + h.ind.bytes(h.entries)
	if h.field != "pattern" {
		whole := h.field == "integer" || strings.ContainsAny(text, "iI")
		if h.val, err = parseCardFormat(text, whole); err != nil {
			return l.fail("values: %v", err)
		}
		needs += h.val.bytes(h.entries)
	}
	h.rhs.format = string(column(card, 52, 72))
	if !l.canHold(needs, 1) {
		return l.fail("the header claims %d columns and %d entries, more than the file can hold", h.n, h.entries)
	}
	return h.checkCards(l)
}

// checkCards compares the numbers of lines with what the formats make them.
func (h *hbHeader) checkCards(l *lines) error {
	values := 0
	if h.field != "pattern" {
		values = h.val.cards(h.entries)
	}
	for _, b := range []struct {
		what       string
		said, need int
	}{
		{"pointer", h.cards[1], h.ptr.cards(h.n + 1)},
		{"index", h.cards[2], h.ind.cards(h.entries)},
		{"value", h.cards[3], values},
	} {
		if b.said != b.need {
			return l.failAt(2, "the header announces %d %s lines; by its size and format there are %d", b.said, b.what, b.need)
		}
	}
	return nil
}
