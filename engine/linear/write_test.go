package linear

import (
	"bytes"
	"errors"
	"math"
	"strings"
	"testing"
)

func TestWriteMatrixMarket(t *testing.T) {
	a := FromEntries(2, 2, []Entry{{0, 0, 4}, {0, 1, -1.0 / 3}, {1, 0, -1.0 / 3}, {1, 1, 0}})
	var b bytes.Buffer
	if err := WriteMatrixMarket(&b, a, false, []string{"a plate", "two\nlines"}); err != nil {
		t.Fatal(err)
	}
	want := `%%MatrixMarket matrix coordinate real general
% a plate
% two
% lines
2 2 4
1 1 4
1 2 -3.3333333333333331e-01
2 1 -3.3333333333333331e-01
2 2 0
`
	if b.String() != want {
		t.Errorf("got\n%s", b.String())
	}
	b.Reset()
	if err := WriteMatrixMarket(&b, a, true, nil); err != nil {
		t.Fatal(err)
	}
	want = "%%MatrixMarket matrix coordinate real symmetric\n2 2 3\n1 1 4\n2 1 -3.3333333333333331e-01\n2 2 0\n"
	if b.String() != want {
		t.Errorf("got\n%s", b.String())
	}
}

func TestWriteMatrixMarketRefuses(t *testing.T) {
	for _, a := range []*CSR{
		FromEntries(2, 2, []Entry{{0, 1, 1}, {1, 0, 2}}),
		FromEntries(2, 2, []Entry{{0, 1, 1}}),
		FromEntries(2, 3, []Entry{{0, 0, 1}}),
	} {
		if err := WriteMatrixMarket(&bytes.Buffer{}, a, true, nil); err == nil || !strings.Contains(err.Error(), "not symmetric") {
			t.Errorf("written as symmetric: %v", err)
		}
	}
	full := FromEntries(1, 1, []Entry{{0, 0, 1}})
	if err := WriteMatrixMarket(broken{}, full, false, nil); err == nil {
		t.Error("a broken pipe went unseen")
	}
	if err := WriteVector(broken{}, []float64{1}, nil); err == nil {
		t.Error("a broken pipe went unseen")
	}
}

type broken struct{}

// Write fails.
func (broken) Write([]byte) (int, error) { return 0, errors.New("broken pipe") }

func TestWriteVector(t *testing.T) {
	var b bytes.Buffer
	v := []float64{1, 0.1, math.Copysign(0, -1), 1 << 53, -7e22}
	if err := WriteVector(&b, v, []string{"x"}); err != nil {
		t.Fatal(err)
	}
	want := "%%MatrixMarket matrix array real general\n% x\n5 1\n1\n1.0000000000000001e-01\n" +
		"-0.0000000000000000e+00\n9.0071992547409920e+15\n-7.0000000000000004e+22\n"
	if b.String() != want {
		t.Errorf("got\n%s", b.String())
	}
}
