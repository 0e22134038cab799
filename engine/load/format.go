package load

import (
	"bytes"

	"dwindle/engine/linear"
)

// format looks at the first lines and returns the reader for them.
func (l *lines) format() (func(*lines) (linear.System, error), error) {
	head := l.preview()
	if l.err != nil {
		return nil, l.err
	}
	switch {
	case len(bytes.TrimSpace(head)) == 0:
		return nil, l.failAt(1, "the file is empty")
	case bytes.IndexByte(head, 0) >= 0:
		return nil, l.failAt(1, "this is not a text file")
	case isBanner(head):
		return readMatrixMarket, nil
	case head[0] == '%':
		return nil, l.failAt(1, "the first line of a Matrix Market file must begin with %%%%MatrixMarket")
	case isBoeing(head):
		return readBoeing, nil
	case isList(head):
		return nil, l.failAt(1, "a list of numbers without a header; put a first line "+
			"\"%%%%MatrixMarket matrix coordinate real general\" and a second line \"rows columns entries\" before it")
	}
	return nil, l.failAt(1, "neither a Matrix Market banner (%%%%MatrixMarket ...) nor a Harwell-Boeing header")
}

const banner = "%%matrixmarket"

func isBanner(head []byte) bool {
	return len(head) >= len(banner) && bytes.EqualFold(head[:len(banner)], []byte(banner))
}

// isBoeing tells a Harwell–Boeing header by the three letters that begin its
// third line and the number on its second.
func isBoeing(head []byte) bool {
	rows := bytes.SplitN(head, []byte{'\n'}, 4)
	if len(rows) < 3 || len(rows[2]) < 4 {
		return false
	}
	for _, c := range rows[2][:3] {
		if c |= 0x20; c < 'a' || c > 'z' {
			return false
		}
	}
	_, _, ok := count(rows[1])
	return ok
}

// isList tells whether the first line that is not blank holds only numbers.
func isList(head []byte) bool {
	line, _, _ := bytes.Cut(bytes.TrimLeft(head, " \t\r\n"), []byte{'\n'})
	for _, w := range words(line, 8) {
		if _, n := scanDecimal(w, false); n != len(w) {
			return false
		}
	}
	return true
}
