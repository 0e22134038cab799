package direct

import (
	"context"
	"errors"
	"math/rand/v2"
	"testing"

	"dwindle/engine/linear"
)

func factoredLDL(t *testing.T, a *linear.CSR, how Ordering) *LDL {
	t.Helper()
	f, err := FactorLDL(context.Background(), a, Analyse(a, Order(a, how)), nil)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// denseInertia counts by dense eigenvalues (gonum), which must be clear of
// their own error. scale by powers of two keeps the counts.
func denseInertia(t *testing.T, a *linear.CSR) Inertia {
	t.Helper()
	s := equilibrated(a)
	b := &linear.CSR{NRows: a.NRows, NCols: a.NCols, Ptr: a.Ptr, Col: a.Col, Val: make([]float64, len(a.Val))}
	for i := range a.NRows {
		for k := a.Ptr[i]; k < a.Ptr[i+1]; k++ {
			b.Val[k] = s.at(i, int(a.Col[k]), a.Val[k])
		}
	}
	var in Inertia
	values := eigenvalues(b)
	for _, v := range values {
		switch top := values[len(values)-1] - values[0]; {
		case v > 1e-11*top:
			in.Positive++
		case v < -1e-11*top:
			in.Negative++
		default:
			t.Fatalf("an eigenvalue %g of %g is not clear of rounding", v, top)
		}
	}
	return in
}

// indefinite is a random sparse matrix with many zeros on the diagonal.
func indefinite(rng *rand.Rand, n int) *linear.CSR {
	return symmetricOf(n, func(i, j int) float64 {
		if i == j {
			return float64(rng.IntN(3)) * rng.NormFloat64()
		}
		if i-j == 1 || rng.IntN(n) < 4 {
			return rng.NormFloat64()
		}
		return 0
	})
}

// saddle is [K Bᵀ; B 0] with K a plate and each row of B joining two points.
func saddle(rng *rand.Rand, k, m int) *linear.CSR {
	g := grid(k)
	var e []linear.Entry
	for i := range g.NRows {
		cols, vals := g.Row(i)
		for p, j := range cols {
			e = append(e, linear.Entry{I: i, J: int(j), V: vals[p]})
		}
	}
	n := g.NRows
	for r, i := range rng.Perm(n)[:m] {
		for _, x := range []struct {
			j int
			v float64
		}{{i, 1}, {(i + 1) % n, -0.5}} {
			e = append(e, linear.Entry{I: n + r, J: x.j, V: x.v}, linear.Entry{I: x.j, J: n + r, V: x.v})
		}
	}
	return linear.FromEntries(n+m, n+m, e)
}

// Counts of negative eigenvalues equal dense ones; solves are backward stable.
func TestInertia(t *testing.T) {
	rng := rand.New(rand.NewPCG(6, 6))
	cases := []*linear.CSR{grid(12), saddle(rng, 9, 30)}
	for range 20 {
		cases = append(cases, indefinite(rng, 30+rng.IntN(120)))
	}
	delayed := 0
	for n, a := range cases {
		want := denseInertia(t, a)
		for _, how := range Orderings {
			f := factoredLDL(t, a, Ordering(how))
			delayed += f.Delayed
			if f.Inertia != want {
				t.Errorf("case %d, %s: inertia %+v, dense %+v", n, how, f.Inertia, want)
			}
			if err := solvedWith(t, a, Refine(a, f, a.NRows, 1)); !(err < 1e-13) {
				t.Errorf("case %d, %s: componentwise error %g", n, how, err)
			}
		}
	}
	if delayed == 0 {
		t.Error("no case needed a delayed pivot")
	}
}

// On real saddle systems: 733 negative eigenvalues of hangGlider_2, as dense
// eigenvalues count them (NumPy, and gonum here).
func TestOpenInertia(t *testing.T) {
	for _, c := range []struct {
		name     string
		negative int
	}{{"hangGlider_2.mtx", 733}, {"reorientation_1.mtx", -1}} {
		a := openMatrix(t, c.name)
		want := denseInertia(t, a)
		if c.negative >= 0 && want.Negative != c.negative {
			t.Errorf("%s: dense eigenvalues count %+v", c.name, want)
		}
		for _, how := range []Ordering{AMD, ND} {
			f := factoredLDL(t, a, how)
			err := solvedWith(t, a, Refine(a, f, a.NRows, 1))
			t.Logf("%s, %s: %+v, %d entries, %d delayed, pivots %.3g to %.3g, componentwise error %.2g",
				c.name, how, f.Inertia, f.Entries(), f.Delayed, f.MinPivot, f.MaxPivot, err)
			if f.Inertia != want || !(err < 1e-12) {
				t.Errorf("%s, %s: inertia %+v, dense %+v, componentwise error %g", c.name, how, f.Inertia, want, err)
			}
		}
	}
}

// Exactly singular matrices show as many vanishing pivots as their null space
// has dimensions, and none is divided by.
func TestVanishingPivots(t *testing.T) {
	empty := linear.FromEntries(3, 3, []linear.Entry{{I: 0, J: 0, V: 1}, {I: 2, J: 2, V: -1}})
	ring := symmetricOf(12, func(i, j int) float64 {
		switch {
		case i == j:
			return 2
		case i-j == 1 || i-j == 11:
			return -1
		}
		return 0
	})
	tall := symmetricOf(9, func(i, j int) float64 { // [0 B; Bᵀ 0], B of 3 x 6: null space of dimension 3
		if i >= 6 && j < 6 && (j == i-6 || j == i-3) {
			return 1
		}
		return 0
	})
	for _, c := range []struct {
		name string
		a    *linear.CSR
		want Inertia
	}{{"empty row", empty, Inertia{1, 1, 1}}, {"ring", ring, Inertia{0, 11, 1}}, {"tall", tall, Inertia{3, 3, 3}}} {
		f := factoredLDL(t, c.a, AMD)
		if f.Inertia != c.want || f.ZeroRow < 0 {
			t.Errorf("%s: inertia %+v, row %d", c.name, f.Inertia, f.ZeroRow)
		}
	}
	for _, k := range []int{9, 20, 60} { // no fixed value anywhere: constants are the null vectors
		for seed := range uint64(3) {
			a := floating(k, seed)
			for _, how := range []Ordering{AMD, ND} {
				if f := factoredLDL(t, a, how); f.Inertia != (Inertia{0, k*k - 1, 1}) {
					t.Errorf("floating plate %d, %s: inertia %+v, smallest pivot %g", k, how, f.Inertia, f.MinPivot)
				}
			}
		}
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := FactorLDL(ctx, ring, Analyse(ring, Order(ring, AMD)), nil); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
}

// floating is the 5-point operator without boundary values, with coefficients
// 1 for seed 0 and random ones otherwise: semi-definite, singular to rounding.
func floating(k int, seed uint64) *linear.CSR {
	rng := rand.New(rand.NewPCG(seed, 2))
	var e []linear.Entry
	join := func(i, j int) {
		v := 1.0
		if seed > 0 {
			v = 0.1 + 10*rng.Float64()
		}
		e = append(e, linear.Entry{I: i, J: j, V: -v}, linear.Entry{I: j, J: i, V: -v},
			linear.Entry{I: i, J: i, V: v}, linear.Entry{I: j, J: j, V: v})
	}
	for i := range k * k {
		if i%k > 0 {
			join(i, i-1)
		}
		if i >= k {
			join(i, i-k)
		}
	}
	return linear.FromEntries(k*k, k*k, e)
}

// The same bits for every number of threads.
func TestLDLThreads(t *testing.T) {
	a := box(14)
	var first []ldlNode
	for _, threads := range []int{1, 2, 3} {
		linear.SetThreads(threads)
		f := factoredLDL(t, a, ND)
		if first == nil {
			first = f.nodes
			continue
		}
		for k := range first {
			if !equal(first[k].l, f.nodes[k].l) || !equal(first[k].d, f.nodes[k].d) {
				t.Fatalf("%d threads give another factor", threads)
			}
		}
	}
	linear.SetThreads(1)
}
