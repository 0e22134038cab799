package load

import (
	"bytes"
	"context"
	"strings"
	"unicode/utf8"
)

const (
	longestLabel = 48 // characters; what is longer is cut
	mostFields   = 64
)

// LabelsFile reads the labels of n rows, one a line, compressed with gzip or
// not. Blanks around a label do not count, an empty line is a row without a
// label, and characters that do not print become question marks.
func LabelsFile(path string, n int) ([]string, error) {
	labels := make([]string, 0, n)
	err := eachLine(path, n, "labels", func(l *lines, s []byte) error {
		labels = append(labels, labelText(s))
		return nil
	})
	return labels, err
}

// FieldsFile reads the field of unknowns that each of n rows belongs to, one
// name a line. It returns the names in the order in which they first appear,
// and the index of each row's field among them.
func FieldsFile(path string, n int) (names []string, of []int32, err error) {
	index := map[string]int32{}
	err = eachLine(path, n, "fields", func(l *lines, s []byte) error {
		name := string(bytes.TrimSpace(s))
		k, known := index[name]
		switch {
		case name == "":
			return l.fail("the name of a field is missing")
		case !known && len(names) == mostFields:
			return l.fail("more than %d different fields; labels of single rows are given by --labels", mostFields)
		case !known:
			k = int32(len(names))
			index[name], names = k, append(names, labelText(s))
		}
		of = append(of, k)
		return nil
	})
	return names, of, err
}

// eachLine hands out exactly n lines; empty ones may follow.
func eachLine(path string, n int, what string, take func(*lines, []byte) error) error {
	f, size, err := open(path)
	if err != nil {
		return err
	}
	defer f.Close()
	l, err := newLines(context.Background(), path, f, size, nil)
	if err != nil {
		return err
	}
	for row := range n {
		s, ok := l.next()
		if !ok {
			return l.fail("the file has %s for %d rows; the matrix has %d", what, row, n)
		}
		if err := take(l, s); err != nil {
			return err
		}
	}
	for {
		s, ok := l.next()
		if !ok {
			return l.err
		}
		if !blank(s) {
			return l.fail("the file has %s for more than the %d rows of the matrix", what, n)
		}
	}
}

// labelText is a line as it may be shown.
func labelText(line []byte) string {
	s := strings.Map(printable, string(bytes.TrimSpace(line)))
	if utf8.RuneCountInString(s) > longestLabel {
		s = string([]rune(s)[:longestLabel-3]) + "..."
	}
	return s
}
