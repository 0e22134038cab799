package precond

import (
	"bytes"
	"context"
	"fmt"
	"strings"
	"testing"

	"dwindle/engine/linear"
)

// Our own incomplete Cholesky factors, written out as Matrix Market and given
// back as L and U, solve like the ones they came from.
func TestOwnFactorsSolveLikeBuiltOnes(t *testing.T) {
	a := plate(40)
	n := a.NRows
	m, _ := made(t, a, "ic:0")
	built := m.(*factors)
	files := map[string]*linear.CSR{"L.mtx": reread(t, withDiagonal(built.lower, ones(n), func(int, int) float64 { return 1 })),
		"U.mtx": reread(t, withDiagonal(built.upper, diagonalOf(built), func(i, _ int) float64 { return 1 / built.inverse[i] }))}
	e, _ := Lookup("factors")
	v, err := linear.Resolve("factors", e.Params, []linear.Arg{{Text: "L.mtx"}, {Text: "U.mtx"}})
	if err != nil {
		t.Fatal(err)
	}
	own, notes, err := e.Build(context.Background(), linear.System{A: a, Open: func(path string) (*linear.CSR, error) { return files[path], nil }}, v, nil)
	if err != nil {
		t.Fatal(err)
	}
	if want := int64(files["L.mtx"].Entries() + files["U.mtx"].Entries() - n); notes.Entries != want {
		t.Errorf("notes say %d entries, want %d", notes.Entries, want)
	}
	x, y, z := make([]float64, n), make([]float64, n), make([]float64, n)
	for start := uint64(1); start < 6; start++ {
		linear.Uniform(x, start)
		built.Apply(y, x)
		own.Apply(z, x)
		linear.Lin(z, 1, z, -1, y)
		if d := linear.Norm2(z) / linear.Norm2(y); d > 1e-14 {
			t.Errorf("the two solves differ by %g", d)
		}
	}
}

func ones(n int) []float64 {
	v := make([]float64, n)
	for i := range v {
		v[i] = 1
	}
	return v
}

// diagonalOf returns the pivots d_i of the factors.
func diagonalOf(f *factors) []float64 {
	d := make([]float64, len(f.inverse))
	for i, w := range f.inverse {
		d[i] = 1 / w
	}
	return d
}

// withDiagonal adds the diagonal d to a strict triangle whose entries are
// multiplied by what times says.
func withDiagonal(strict *linear.CSR, d []float64, times func(i, j int) float64) *linear.CSR {
	var e []linear.Entry
	for i := range d {
		cols, vals := strict.Row(i)
		for k, c := range cols {
			e = append(e, linear.Entry{I: i, J: int(c), V: vals[k] * times(i, int(c))})
		}
		e = append(e, linear.Entry{I: i, J: i, V: d[i]})
	}
	return linear.FromEntries(len(d), len(d), e)
}

// reread writes a matrix as text, 17 digits, and builds it from the lines
// again.
func reread(t *testing.T, a *linear.CSR) *linear.CSR {
	t.Helper()
	var b bytes.Buffer
	if err := linear.WriteMatrixMarket(&b, a, false, nil); err != nil {
		t.Fatal(err)
	}
	return parsed(t, b.String())
}

// parsed reads the entry lines of a Matrix Market text.
func parsed(t *testing.T, text string) *linear.CSR {
	t.Helper()
	var n, m, count int
	var e []linear.Entry
	for _, l := range strings.Split(text, "\n") {
		switch {
		case l == "" || l[0] == '%':
		case count == 0:
			if _, err := fmt.Sscan(l, &n, &m, &count); err != nil {
				t.Fatal(err)
			}
		default:
			var x linear.Entry
			if _, err := fmt.Sscan(l, &x.I, &x.J, &x.V); err != nil {
				t.Fatal(err)
			}
			x.I, x.J = x.I-1, x.J-1
			e = append(e, x)
		}
	}
	return linear.FromEntries(n, m, e)
}
