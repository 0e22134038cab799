package linear

import (
	"bufio"
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"
)

// WriteMatrixMarket writes a as a Matrix Market coordinate file of real
// values, the comment lines behind the banner. With symmetric only the lower
// triangle is written; it is an error if a is not exactly symmetric.
//
// Whole numbers below 2^53 are written as such, any other value with 17
// significant digits, so that every double reads back bit for bit and a
// reader that counts digits sees that it does.
func WriteMatrixMarket(w io.Writer, a *CSR, symmetric bool, comment []string) error {
	kind, stored := "general", a.Entries()
	if symmetric {
		var err error
		if stored, err = a.lowerEntries(); err != nil {
			return err
		}
		kind = "symmetric"
	}
	b := bufio.NewWriter(w)
	writeHead(b, "coordinate real "+kind, comment)
	fmt.Fprintf(b, "%d %d %d\n", a.NRows, a.NCols, stored)
	var line []byte
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, j := range cols {
			if symmetric && int(j) > i {
				break
			}
			line = strconv.AppendInt(line[:0], int64(i+1), 10)
			line = strconv.AppendInt(append(line, ' '), int64(j)+1, 10)
			line = appendValue(append(line, ' '), vals[k])
			if _, err := b.Write(append(line, '\n')); err != nil {
				return err
			}
		}
	}
	return b.Flush()
}

// WriteVector writes v as a Matrix Market array file of one column, its
// values as WriteMatrixMarket writes them.
func WriteVector(w io.Writer, v []float64, comment []string) error {
	b := bufio.NewWriter(w)
	writeHead(b, "array real general", comment)
	fmt.Fprintf(b, "%d 1\n", len(v))
	var line []byte
	for _, x := range v {
		line = appendValue(line[:0], x)
		if _, err := b.Write(append(line, '\n')); err != nil {
			return err
		}
	}
	return b.Flush()
}

// lowerEntries counts the entries on and below the diagonal of a symmetric
// matrix.
func (a *CSR) lowerEntries() (n int, err error) {
	if a.NRows != a.NCols {
		return 0, fmt.Errorf("a matrix of %d x %d is not symmetric", a.NRows, a.NCols)
	}
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, j := range cols {
			if int(j) <= i {
				n++
			}
			if a.At(int(j), i) != vals[k] {
				return 0, fmt.Errorf("entries (%d,%d) and (%d,%d) differ: the matrix is not symmetric", i+1, j+1, j+1, i+1)
			}
		}
	}
	return n, nil
}

// writeHead writes the banner and the comments, one % line for each line.
func writeHead(b *bufio.Writer, kind string, comment []string) {
	b.WriteString("%%MatrixMarket matrix " + kind + "\n")
	for _, c := range comment {
		for _, s := range strings.Split(c, "\n") {
			b.WriteString("% " + strings.ReplaceAll(s, "\r", "") + "\n")
		}
	}
}

// appendValue appends x so that it reads back to the same bits.
func appendValue(b []byte, x float64) []byte {
	if x == math.Trunc(x) && math.Abs(x) < 1<<53 && !(x == 0 && math.Signbit(x)) {
		return strconv.AppendInt(b, int64(x), 10)
	}
	return strconv.AppendFloat(b, x, 'e', 16, 64)
}
