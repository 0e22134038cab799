package load

import (
	"errors"
	"fmt"
	"strings"
)

// cardField is where one number stands on a card (a line) of a Fortran
// formatted file.
type cardField struct {
	at, width int  // columns, zero-based
	integer   bool // I, else one of E, D, F, G
	decimals  int  // digits after the point where none is written
	scale     int  // the k of kP
}

// cardFormat is what a format such as (16I5) or (1P,3D24.15) says: the fields
// of one card, all of the same kind.
type cardFormat struct {
	text   string
	fields []cardField
}

// cards returns how many cards hold n numbers.
func (f cardFormat) cards(n int) int { return (n + len(f.fields) - 1) / len(f.fields) }

// bytes returns the least number of bytes that hold n numbers.
func (f cardFormat) bytes(n int) int64 { return int64(n) * int64(f.fields[0].width) }

// maxColumns bounds the length of a card.
const maxColumns = 4096

// formatParser reads a format:
//
//	format = "(" item { [","] item } ")"
//	item   = [scale] "P" | [count] "X" | [count] ("I" width | ("E"|"D"|"F"|"G") width "." decimals ["E" digits]) | [count] format
type formatParser struct {
	s     string
	i     int
	at    int // column
	scale int
	out   []cardField
}

// parseCardFormat reads a format; integer tells which kind its fields must be.
func parseCardFormat(s string, integer bool) (cardFormat, error) {
	text := strings.Join(strings.Fields(s), "")
	p := &formatParser{s: strings.ToUpper(text)}
	if p.s == "" {
		return cardFormat{}, errors.New("the format is missing")
	}
	err := p.group(0)
	switch {
	case err != nil:
	case p.i < len(p.s):
		err = errors.New("text after the closing parenthesis")
	case len(p.out) == 0:
		err = errors.New("it has no number in it")
	}
	for _, f := range p.out {
		if err == nil && f.integer != integer {
			err = fmt.Errorf("it is not one of %s", map[bool]string{true: "whole numbers", false: "real numbers"}[integer])
		}
	}
	if err != nil {
		return cardFormat{}, fmt.Errorf("the format %s is not read: %w", quoted([]byte(text)), err)
	}
	return cardFormat{text: text, fields: p.out}, nil
}

// group reads a parenthesised list.
func (p *formatParser) group(depth int) error {
	if p.next() != '(' {
		return errors.New("an opening parenthesis is missing")
	}
	if depth > 1 {
		return errors.New("groups are nested too deep")
	}
	for items := 0; ; items++ {
		switch p.peek() {
		case ')':
			p.i++
			if items == 0 {
				return errors.New("a group is empty")
			}
			return nil
		case ',':
			p.i++
		default:
			if err := p.item(depth); err != nil {
				return err
			}
		}
	}
}

// item reads one descriptor with its repeat count.
func (p *formatParser) item(depth int) error {
	sign := 1
	if c := p.peek(); c == '-' || c == '+' {
		p.i++
		if sign = -1; c == '+' {
			sign = 1
		}
	}
	n, given := p.number()
	if !given {
		n = 1
	}
	switch c := p.peek(); {
	case c == 'P' && given:
		p.i++
		p.scale = sign * n
		return nil
	case sign < 0 || n == 0:
		return errors.New("a repeat count is not positive")
	case c == 'X':
		p.i++
		p.at += n
		return p.checkWidth()
	case c == '(':
		return p.repeat(n, depth)
	}
	return p.descriptor(n)
}

// repeat reads a group n times. A card that does not hold all numbers is
// followed by one that starts at the last group; only where that is the whole
// format are all cards alike.
func (p *formatParser) repeat(n, depth int) error {
	if p.at > 0 {
		return errors.New("a group follows other fields")
	}
	start, scale := p.i, p.scale
	for range n {
		p.i, p.scale = start, scale
		if err := p.group(depth + 1); err != nil {
			return err
		}
	}
	if p.peek() != ')' {
		return errors.New("a group is followed by other fields")
	}
	return nil
}

// descriptor reads a numeric field, n times.
func (p *formatParser) descriptor(n int) error {
	kind := p.next()
	if !strings.ContainsRune("IEDFG", rune(kind)) {
		return errors.New("an edit descriptor is unknown")
	}
	f := cardField{integer: kind == 'I', scale: p.scale}
	var ok bool
	if f.width, ok = p.number(); !ok || f.width == 0 {
		return errors.New("a width is missing")
	}
	if p.peek() == '.' {
		p.i++
		if f.decimals, ok = p.number(); !ok {
			return errors.New("the number of decimals is missing")
		}
	}
	if !f.integer && p.peek() == 'E' {
		p.i++
		if _, ok := p.number(); !ok {
			return errors.New("the number of exponent digits is missing")
		}
	}
	for range n {
		f.at = p.at
		p.out = append(p.out, f)
		p.at += f.width
		if err := p.checkWidth(); err != nil {
			return err
		}
	}
	return nil
}

func (p *formatParser) checkWidth() error {
	if p.at > maxColumns {
		return fmt.Errorf("its cards are longer than %d columns", maxColumns)
	}
	return nil
}

func (p *formatParser) peek() byte {
	if p.i < len(p.s) {
		return p.s[p.i]
	}
	return 0
}

func (p *formatParser) next() byte {
	c := p.peek()
	p.i++
	return c
}

// number reads a short whole number if one stands here.
func (p *formatParser) number() (n int, given bool) {
	for c := p.peek(); c >= '0' && c <= '9'; c = p.peek() {
		if n = n*10 + int(c-'0'); n > maxColumns {
			n = maxColumns + 1
		}
		given = true
		p.i++
	}
	return n, given
}
