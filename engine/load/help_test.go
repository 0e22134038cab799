package load

import (
	"context"
	"errors"
	"math"
	"os"
	"strings"
	"testing"

	"dwindle/engine/linear"
)

// openData returns the folder of open matrices.
func openData(t testing.TB) string {
	dir := os.Getenv("DWINDLE_OPEN")
	if dir == "" {
		t.Skip("set DWINDLE_OPEN to the folder of open matrices to run this test")
	}
	return dir
}

// load reads a file that must be good.
func load(t testing.TB, path string) linear.System {
	t.Helper()
	s, err := File(context.Background(), path, nil)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// readText reads a system from a literal.
func readText(text string) (linear.System, error) {
	return Read(context.Background(), "t.mtx", strings.NewReader(text), int64(len(text)), nil)
}

// dense lists a small matrix row by row.
func dense(a *linear.CSR) []float64 {
	out := make([]float64, 0, a.NRows*a.NCols)
	for i := range a.NRows {
		for j := range a.NCols {
			out = append(out, a.At(i, j))
		}
	}
	return out
}

// checkCSR checks what every matrix promises.
func checkCSR(t testing.TB, a *linear.CSR) {
	t.Helper()
	if a.NRows != a.NCols || len(a.Ptr) != a.NRows+1 || a.Ptr[0] != 0 ||
		a.Ptr[a.NRows] != len(a.Col) || len(a.Col) != len(a.Val) {
		t.Fatalf("shape: %d x %d, %d pointers, %d columns, %d values", a.NRows, a.NCols, len(a.Ptr), len(a.Col), len(a.Val))
	}
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, j := range cols {
			if j < 0 || int(j) >= a.NCols || k > 0 && j <= cols[k-1] {
				t.Fatalf("row %d: columns %v", i, cols)
			}
			if math.IsNaN(vals[k]) || math.IsInf(vals[k], 0) {
				t.Fatalf("row %d: value %v", i, vals[k])
			}
		}
	}
}

// sameMatrix checks that two matrices are equal bit for bit.
func sameMatrix(t testing.TB, a, b *linear.CSR) {
	t.Helper()
	if a.NRows != b.NRows || a.Entries() != b.Entries() {
		t.Fatalf("%d rows, %d entries; want %d, %d", a.NRows, a.Entries(), b.NRows, b.Entries())
	}
	for i := range a.Ptr {
		if a.Ptr[i] != b.Ptr[i] {
			t.Fatalf("row %d starts at %d; want %d", i, a.Ptr[i], b.Ptr[i])
		}
	}
	for k := range a.Val {
		if a.Col[k] != b.Col[k] || math.Float64bits(a.Val[k]) != math.Float64bits(b.Val[k]) {
			t.Fatalf("entry %d: column %d, %v; want %d, %v", k, a.Col[k], a.Val[k], b.Col[k], b.Val[k])
		}
	}
}

// wantError checks that err is an *Error on a line, with a piece of its text.
func wantError(t *testing.T, err error, line int, text string) {
	t.Helper()
	var e *Error
	if !errors.As(err, &e) {
		t.Errorf("error %v; want line %d: ...%s...", err, line, text)
		return
	}
	if e.Line != line || !strings.Contains(e.Text, text) {
		t.Errorf("error %v; want line %d: ...%s...", err, line, text)
	}
}
