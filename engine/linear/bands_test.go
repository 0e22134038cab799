package linear

import (
	"slices"
	"testing"
)

// triangleOf is a strictly lower triangle of order n with entries at the
// distances, each left out by one row in so many.
func triangleOf(n, gaps int, distances ...int) *CSR {
	var entries []Entry
	u := make([]float64, 2*n)
	for _, d := range distances {
		Uniform(u, uint64(d))
		for i := d; i < n; i++ {
			if u[n+i]*float64(gaps) < float64(gaps)-2 {
				entries = append(entries, Entry{I: i, J: i - d, V: u[i] / float64(len(distances))})
			}
		}
	}
	return FromEntries(n, n, entries)
}

// rowByRow solves (I + L) y = x by definition.
func rowByRow(l *CSR, x []float64) []float64 {
	y := slices.Clone(x)
	for i := range y {
		cols, vals := l.Row(i)
		for k, c := range cols {
			y[i] -= float64(vals[k] * y[c])
		}
	}
	return y
}

// rowsUp solves (I + R) z = s∘y by definition, the farthest column first.
func rowsUp(r *CSR, y, s []float64) []float64 {
	z := make([]float64, len(y))
	for i := len(z) - 1; i >= 0; i-- {
		z[i] = s[i] * y[i]
		cols, vals := r.Row(i)
		for k := len(cols) - 1; k >= 0; k-- {
			z[i] -= float64(vals[k] * z[cols[k]])
		}
	}
	return z
}

var bandCases = []struct {
	n         int
	distances []int
}{
	{40, []int{1}},
	{1000, []int{40}},
	{1537, []int{1, 33, 40, 700}},
	{3000, []int{1, 1000, 1001, 1300, 1301}},
	{2100, []int{600, 601, 800}},
}

// Both solves give the bits of the rows, for the triangle and for the
// transpose of its transpose, with values stored in either precision.
func TestBandsSolve(t *testing.T) {
	bandsSolve[float64](t)
	bandsSolve[float32](t)
	if vectored {
		vectored = false
		defer func() { vectored = true }()
		bandsSolve[float64](t)
		bandsSolve[float32](t)
	}
}

func bandsSolve[T Stored](t *testing.T) {
	for _, c := range bandCases {
		l := triangleOf(c.n, 40, c.distances...)
		full := l.Transpose()
		for k, v := range l.Val {
			l.Val[k] = float64(T(v))
		}
		r := l.Transpose()
		x, s := make([]float64, c.n), make([]float64, c.n)
		Uniform(x, 3)
		Uniform(s, 4)
		down, up := rowByRow(l, x), rowsUp(r, x, s)
		for _, of := range []*CSR{l, r, full} {
			b := BandsOf[T](of)
			if b == nil {
				t.Fatalf("%v are not stored by diagonals", c.distances)
			}
			if want := sizeOf[T]() * int64(c.n*len(c.distances)); b.Bytes() != want {
				t.Errorf("%d bytes told, %d taken", b.Bytes(), want)
			}
			y := slices.Clone(x)
			b.Forward(y, y)
			if !slices.Equal(y, down) {
				t.Errorf("order %d, distances %v: forward differs from the rows", c.n, c.distances)
			}
			y = slices.Clone(x)
			b.Backward(y, y, s)
			if !slices.Equal(y, up) {
				t.Errorf("order %d, distances %v: backward differs from the rows", c.n, c.distances)
			}
		}
	}
}

// Rows stay where diagonals would not pay, or are no triangle.
func TestBandsRefuse(t *testing.T) {
	full := plateMatrix(20)
	for name, of := range map[string]*CSR{
		"a matrix with both sides":  full,
		"a diagonal":                FromEntries(2, 2, []Entry{{0, 0, 1}, {1, 1, 1}}),
		"nothing":                   FromEntries(3, 3, nil),
		"a near distance":           triangleOf(500, 40, 1, 20),
		"a diagonal with one entry": FromEntries(400, 400, []Entry{{399, 0, 1}}),
		"mostly empty diagonals":    triangleOf(500, 2, 40, 41, 42, 43, 44, 45),
	} {
		if BandsOf[float64](of) != nil {
			t.Errorf("%s is stored by diagonals", name)
		}
	}
}

// A sweep allocates nothing.
func TestBandsDoNotAllocate(t *testing.T) {
	l := triangleOf(3000, 40, 1, 999, 1000)
	b, single := BandsOf[float64](l), BandsOf[float32](l)
	x, s := make([]float64, 3000), make([]float64, 3000)
	if got := testing.AllocsPerRun(20, func() {
		b.Forward(x, x)
		b.Backward(x, x, s)
		single.Forward(x, x)
		single.Backward(x, x, s)
	}); got > 0 {
		t.Errorf("%g allocations", got)
	}
}
