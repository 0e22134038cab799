package load

import (
	"fmt"
	"strings"
)

// hbRHS is the right-hand side part of a Harwell–Boeing file.
type hbRHS struct {
	format  string
	count   int  // right-hand sides
	blocks  int  // blocks of count vectors: right-hand sides, guesses, solutions
	skipped bool // the block is of a kind that is not read
	notes   []string
}

// readRHSHeader reads the fifth header line: F for full vectors, then G where
// starting guesses and X where solutions follow.
func (h *hbHeader) readRHSHeader(l *lines) error {
	card, ok := l.next()
	if !ok {
		return l.fail("the header line of the right-hand sides is missing")
	}
	kind := strings.ToUpper(string(card[:min(3, len(card))])) + "   "
	if err := countColumn(l, card, 14, "right-hand sides", &h.rhs.count); err != nil {
		return err
	}
	switch {
	case kind[0] == 'M':
		h.rhs.skipped = true
		h.rhs.notes = []string{"The file's right-hand sides are stored sparse and were not read."}
		return nil
	case kind[0] != 'F':
		return l.fail("the type of the right-hand sides, %s, begins with neither F nor M", quoted([]byte(kind[:3])))
	case h.rhs.count == 0:
		return l.fail("the header announces right-hand side lines, but no right-hand side")
	}
	h.rhs.blocks = 1
	for k, letter := range "GX" {
		switch c := kind[k+1]; {
		case c == byte(letter):
			h.rhs.blocks++
		case c != ' ' && c != 'N': // some writers say no by N
			return l.fail("the type of the right-hand sides is %s; %c, N or a blank is wanted in column %d", quoted([]byte(kind[:3])), letter, k+2)
		}
	}
	return nil
}

// readRHS reads the first right-hand side and checks the others' form.
func (h *hbHeader) readRHS(l *lines) ([]float64, error) {
	if h.rhs.skipped {
		return nil, h.skipRHS(l)
	}
	f, err := parseCardFormat(h.rhs.format, strings.ContainsAny(h.rhs.format, "iI"))
	if err != nil {
		return nil, l.failAt(4, "right-hand sides: %v", err)
	}
	if h.rhs.count > largest/h.n {
		return nil, l.failAt(5, "%d right-hand sides are more than the file can hold", h.rhs.count)
	}
	total := h.rhs.count * h.n
	if need := f.cards(total) * h.rhs.blocks; need != h.cards[4] {
		return nil, l.failAt(2, "the header announces %d right-hand side lines; by their number and format there are %d", h.cards[4], need)
	}
	if !l.canHold(f.bytes(total), 1) {
		return nil, l.failAt(5, "%d right-hand sides are more than the file can hold", h.rhs.count)
	}
	return h.readVectors(l, f, total)
}

func (h *hbHeader) readVectors(l *lines, f cardFormat, total int) ([]float64, error) {
	b := make([]float64, 0, h.n)
	for block := range h.rhs.blocks {
		in := &cards{l: l, f: f, what: "right-hand side value", n: total}
		if block > 0 {
			in.what = "guess or solution value"
		}
		for k := range total {
			x, err := in.value()
			if err != nil {
				return nil, err
			}
			if block == 0 && k < h.n {
				b = append(b, x.val)
			}
		}
	}
	if h.rhs.count > 1 {
		h.rhs.notes = append(h.rhs.notes, fmt.Sprintf("The file holds %d right-hand sides; the first is used.", h.rhs.count))
	}
	if h.rhs.blocks > 1 {
		h.rhs.notes = append(h.rhs.notes, "The file also holds starting guesses or solutions; they are not used.")
	}
	return b, nil
}

// skipRHS passes over right-hand sides that are not read.
func (h *hbHeader) skipRHS(l *lines) error {
	for k := range h.cards[4] {
		if _, ok := l.next(); !ok {
			return l.fail("the file ends after %d of %d right-hand side lines", k, h.cards[4])
		}
	}
	return nil
}
