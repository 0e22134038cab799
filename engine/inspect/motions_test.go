package inspect_test

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
)

// bodies are so many separate blocks of 3 x 2 x 2 nodes in space, each node tied
// to all others of its cells by springs, which nothing holds: each block has six
// rigid motions. Rows are ordered by block, node and axis.
func bodies(count int) (*linear.CSR, [][3]float64) {
	var x [][3]float64
	var out []linear.Entry
	for k := range count {
		first := len(x)
		for i := range 12 {
			x = append(x, [3]float64{float64(i%3) + 0.1*float64(k), float64(i / 3 % 2), float64(i / 6)})
		}
		for p := first; p < len(x); p++ {
			for q := p + 1; q < len(x); q++ {
				out = append(out, spring(x, p, q)...)
			}
		}
	}
	return linear.FromEntries(3*len(x), 3*len(x), out), x
}

// spring ties two nodes of one cell; nothing where they are further apart.
func spring(x [][3]float64, p, q int) (out []linear.Entry) {
	var d [3]float64
	square := 0.0
	for i := range 3 {
		d[i] = x[p][i] - x[q][i]
		square += d[i] * d[i]
	}
	if square > 3.001 {
		return nil
	}
	for i := range 3 {
		for j := range 3 {
			k := 1e5 * d[i] * d[j] / (square * math.Sqrt(square))
			out = append(out, e(3*p+i, 3*p+j, k), e(3*q+i, 3*q+j, k), e(3*p+i, 3*q+j, -k), e(3*q+i, 3*p+j, -k))
		}
	}
	return out
}

// lacking is the number of singular values that are zero to rounding, by
// gonum's dense SVD, and the norm of the part of b in the span of their
// vectors, relative to b.
func lacking(t *testing.T, a *linear.CSR, b []float64) (zeros int, part float64) {
	t.Helper()
	n := a.NRows
	m := mat.NewDense(n, n, nil)
	for i := range n {
		cols, vals := a.Row(i)
		for k, j := range cols {
			m.Set(i, int(j), vals[k])
		}
	}
	var s mat.SVD
	if !s.Factorize(m, mat.SVDFull) {
		t.Fatal("no singular values")
	}
	values := s.Values(nil)
	var u mat.Dense
	s.UTo(&u)
	for k := n - 1; values[k] <= 1e-12*values[0]; k-- {
		zeros++
		dot := linear.Dot(mat.Col(nil, k, &u), b)
		part += dot * dot
	}
	return zeros, math.Sqrt(part) / linear.Norm2(b)
}

// couple is two opposite forces along y at the ends of the first block, and
// small ones that cancel: its forces sum to zero, and it turns the block.
func couple(n int) []float64 {
	b := make([]float64, n)
	b[1], b[3*2+1], b[3*4], b[3*7] = 1, -1, 40, -40
	return b
}

// Forces that sum to zero push along a rotation all the same: the sums alone
// leave that open, and the second look has the number.
func TestACoupleIsOutOfReach(t *testing.T) {
	a, _ := bodies(1)
	s := ones(a, 17)
	s.B = couple(a.NRows)
	zeros, want := lacking(t, a, s.B)
	first := inspected(t, s).Unreachable
	if expect(t, "by sums", first, inspect.Unknown, ""); !(math.Abs(first.Value) <= 1e-14) {
		t.Errorf("the part along constants is %g", first.Value)
	}
	f := studied(t, s, inspect.Quick)
	expect(t, "couple", f.Unreachable, inspect.Yes, inspect.Measured)
	if zeros != 6 || want < 0.01 || math.Abs(f.Unreachable.Value-want) > 1e-12 {
		t.Errorf("%g of b, %d motions by SVD: %g", f.Unreachable.Value, zeros, want)
	}
	if len(f.Study.Null) != 6 || f.Study.More {
		t.Errorf("%d directions, more %v", len(f.Study.Null), f.Study.More)
	}
}

// What the sums show is the smaller part of what is out of reach where b turns
// the body too; what is in the range of A pushes along nothing.
func TestLoadsOnAFreeBody(t *testing.T) {
	a, _ := bodies(1)
	s := ones(a, 17)
	rng := rand.New(rand.NewPCG(3, 1))
	for i := range s.B {
		s.B[i] = rng.NormFloat64()
	}
	_, want := lacking(t, a, s.B)
	bySums := inspected(t, s).Unreachable
	expect(t, "by sums", bySums, inspect.Yes, "")
	f := studied(t, s, inspect.Quick)
	expect(t, "all", f.Unreachable, inspect.Yes, inspect.Measured)
	if !(bySums.Value < 0.9*want) || math.Abs(f.Unreachable.Value-want) > 1e-12 {
		t.Errorf("%g by sums, %g in all, %g by SVD", bySums.Value, f.Unreachable.Value, want)
	}
	x := append([]float64(nil), s.B...)
	a.Apply(s.B, x)
	f = studied(t, s, inspect.Quick)
	expect(t, "in the range", f.Unreachable, inspect.No, inspect.Measured)
}

// Two bodies have twelve motions and all are found; five have thirty, of which
// 24 are held beside the constants of each, and it is said that there are more: what is told of b is a part
// of the truth.
func TestMoreMotionsThanOneBody(t *testing.T) {
	for _, count := range []int{2, 5} {
		a, _ := bodies(count)
		s := ones(a, 17)
		rng := rand.New(rand.NewPCG(4, uint64(count)))
		for i := range s.B {
			s.B[i] = rng.NormFloat64()
		}
		zeros, want := lacking(t, a, s.B)
		f := studied(t, s, inspect.Quick)
		expect(t, "unreachable", f.Unreachable, inspect.Yes, inspect.Measured)
		d := f.Study
		for _, v := range d.Null {
			if v.Quotient > 1e-15 || v.PartRows != 36 {
				t.Errorf("quotient %g, in a part of %d rows", v.Quotient, v.PartRows)
			}
		}
		if zeros != 6*count || d.ZeroPivots != zeros || len(d.Null) != min(24+count, zeros) || d.More != (zeros > 24) {
			t.Errorf("%d bodies: %d found, %d pivots, more %v; %d by SVD", count, len(d.Null), d.ZeroPivots, d.More, zeros)
		}
		got := f.Unreachable.Value
		switch says := strings.Contains(f.Unreachable.Why, "there are more: LDL' leaves 30"); {
		case !d.More && (says || math.Abs(got-want) > 1e-12):
			t.Errorf("%g of b (%s), by SVD %g", got, f.Unreachable.Why, want)
		case d.More && (!says || !(got < want && got > want/2)):
			t.Errorf("%g of b (%s), by SVD %g", got, f.Unreachable.Why, want)
		}
	}
}

// b lies along none of what is held, and there is more: that stays open.
func TestMoreMotionsLeaveItOpen(t *testing.T) {
	a, _ := bodies(5)
	s := ones(a, 17)
	x := append([]float64(nil), s.B...)
	for i := range x {
		x[i] = float64(i * i % 17)
	}
	a.Apply(s.B, x)
	f := studied(t, s, inspect.Quick)
	expect(t, "unreachable", f.Unreachable, inspect.Unknown, "")
	if !strings.Contains(f.Unreachable.Why, "there are more") {
		t.Error(f.Unreachable.Why)
	}
}

// A path of springs that nothing holds beside one whose springs turn the sign:
// (1, -1, 1, ...) is free there, which no sum shows. b pushes along that alone:
// with 1/√m of its norm, for one entry of m.
func TestSumsDoNotShowAll(t *testing.T) {
	const m = 9
	path := func(sign float64, second bool) *linear.CSR {
		var out []linear.Entry
		chain := func(first int, sign float64) {
			for i := first; i < first+m-1; i++ {
				out = append(out, e(i, i, 1), e(i+1, i+1, 1), e(i, i+1, sign), e(i+1, i, sign))
			}
		}
		chain(0, -1)
		if second {
			chain(m, sign)
		}
		return linear.FromEntries(2*m, 2*m, out)
	}
	s := ones(path(1, true), 17)
	s.B = make([]float64, 2*m)
	s.B[0], s.B[1], s.B[m] = 1, -1, 2
	expect(t, "first look", inspected(t, s).Unreachable, inspect.Unknown, "")
	f := studied(t, s, inspect.Quick)
	expect(t, "second look", f.Unreachable, inspect.Yes, inspect.Measured)
	if want := 2 / math.Sqrt(m) / math.Sqrt(6); math.Abs(f.Unreachable.Value-want) > 1e-13 {
		t.Errorf("%g of b, want %g", f.Unreachable.Value, want)
	}
	s.A = path(-1, true)
	s.B[m+1] = -2
	expect(t, "two free paths, dominant", inspected(t, s).Unreachable, inspect.No, inspect.Measured)
}

// The low end of a body that nothing holds is told as zero, whatever rounding
// has made of it, and that of a held one as it is.
func TestLowEndOfASingularSpectrum(t *testing.T) {
	a, _ := bodies(1)
	f := studied(t, ones(a, 17), inspect.Quick)
	for _, x := range []*inspect.Spectrum{f.Study.Raw, f.Study.Equilibrated, f.Study.Jacobi} {
		if v, rounded := f.LowEnd(*x); v != 0 || !rounded {
			t.Errorf("%s: %g, rounded %v; measured %g", x.Of, v, rounded, x.Smallest)
		}
	}
	x := inspect.Spectrum{Smallest: 1e-12, Largest: 1}
	if v, rounded := f.LowEnd(x); v != 1e-12 || rounded {
		t.Errorf("1e-12 of 36 rows is told as %g", v)
	}
	x.Smallest = -3e-15
	if v, rounded := f.LowEnd(x); v != 0 || !rounded {
		t.Errorf("-3e-15 of 36 rows is told as %g", v)
	}
	f = studied(t, sample(t, "frame"), inspect.Quick)
	if v, rounded := f.LowEnd(*f.Study.Raw); v != f.Study.Raw.Smallest || rounded {
		t.Errorf("a regular A: %g, rounded %v", v, rounded)
	}
}
