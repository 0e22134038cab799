package inspect_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
)

// lowRank is a random n x n matrix of that rank, and entries of it moved by k
// rows and columns.
func lowRank(rng *rand.Rand, n, rank, by int) (out []linear.Entry) {
	x, y := mat.NewDense(n, rank, nil), mat.NewDense(rank, n, nil)
	for i := range n {
		for j := range rank {
			x.Set(i, j, rng.NormFloat64())
			y.Set(j, i, rng.NormFloat64())
		}
	}
	var m mat.Dense
	m.Mul(x, y)
	for i := range n {
		for j := range n {
			out = append(out, e(by+i, by+j, m.At(i, j)))
		}
	}
	return out
}

// More left directions than nearly free ones are sought: all that A maps to zero
// are found, as many as the rank lacks, and the part of b along them is that
// along the left singular vectors (gonum); b = A x is within reach.
func TestManyLeftDirections(t *testing.T) {
	for seed := range uint64(4) {
		rng := rand.New(rand.NewPCG(seed, 18))
		s := ones(linear.FromEntries(30, 30, lowRank(rng, 30, 18, 0)), 17)
		f := studied(t, s, inspect.Quick)
		expect(t, "singular", f.Singular, inspect.Yes, inspect.Measured)
		expect(t, "unreachable", f.Unreachable, inspect.Yes, inspect.Measured)
		within(t, "part out of reach", f.Unreachable.Value, leftPart(s.Matrix(), s.B, 12), 1e-9)
		if d := f.Study; len(d.Left) != 12 || len(d.Null) != 12 || d.Nullity != 12 || d.More {
			t.Errorf("%d left, %d right, %d in all, more %v; the rank lacks 12", len(d.Left), len(d.Null), d.Nullity, d.More)
		}
		s.A.Apply(s.B, append([]float64(nil), s.B...))
		expect(t, "A x unreachable", studied(t, s, inspect.Quick).Unreachable, inspect.No, inspect.Measured)
	}
}

// Beside a part whose columns sum to zero others are singular too: a b that is
// orthogonal to the sums is not within reach for that.
func TestSumsAreNotAllOfTheLeftNullSpace(t *testing.T) {
	rng := rand.New(rand.NewPCG(4, 4))
	out := lowRank(rng, 30, 18, 5)
	for j := range 5 {
		sum := 0.0
		for i := range 5 {
			if i != j {
				v := float64(1 + rng.IntN(4))
				out, sum = append(out, e(i, j, v)), sum+v
			}
		}
		out = append(out, e(j, j, -sum))
	}
	s := ones(linear.FromEntries(35, 35, out), 17)
	s.B[0], s.B[1], s.B[2], s.B[3], s.B[4] = 1, -1, 0, 0, 0
	first := inspected(t, s)
	expect(t, "column sums", first.ColSumsZero, inspect.Yes, inspect.Proved)
	expect(t, "unreachable, before", first.Unreachable, inspect.Unknown, "")
	f := studied(t, s, inspect.Quick)
	expect(t, "unreachable", f.Unreachable, inspect.Yes, inspect.Measured)
	within(t, "part out of reach", f.Unreachable.Value, leftPart(s.Matrix(), s.B, 13), 1e-9)
}

// An empty row and two equal ones: b answers to the empty row, and part of it,
// along (1, −1, 0, 0)/√2, 1/√28 of the norm of (1, 2, 3, 0), is out of reach all
// the same. Nothing has been searched, so nothing is told.
func TestAnEmptyRowIsNotAllOfTheLeftNullSpace(t *testing.T) {
	s := ones(dense([]float64{1, 2, 0, 1}, []float64{1, 2, 0, 1}, []float64{0, 1, 3, 1}, []float64{0, 0, 0, 0}), 17)
	s.B = []float64{1, 2, 3, 0}
	f := inspected(t, s)
	expect(t, "unreachable", f.Unreachable, inspect.Unknown, "")
	if f.Unreachable.Value != 0 {
		t.Errorf("part along what is seen: %g", f.Unreachable.Value)
	}
	if got, want := leftPart(s.Matrix(), s.B, 2), 1/math.Sqrt(28); math.Abs(got-want) > 1e-14 {
		t.Errorf("out of reach by gonum: %g, by hand %g", got, want)
	}
}

// Columns that sum to zero and a b whose entries do: where the search for the
// left null space comes to its end, b is within reach.
func TestConsistentWithAllColumnSums(t *testing.T) {
	for _, n := range []int{12, 3000} {
		a, _ := chain(n)
		s := ones(a.Transpose(), 17)
		for i := range s.B {
			s.B[i] = float64(1 - 2*(i%2))
		}
		first := inspected(t, s)
		expect(t, "column sums", first.ColSumsZero, inspect.Yes, inspect.Proved)
		f := studied(t, s, inspect.Quick)
		expect(t, "unreachable", f.Unreachable, inspect.No, inspect.Measured)
		if f.Study.Nullity != 1 || f.Study.More {
			t.Errorf("n = %d: %d free, more %v", n, f.Study.Nullity, f.Study.More)
		}
	}
}

// The same where nothing dense is affordable, by factors: up to mostZero (24)
// directions are found, and their left ones; with more there, nothing is told of
// what b has along those that were not found.
func TestManyLeftDirectionsByFactors(t *testing.T) {
	budget := inspect.Quick
	budget.Dense = 100
	a, _ := repeated(3, 240, 12, 0)
	s := ones(a, 17)
	f := studied(t, s, budget)
	expect(t, "unreachable", f.Unreachable, inspect.Yes, inspect.Measured)
	within(t, "part out of reach", f.Unreachable.Value, leftPart(a, s.B, 12), 1e-9)
	if d := f.Study; len(d.Left) != 12 || d.Nullity != 12 || d.More {
		t.Errorf("%d left of %d, more %v; 12 rows repeat others", len(d.Left), d.Nullity, d.More)
	}
	a, _ = repeated(3, 400, 26, 0)
	s = ones(a, 17)
	x := make([]float64, 400)
	linear.Uniform(x, 7)
	a.Apply(s.B, x)
	f = studied(t, s, budget)
	expect(t, "singular", f.Singular, inspect.Yes, inspect.Measured)
	expect(t, "unreachable", f.Unreachable, inspect.Unknown, "")
	if d := f.Study; d.Nullity != 24 || !d.More {
		t.Errorf("%d found, more %v; 26 rows repeat others", d.Nullity, d.More)
	}
}
