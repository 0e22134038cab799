package load

import (
	"bytes"
	"strings"
)

// mmHeader is what the banner and the size line of a Matrix Market file say.
type mmHeader struct {
	array      bool   // array format, else coordinate
	field      string // real, integer or pattern
	sym        symmetry
	rows, cols int
	stored     int // lines with entries
}

// title names the format for people.
func (h mmHeader) title() string {
	format := "coordinate"
	if h.array {
		format = "array"
	}
	return "Matrix Market " + format + " " + h.field + " " + [...]string{"general", "symmetric", "skew-symmetric"}[h.sym]
}

// readMMHeader reads the banner, the comments and the size line.
func readMMHeader(l *lines) (mmHeader, error) {
	line, _ := l.next()
	h, err := parseBanner(l, line)
	if err != nil {
		return h, err
	}
	for {
		line, ok := l.next()
		switch {
		case !ok:
			return h, l.fail("the size line is missing")
		case blank(line) || line[0] == '%':
			continue
		}
		return h, h.parseSize(l, line)
	}
}

func parseBanner(l *lines, line []byte) (h mmHeader, err error) {
	w := words(bytes.ToLower(line), 6)
	if len(w) != 5 || string(w[0]) != banner {
		return h, l.fail("the banner must be: %%%%MatrixMarket matrix, then format, field and symmetry")
	}
	object, format, field, sym := string(w[1]), string(w[2]), string(w[3]), string(w[4])
	if object != "matrix" {
		return h, l.fail("the object %s is not read; it must be matrix", quoted(w[1]))
	}
	switch format {
	case "coordinate", "array":
		h.array = format == "array"
	default:
		return h, l.fail("the format %s is neither coordinate nor array", quoted(w[2]))
	}
	switch field {
	case "real", "integer", "pattern":
		h.field = field
	case "double":
		h.field = "real"
	case "complex":
		return h, l.fail("complex values are not read yet")
	default:
		return h, l.fail("the field %s is none of real, integer, pattern", quoted(w[3]))
	}
	switch sym {
	case "general":
	case "symmetric":
		h.sym = symmetric
	case "skew-symmetric":
		h.sym = skew
	case "hermitian":
		return h, l.fail("hermitian goes with complex values, which are not read yet")
	default:
		return h, l.fail("the symmetry %s is none of general, symmetric, skew-symmetric", quoted(w[4]))
	}
	if h.field == "pattern" && (h.array || h.sym == skew) {
		return h, l.fail("a pattern has no values, so that it cannot be %s", strings.Join([]string{format, sym}, " "))
	}
	return h, nil
}

// parseSize reads the size line and checks that the rest of the file can hold
// what it claims.
func (h *mmHeader) parseSize(l *lines, line []byte) error {
	want, names := 3, "rows, columns and entries"
	if h.array {
		want, names = 2, "rows and columns"
	}
	var size [3]int
	rest := line
	for k := range want {
		var ok bool
		if size[k], rest, ok = count(rest); !ok {
			return l.fail("the size line must hold %d whole numbers, %s; it is %s", want, names, quoted(line))
		}
	}
	if !blank(rest) {
		return l.fail("the size line must hold %d whole numbers, %s; it is %s", want, names, quoted(line))
	}
	h.rows, h.cols, h.stored = size[0], size[1], size[2]
	if h.rows > maxOrder || h.cols > maxOrder {
		return l.fail("the size %d x %d is not read; %d rows are the most", h.rows, h.cols, maxOrder)
	}
	if h.array {
		h.stored = h.rows * h.cols
	}
	if h.array && h.sym != general {
		h.stored = h.rows * (h.rows + 1) / 2
		if h.sym == skew {
			h.stored -= h.rows
		}
	}
	if !l.canHold(int64(h.stored), h.lineBytes()) {
		return l.fail("the size line claims %d entries, more than the file can hold", h.stored)
	}
	return nil
}

// lineBytes is the least number of bytes that one entry takes.
func (h *mmHeader) lineBytes() int64 {
	switch {
	case h.array:
		return 2
	case h.field == "pattern":
		return 4
	}
	return 6
}
