package linear

import (
	"math"
	"math/big"
	"math/rand/v2"
	"slices"
	"testing"
)

// laplacian is the graph Laplacian of the weighted edges on n vertices.
func laplacian(n int, edges []Entry) *CSR {
	var e []Entry
	for _, w := range edges {
		e = append(e, Entry{w.I, w.J, -w.V}, Entry{w.J, w.I, -w.V}, Entry{w.I, w.I, w.V}, Entry{w.J, w.J, w.V})
	}
	return FromEntries(n, n, e)
}

func TestComponents(t *testing.T) {
	a := FromEntries(7, 7, []Entry{{0, 4, 1}, {4, 2, 1}, {1, 3, 1}, {5, 0, 0}, {6, 6, 2}})
	c := FindComponents(a)
	if want := []int32{0, 1, 0, 1, 0, 2, 3}; c.Count != 4 || !slices.Equal(c.Of, want) || !slices.Equal(c.Size, []int32{3, 2, 1, 1}) {
		t.Errorf("got %d components, %v of sizes %v", c.Count, c.Of, c.Size)
	}
}

// A random forest has n minus edges components; union by a plain flood is the
// oracle for who belongs together.
func TestComponentsAgainstFlood(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for range 50 {
		n := 1 + rng.IntN(40)
		var e []Entry
		next := make([][]int, n)
		for range rng.IntN(n + 1) {
			i, j := rng.IntN(n), rng.IntN(n)
			e = append(e, Entry{i, j, 1})
			next[i], next[j] = append(next[i], j), append(next[j], i)
		}
		label := make([]int32, n)
		for i := range label {
			label[i] = -1
		}
		count := int32(0)
		for s := range label {
			if label[s] >= 0 {
				continue
			}
			for stack := []int{s}; len(stack) > 0; {
				v := stack[len(stack)-1]
				stack = stack[:len(stack)-1]
				if label[v] < 0 {
					label[v] = count
					stack = append(stack, next[v]...)
				}
			}
			count++
		}
		if c := FindComponents(FromEntries(n, n, e)); c.Count != int(count) || !slices.Equal(c.Of, label) {
			t.Fatalf("n=%d: %v, flood says %v", n, c.Of, label)
		}
	}
}

func TestZero(t *testing.T) {
	for _, c := range []struct {
		v     []float64
		delta float64
		want  Zeroness
	}{
		{nil, 0, ExactlyZero},
		{[]float64{0, 0}, 0, ExactlyZero},
		{[]float64{1, -1}, 0, ExactlyZero},
		{[]float64{0.1, 0.2, -0.3}, 0, ToRounding}, // the doubles sum to 2⁻⁵⁵·… not to 0
		{[]float64{1e16, 1, -1e16}, 0, ToRounding}, // a float sum would say exactly 0
		{[]float64{1e16, 1, -1e16, -1}, 0, ExactlyZero},
		{[]float64{1, -1 + 1e-15}, 0, NotZero},
		{[]float64{1, -1 + 1e-7}, 0, NotZero},
		{[]float64{1, -1 + 1e-7}, 5e-6, WithinDigits},
		{[]float64{1, -1 + 1e-4}, 5e-6, NotZero},
		{[]float64{1e300, -1e300, 1e300}, 0, NotZero},
		{[]float64{5e-324, -5e-324}, 0, ExactlyZero},
		{[]float64{1}, 0, NotZero},
	} {
		if got := Zero(c.v, c.delta); got != c.want {
			t.Errorf("Zero(%v, %g) = %d, want %d", c.v, c.delta, got, c.want)
		}
	}
}

// The oracle is math/big with enough bits for every double.
func TestExactSumAgainstBig(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	var e ExactSum
	for range 300 {
		e.Reset()
		want := new(big.Float).SetPrec(4000)
		for k := rng.IntN(30); k >= 0; k-- {
			x := math.Ldexp(rng.Float64()-0.5, rng.IntN(200)-100)
			y := math.Ldexp(rng.Float64()-0.5, rng.IntN(200)-100)
			e.Add(x)
			e.AddProduct(x, y)
			bx, by := big.NewFloat(x), big.NewFloat(y)
			want.Add(want, bx)
			want.Add(want, new(big.Float).SetPrec(200).Mul(bx, by))
			if rng.IntN(3) == 0 {
				e.Add(-x)
				want.Sub(want, bx)
			}
		}
		got := new(big.Float).SetPrec(4000)
		for _, p := range e.parts {
			got.Add(got, big.NewFloat(p))
		}
		if got.Cmp(want) != 0 || e.Sign() != want.Sign() {
			t.Fatalf("sum %v, want %v", got, want)
		}
	}
}

func TestRowSums(t *testing.T) {
	a := laplacian(6, []Entry{{0, 1, 1}, {1, 2, 3}, {3, 4, 0.1}, {4, 5, 0.2}})
	z := FindComponents(a).RowSums(a, 0)
	if !slices.Equal(z, []Zeroness{ExactlyZero, ToRounding}) && !slices.Equal(z, []Zeroness{ExactlyZero, ExactlyZero}) {
		t.Errorf("row sums of a Laplacian: %v", z)
	}
	a.Val[0] += 1e-3
	if z := FindComponents(a).RowSums(a, 0); z[0] != NotZero || z[1] == NotZero {
		t.Errorf("one row disturbed: %v", z)
	}
}

func TestLeftNull(t *testing.T) {
	// Columns of {0,1,2} sum to zero, row 2 is empty; {3} is an empty row with
	// an empty column; {4} is regular.
	a := FromEntries(5, 5, []Entry{{0, 0, 1}, {1, 0, -1}, {0, 1, -2}, {1, 1, 2}, {0, 2, 3}, {1, 2, -3}, {4, 4, 1}})
	at := a.Transpose()
	s := LeftNull(a, at, FindComponents(a), 0)
	if !slices.Equal(s.Of, []int32{0, 0, 1, 2, -1}) || !slices.Equal(s.Size, []int32{2, 1, 1}) {
		t.Fatalf("supports %v of sizes %v", s.Of, s.Size)
	}
	for k := range s.Size {
		y, r := make([]float64, 5), make([]float64, 5)
		for i, v := range s.Of {
			if int(v) == k {
				y[i] = 1
			}
		}
		if a.ApplyT(r, y); NormInf(r) != 0 {
			t.Errorf("vector %d: yᵀA = %v", k, r)
		}
	}
	b := []float64{3, 1, 5, 7, 11}
	if s.Project(b, b); !slices.Equal(b, []float64{1, -1, 0, 0, 11}) {
		t.Errorf("projected b = %v", b)
	}
}

func TestExactlySymmetric(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	for range 200 {
		n := 1 + rng.IntN(8)
		var e []Entry
		for range rng.IntN(2 * n) {
			i, j, v := rng.IntN(n), rng.IntN(n), rng.Float64()
			e = append(e, Entry{i, j, v}, Entry{j, i, v})
		}
		a := FromEntries(n, n, e)
		if rng.IntN(2) == 0 && len(a.Val) > 0 { // disturb one value or drop one entry
			if k := rng.IntN(len(a.Val)); rng.IntN(2) == 0 {
				a.Val[k] *= 1.5
			} else {
				e = nil
				for i := 0; i < n; i++ {
					for p := a.Ptr[i]; p < a.Ptr[i+1]; p++ {
						if p != k {
							e = append(e, Entry{i, int(a.Col[p]), a.Val[p]})
						}
					}
				}
				a = FromEntries(n, n, e)
			}
		}
		at := a.Transpose()
		want := slices.Equal(a.Ptr, at.Ptr) && slices.Equal(a.Col, at.Col) && slices.Equal(a.Val, at.Val)
		if a.ExactlySymmetric() != want {
			t.Fatalf("%+v: symmetric %v", a, !want)
		}
	}
}

// curvatureBig is xᵀA x without rounding.
func curvatureBig(a *CSR, x []float64) *big.Float {
	sum := new(big.Float).SetPrec(4000)
	for i := 0; i < a.NRows; i++ {
		cols, vals := a.Row(i)
		for k, j := range cols {
			p := new(big.Float).SetPrec(200).Mul(big.NewFloat(vals[k]), big.NewFloat(x[j]))
			sum.Add(sum, p.Mul(p, big.NewFloat(x[i])))
		}
	}
	return sum
}

func TestCurvatureBoundHolds(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 8))
	for range 40 {
		n := 1 + rng.IntN(3000)
		var edges []Entry
		for range 3 * n {
			if i, j := rng.IntN(n), rng.IntN(n); i != j {
				edges = append(edges, Entry{i, j, rng.Float64()})
			}
		}
		a := laplacian(n, edges)
		x := make([]float64, n)
		for i := range x {
			x[i] = 1 + 1e-9*rng.NormFloat64() // near the null vector: heavy cancellation
		}
		value, bound, deltaBound := Curvature(a, x, 1e-6)
		diff := new(big.Float).Sub(curvatureBig(a, x), big.NewFloat(value))
		if d, _ := diff.Float64(); math.Abs(d) > bound {
			t.Fatalf("n=%d: value %g off by %g, bound %g", n, value, d, bound)
		}
		if n > 1 && !(deltaBound > bound) {
			t.Errorf("delta 1e-6 moves it by %g only, rounding by %g", deltaBound, bound)
		}
	}
}

func TestCurvatureOverflowProvesNothing(t *testing.T) {
	a := FromEntries(2, 2, []Entry{{0, 0, -1e300}, {1, 1, 1e300}})
	if v, bound, _ := Curvature(a, []float64{1e10, 1}, 0); v < -bound {
		t.Errorf("value %g, bound %g", v, bound)
	}
}
