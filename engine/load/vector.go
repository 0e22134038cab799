package load

import (
	"context"
	"fmt"
	"io"
	"os"
	"strconv"
	"strings"
)

// VectorFile reads a vector of length n from a Matrix Market array file or
// from plain columns of numbers, compressed with gzip or not. The path may
// end in :COL, which picks a column, counted from 1; a file whose real name
// ends so wins. Of several columns without a choice the first is used, and a
// note says so. Lines of a plain file that begin with % or # are comments.
func VectorFile(path string, n int) (v []float64, notes []string, err error) {
	name, col, err := splitColumn(path)
	if err != nil {
		return nil, nil, err
	}
	f, size, err := open(name)
	if err != nil {
		return nil, nil, err
	}
	defer f.Close()
	return readVector(name, f, size, n, col)
}

// splitColumn splits a path into the file's name and the column, 0 where none
// is chosen.
func splitColumn(path string) (name string, col int, err error) {
	k := strings.LastIndexByte(path, ':')
	if k < 0 {
		return path, 0, nil
	}
	if _, err := os.Stat(path); err == nil {
		return path, 0, nil
	}
	if strings.Trim(path[k+1:], "0123456789") != "" || k+1 == len(path) {
		return path, 0, nil
	}
	col, err = strconv.Atoi(path[k+1:])
	if err != nil || col < 1 {
		return "", 0, &Error{File: path[:k], Text: fmt.Sprintf("column %s does not exist; columns are counted from 1", path[k+1:])}
	}
	return path[:k], col, nil
}

// ColumnsFile reads every column of a file as VectorFile reads one; all have
// length n.
func ColumnsFile(path string, n int) (columns [][]float64, err error) {
	for col, cols := 1, 1; col <= cols; col++ {
		f, size, err := open(path)
		if err != nil {
			return nil, err
		}
		p, err := pick(path, f, size, n, col)
		f.Close()
		if err != nil {
			return nil, err
		}
		columns, cols = append(columns, p.v), p.cols
	}
	return columns, nil
}

// readVector reads column col of r, the first where col is 0.
func readVector(name string, r io.Reader, size int64, n, col int) ([]float64, []string, error) {
	p, err := pick(name, r, size, n, col)
	if err != nil {
		return nil, nil, err
	}
	var notes []string
	if p.cols > 1 && col == 0 {
		notes = append(notes, fmt.Sprintf("The file holds %d columns; the first is used (add :COL to its name to pick another).", p.cols))
	}
	return p.v, notes, nil
}

// pick reads column col of r, the first where col is 0.
func pick(name string, r io.Reader, size int64, n, col int) (*picker, error) {
	l, err := newLines(context.Background(), name, r, size, nil)
	if err != nil {
		return nil, err
	}
	p := &picker{l: l, n: n, col: col}
	if isBanner(l.preview()) {
		err = p.readArray()
	} else {
		err = p.readColumns()
	}
	return p, err
}

// picker takes one column of length n out of a file.
type picker struct {
	l    *lines
	n    int
	col  int // 1-based, 0 for the first without a choice
	cols int // columns in the file
	v    []float64
}

// setColumns takes note of how many columns the file has.
func (p *picker) setColumns(cols int) error {
	if cols < 1 {
		return p.l.fail("the file holds no column")
	}
	if p.cols = cols; p.col > cols {
		return p.l.fail("column %d does not exist; the file has %d", p.col, cols)
	}
	return nil
}

// readArray reads a Matrix Market array file.
func (p *picker) readArray() error {
	l := p.l
	h, err := readMMHeader(l)
	switch {
	case err != nil:
		return err
	case !h.array || h.sym != general:
		return l.fail("a vector must be in array format, general, not %s", h.title())
	case h.rows != p.n:
		return l.fail("the vector has %d rows; the matrix has %d", h.rows, p.n)
	}
	if err := p.setColumns(h.cols); err != nil {
		return err
	}
	first := (max(p.col, 1) - 1) * h.rows
	return h.eachValue(l, new(collector), func(k int, v float64) {
		if k >= first && k < first+h.rows {
			p.v = append(p.v, v)
		}
	})
}
