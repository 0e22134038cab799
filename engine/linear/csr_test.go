package linear

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

// scattered draws a rows×cols matrix with about perRow entries a row, some of
// them written twice, some rows empty, and its dense twin.
func scattered(rng *rand.Rand, rows, cols, perRow int) (*CSR, [][]float64) {
	dense := make([][]float64, rows)
	var e []Entry
	for i := range dense {
		dense[i] = make([]float64, cols)
		for range rng.IntN(2*perRow + 1) {
			j, v := rng.IntN(cols), float64(rng.IntN(19)-9) // whole numbers: sums are exact
			e = append(e, Entry{i, j, v})
			dense[i][j] += v
		}
	}
	rng.Shuffle(len(e), func(a, b int) { e[a], e[b] = e[b], e[a] })
	return FromEntries(rows, cols, e), dense
}

func TestCSRAgainstDense(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	for range 200 {
		rows, cols := 1+rng.IntN(30), 1+rng.IntN(30)
		a, dense := scattered(rng, rows, cols, 4)
		at := a.Transpose()
		for i := range rows {
			c, _ := a.Row(i)
			if !ascending(c) {
				t.Fatalf("row %d: columns %v do not ascend", i, c)
			}
			for j := range cols {
				if a.At(i, j) != dense[i][j] || at.At(j, i) != dense[i][j] {
					t.Fatalf("entry (%d,%d): %g, transposed %g, dense %g", i, j, a.At(i, j), at.At(j, i), dense[i][j])
				}
			}
		}
		back := at.Transpose()
		if !slices.Equal(back.Ptr, a.Ptr) || !slices.Equal(back.Col, a.Col) || !slices.Equal(back.Val, a.Val) {
			t.Fatal("transposed twice is another matrix")
		}
		checkProducts(t, a, at, dense)
	}
}

func checkProducts(t *testing.T, a, at *CSR, dense [][]float64) {
	t.Helper()
	x, y := make([]float64, a.NCols), make([]float64, a.NRows)
	for j := range x {
		x[j] = float64(j%7 - 3)
	}
	a.Apply(y, x)
	for i := range y {
		want := 0.0
		for j, v := range x {
			want += dense[i][j] * v
		}
		if y[i] != want {
			t.Fatalf("product, row %d: %g, dense %g", i, y[i], want)
		}
	}
	u, v := make([]float64, a.NCols), make([]float64, a.NCols)
	a.ApplyT(u, y)
	at.Apply(v, y)
	if !slices.Equal(u, v) {
		t.Fatal("transposed product differs from the product of the transposed")
	}
}

func TestCompactCounts(t *testing.T) {
	a := &CSR{NRows: 2, NCols: 3, Ptr: []int{0, 4, 6},
		Col: []int32{2, 0, 2, 0, 1, 1}, Val: []float64{1, 2, 3, 4, 5, -5}}
	if merged := a.Compact(); merged != 3 || a.Entries() != 3 {
		t.Errorf("%d merged, %d left", merged, a.Entries())
	}
	if a.At(0, 0) != 6 || a.At(0, 2) != 4 || a.At(1, 1) != 0 {
		t.Errorf("after compacting: %+v", a)
	}
	if got := caught(func() { FromEntries(2, 2, []Entry{{2, 0, 1}}) }); got == nil {
		t.Error("an entry outside the shape was taken")
	}
}

func TestDiagonal(t *testing.T) {
	a := FromEntries(3, 3, []Entry{{0, 0, 5}, {1, 2, 7}, {2, 2, -1}})
	d := make([]float64, 3)
	a.Diagonal(d)
	if !slices.Equal(d, []float64{5, 0, -1}) {
		t.Errorf("diagonal %v", d)
	}
}

// The products give the same bits on any number of threads, and the fused one
// is the product followed by the dot product. Rows of every length from 0 to
// 40 pass through the grouped and the single products.
func TestProductsDoNotDependOnThreads(t *testing.T) {
	defer SetThreads(1)
	rng := rand.New(rand.NewPCG(7, 8))
	const n = 30 * Block
	var e []Entry
	for i := range n {
		for range i % 41 {
			e = append(e, Entry{i, rng.IntN(n), rng.NormFloat64()})
		}
	}
	a := FromEntries(n, n, e)
	x, b := make([]float64, n), make([]float64, n)
	Uniform(x, 1)
	Uniform(b, 2)
	want, res := make([]float64, n), make([]float64, n)
	a.Apply(want, x)
	dot, norm := Dot(x, want), Residual(res, a, x, b)
	for i := range n {
		s := 0.0
		cols, vals := a.Row(i)
		for k, c := range cols {
			s += vals[k] * x[c]
		}
		if math.Abs(want[i]-s) > 1e-13*(1+math.Abs(s)) {
			t.Fatalf("row %d: %g, plain loop %g", i, want[i], s)
		}
		if res[i] != b[i]-want[i] {
			t.Fatalf("row %d: residual %g, want %g", i, res[i], b[i]-want[i])
		}
	}
	y, r := make([]float64, n), make([]float64, n)
	for _, threads := range []int{1, 2, 3, 5} {
		SetThreads(threads)
		a.Apply(y, x)
		same := slices.Equal(y, want)
		same = a.ApplyDot(y, x) == dot && slices.Equal(y, want) && same
		same = Residual(r, a, x, b) == norm && slices.Equal(r, res) && same
		if !same {
			t.Errorf("%d threads differ from one", threads)
		}
	}
}

// Products with the transpose have the bits of rows scattered in order, on any
// number of threads, and allocate nothing.
func TestApplyTDoesNotDependOnThreads(t *testing.T) {
	defer SetThreads(1)
	const rows, cols = 12000, 9001
	u := make([]float64, 3*rows)
	Uniform(u, 5)
	var entries []Entry
	for k := range 2 * rows { // half of them near the diagonal, some rows empty
		i, j := k%rows, int((u[k]+1)/2*cols)
		if k < rows {
			j = min(max(i-500+j%1000, 0), cols-1)
		}
		if i%7 != 0 {
			entries = append(entries, Entry{I: i, J: j, V: u[k]})
		}
	}
	a := FromEntries(rows, cols, entries)
	x, want, got := u[2*rows:], make([]float64, cols), make([]float64, cols)
	for i := range rows {
		c, v := a.Row(i)
		for k := range c {
			want[c[k]] += float64(v[k] * x[i])
		}
	}
	for _, threads := range []int{1, 2, 3, 5} {
		SetThreads(threads)
		Uniform(got, 6) // what was there does not count
		if a.ApplyT(got, x); !slices.Equal(got, want) {
			t.Errorf("%d threads: other bits than the rows in order", threads)
		}
		if n := testing.AllocsPerRun(10, func() { a.ApplyT(got, x) }); n > 0 {
			t.Errorf("%d threads: %g allocations", threads, n)
		}
	}
}
