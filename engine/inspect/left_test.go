package inspect_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
)

// repeated is a random matrix of n rows in which row n/2+7k is a combination of
// two others, for k below times; rows and columns are scaled by up to 10^spread.
// It returns the rows that the combinations join, too.
func repeated(seed uint64, n, times int, spread float64) (a *linear.CSR, joined [][]int) {
	rng := rand.New(rand.NewPCG(seed, 5))
	rows := make([]map[int]float64, n)
	for i := range rows {
		rows[i] = map[int]float64{i: 4 + rng.Float64(), (i + 1) % n: rng.NormFloat64()}
		for range 2 {
			rows[i][rng.IntN(n)] += rng.NormFloat64()
		}
	}
	for k := range times {
		at, p, q := n/2+7*k, 3+k, n-2-k
		x, y := 0.5+rng.Float64(), 0.5+rng.Float64()
		rows[at] = map[int]float64{}
		for j, v := range rows[p] {
			rows[at][j] += x * v
		}
		for j, v := range rows[q] {
			rows[at][j] += y * v
		}
		joined = append(joined, []int{at, p, q})
	}
	r, c := make([]float64, n), make([]float64, n)
	for i := range n {
		r[i], c[i] = math.Pow(10, spread*rng.Float64()), math.Pow(10, spread*rng.Float64())
	}
	var out []linear.Entry
	for i, row := range rows {
		for j, v := range row {
			out = append(out, e(i, j, v*r[i]*c[j]))
		}
	}
	return linear.FromEntries(n, n, out), joined
}

// leftPart is the part of b, relative to it, in the span of the last k left
// singular vectors of a, by gonum.
func leftPart(a *linear.CSR, b []float64, k int) float64 {
	n := a.NRows
	m := mat.NewDense(n, n, nil)
	for i := range n {
		cols, vals := a.Row(i)
		for p, j := range cols {
			m.Set(i, int(j), vals[p])
		}
	}
	var s mat.SVD
	var u mat.Dense
	s.Factorize(m, mat.SVDFullU)
	s.UTo(&u)
	sum := 0.0
	for j := n - k; j < n; j++ {
		dot := linear.Dot(mat.Col(nil, j, &u), b)
		sum += dot * dot
	}
	return math.Sqrt(sum) / linear.Norm2(b)
}

// Equations that repeat others: the left directions are as many, each lies in
// the rows that it joins, and the part of b along them is that along the left
// singular vectors (gonum); b = A x is within reach.
func TestLeftDirectionsOfRepeatedEquations(t *testing.T) {
	for seed := range uint64(8) {
		n, times := []int{60, 240}[seed%2], 1+int(seed%3)
		a, joined := repeated(seed, n, times, 0)
		s := ones(a, 17)
		f := studied(t, s, inspect.Quick)
		expect(t, "unreachable", f.Unreachable, inspect.Yes, inspect.Measured)
		within(t, "part out of reach", f.Unreachable.Value, leftPart(a, s.B, times), 1e-9)
		if len(f.Study.Left) != times {
			t.Fatalf("seed %d: %d left directions, want %d", seed, len(f.Study.Left), times)
		}
		named := map[int]bool{}
		for _, rows := range joined {
			for _, i := range rows {
				named[i] = true
			}
		}
		for _, d := range f.Study.Left {
			if d.Support > 3*times || !named[d.Rows[0]] || d.Quotient > 1e-15 {
				t.Errorf("seed %d: quotient %g, in %d rows, first %d", seed, d.Quotient, d.Support, d.Rows[0])
			}
		}
		x := make([]float64, n)
		linear.Uniform(x, seed)
		a.Apply(s.B, x)
		expect(t, "A x unreachable", studied(t, s, inspect.Quick).Unreachable, inspect.No, inspect.Measured)
	}
}

// The same with units of rows and columns that differ by up to 10^8: y scaled
// back is mapped to zero by Aᵀ, entry by entry to rounding.
func TestLeftDirectionsInOtherUnits(t *testing.T) {
	for seed := range uint64(6) {
		a, _ := repeated(seed, 150, 1+int(seed%2), 8)
		f := studied(t, ones(a, 17), inspect.Quick)
		if len(f.Study.Left) != 1+int(seed%2) {
			t.Fatalf("seed %d: %d left directions", seed, len(f.Study.Left))
		}
		for _, d := range f.Study.Left {
			got, size := make([]float64, 150), 0.0
			a.ApplyT(got, d.Vector)
			for i, y := range d.Vector {
				_, vals := a.Row(i)
				for _, v := range vals {
					size = max(size, math.Abs(v*y))
				}
			}
			if linear.NormInf(got) > 1e-13*size {
				t.Errorf("seed %d: A'y reaches %g of its terms", seed, linear.NormInf(got)/size)
			}
		}
	}
}

// chain is a walk on n points, right at rate up_i and left at rate down_i: its
// rows sum to zero, and yᵀA = 0 for the stationary shares y_(i+1)/y_i =
// up_i/down_(i+1) (Kolmogorov's criterion: detailed balance).
func chain(n int) (a *linear.CSR, y []float64) {
	up := func(i int) float64 { return float64(2 + i%3) }
	down := func(i int) float64 { return float64(2 + (i+1)%3) }
	y = make([]float64, n)
	y[0] = 1
	var out []linear.Entry
	for i := range n - 1 {
		out = append(out, e(i, i, up(i)), e(i, i+1, -up(i)), e(i+1, i+1, down(i+1)), e(i+1, i, -down(i+1)))
		y[i+1] = y[i] * up(i) / down(i+1)
	}
	linear.Scale(y, 1/linear.Norm2(y), y)
	return linear.FromEntries(n, n, out), y
}

// Where the rows sum to zero and the columns do not, A is proved to be singular
// at sight; what is out of reach takes the factorisation. Larger than anything
// dense.
func TestLeftDirectionOfAWalk(t *testing.T) {
	const n = 3000
	a, y := chain(n)
	s := ones(a, 17)
	first := inspected(t, s)
	expect(t, "singular", first.Singular, inspect.Yes, inspect.Proved)
	expect(t, "unreachable, before", first.Unreachable, inspect.Unknown, "")
	f := studied(t, s, inspect.Quick)
	expect(t, "unreachable", f.Unreachable, inspect.Yes, inspect.Measured)
	within(t, "part out of reach", f.Unreachable.Value, math.Abs(linear.Dot(y, s.B))/math.Sqrt(n), 1e-9)
	if got := f.Study.Left[0].Vector; math.Abs(math.Abs(linear.Dot(got, y))-1) > 1e-12 {
		t.Errorf("the direction is at %g to the closed form", linear.Dot(got, y))
	}
}

// A zero eigenvalue without its own right and left directions meeting: A = L J
// L⁻¹ with unimodular L of integers and a Jordan block of order 2 to zero; the
// left direction is the second row of L⁻¹.
func TestLeftDirectionOfADefectiveZero(t *testing.T) {
	const n = 12
	l, inv := mat.NewDense(n, n, nil), mat.NewDense(n, n, nil)
	for i := range n {
		for j := range i + 1 {
			l.Set(i, j, 1) // its inverse has 1 on the diagonal and -1 below
		}
		inv.Set(i, i, 1)
		if i > 0 {
			inv.Set(i, i-1, -1)
		}
	}
	j := mat.NewDense(n, n, nil)
	j.Set(0, 1, 1)
	for i := 2; i < n; i++ {
		j.Set(i, i, float64(i))
	}
	var m mat.Dense
	m.Product(l, j, inv)
	var rows [][]float64
	for i := range n {
		rows = append(rows, mat.Row(nil, i, &m))
	}
	s := ones(dense(rows...), 17)
	s.B[3] = 5
	f := studied(t, s, inspect.Quick)
	y := mat.Row(nil, 1, inv)
	if f.EmptyRowCount+f.EmptyColCount > 0 || f.ColSumsZero.Answer == inspect.Yes {
		t.Fatal("the pattern shows it")
	}
	linear.Scale(y, 1/linear.Norm2(y), y)
	if len(f.Study.Left) != 1 || math.Abs(math.Abs(linear.Dot(f.Study.Left[0].Vector, y))-1) > 1e-12 {
		t.Fatalf("left directions %+v, want %v", f.Study.Left, y)
	}
}

// Nearly singular is not singular: an entry in the row of a repeated equation
// and the column of the largest unknown of the right direction, off by ever less.
// Where rounding alone could not have made the difference nothing is out of
// reach: an x of that size answers it.
func TestNoFalseAlarmOfLeftDirections(t *testing.T) {
	for seed := range uint64(6) {
		a, joined := repeated(seed, 80, 1, 0)
		free := studied(t, ones(a, 17), inspect.Quick).Study.Null[0]
		for _, off := range []float64{1e-3, 1e-6, 1e-9, 1e-11, 1e-13} {
			f := studied(t, ones(with(a, joined[0][0], free.Rows[0], off), 17), inspect.Quick)
			if f.Unreachable.Answer == inspect.Yes || off > 1e-12 && (f.Singular.Answer == inspect.Yes || len(f.Study.Left) > 0) {
				t.Errorf("seed %d, off by %g: singular %s, unreachable %s (%s)", seed, off, f.Singular.Answer, f.Unreachable.Answer, f.Unreachable.Why)
			}
		}
	}
}

// with returns a with v added to an entry.
func with(a *linear.CSR, row, col int, v float64) *linear.CSR {
	out := []linear.Entry{e(row, col, v)}
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, j := range cols {
			out = append(out, e(i, int(j), vals[k]))
		}
	}
	return linear.FromEntries(a.NRows, a.NRows, out)
}

// Random regular matrices, some in wild units: nothing is singular.
func TestRegularMatricesHaveNoLeftDirection(t *testing.T) {
	for seed := range uint64(20) {
		a, _ := repeated(seed, 50+int(seed), 0, float64(seed%6)*2)
		f := studied(t, ones(a, 17), inspect.Quick)
		expect(t, "singular", f.Singular, inspect.No, "")
		expect(t, "unreachable", f.Unreachable, inspect.No, "")
	}
}
