package linear

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// sparse returns a random matrix with about three entries a row.
func sparse(rows, cols int, seed uint64) *CSR {
	r := rand.New(rand.NewPCG(seed, 1))
	var e []Entry
	for k := 0; k < 3*rows; k++ {
		e = append(e, Entry{I: r.IntN(rows), J: r.IntN(cols), V: r.Float64() - 0.5})
	}
	return FromEntries(rows, cols, e)
}

func denseOf(a *CSR) *mat.Dense {
	d := mat.NewDense(a.NRows, a.NCols, nil)
	for i := 0; i < a.NRows; i++ {
		cols, vals := a.Row(i)
		for k, c := range cols {
			d.Set(i, int(c), vals[k])
		}
	}
	return d
}

// gonum's dense product is the oracle.
func TestMultiply(t *testing.T) {
	for _, shape := range [][3]int{{1, 1, 1}, {40, 30, 50}, {5, 200, 3}, {60, 4, 60}} {
		a, b := sparse(shape[0], shape[1], 3), sparse(shape[1], shape[2], 4)
		c := Multiply(a, b)
		var want, diff mat.Dense
		want.Mul(denseOf(a), denseOf(b))
		diff.Sub(denseOf(c), &want)
		if e := mat.Norm(&diff, 2); !(e <= 1e-14) {
			t.Errorf("%v: ‖C − AB‖ = %g", shape, e)
		}
		for i := 0; i < c.NRows; i++ {
			if cols, _ := c.Row(i); !ascending(cols) {
				t.Errorf("%v: row %d is %v", shape, i, cols)
			}
		}
	}
}

// A product of several parts is the same bits for any number of threads.
func TestMultiplyThreads(t *testing.T) {
	defer SetThreads(1)
	SetThreads(1)
	a := sparse(5*productRows+17, 3000, 5)
	at := a.Transpose()
	want := Multiply(at, a)
	for _, threads := range []int{2, 3} {
		SetThreads(threads)
		got := Multiply(at, a)
		same := slices.Equal(got.Ptr, want.Ptr) && slices.Equal(got.Col, want.Col)
		for k := range want.Val {
			same = same && math.Float64bits(got.Val[k]) == math.Float64bits(want.Val[k])
		}
		if !same {
			t.Errorf("%d threads give another product", threads)
		}
	}
}

func TestMultiplyShapes(t *testing.T) {
	if caught(func() { Multiply(sparse(3, 4, 1), sparse(3, 4, 1)) }) == nil {
		t.Error("a product of 3 x 4 and 3 x 4 did not panic")
	}
	if c := Multiply(&CSR{NCols: 2, Ptr: []int{0}}, sparse(2, 2, 1)); c.NRows != 0 || c.NCols != 2 {
		t.Errorf("an empty product is %d x %d", c.NRows, c.NCols)
	}
}
