package report

import (
	"bufio"
	"fmt"
	"io"
	"strconv"
	"strings"
)

// Vector is a vector behind a finding or the end of a trial, in the row order
// of the system.
type Vector struct {
	Name    string // of its file, without extension: letters, digits, dot, dash
	Comment string // what it is, in one sentence with its numbers
	Values  []float64
}

// VectorName makes a file name from words: what a shell or a file system
// might take for something else becomes a dash.
func VectorName(words ...string) string {
	return strings.Trim(strings.Map(func(r rune) rune {
		if r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r >= '0' && r <= '9' || r == '.' || r == '_' {
			return r
		}
		return '-'
	}, clip(plain(strings.Join(words, "-")), 100)), "-.")
}

// WriteVector writes a vector as a Matrix Market array of n rows and one
// column, 17 significant digits each, with a comment that says what it is.
func WriteVector(w io.Writer, d Document, v Vector) error {
	return writeArray(w, v.Values, fmt.Sprintf("%s; of %s, dwindle %s", plain(v.Comment), clip(plain(d.System.Name), 200), clip(plain(d.Version), 100)))
}

// writeArray writes numbers as a Matrix Market array under comment lines.
func writeArray(w io.Writer, x []float64, comment string) error {
	b := bufio.NewWriter(w)
	fmt.Fprintln(b, "%%MatrixMarket matrix array real general")
	for _, l := range wrap(comment, Width-2) {
		fmt.Fprintln(b, "% "+l)
	}
	fmt.Fprintf(b, "%d 1\n", len(x))
	var line []byte
	for _, v := range x {
		line = append(strconv.AppendFloat(line[:0], v, 'e', 16, 64), '\n')
		b.Write(line) // the writer keeps its first error
	}
	return b.Flush()
}
