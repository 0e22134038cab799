package prepare

import (
	"context"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"dwindle/engine/linear"
)

// sparse is a random matrix with entries over many decades; a zero-free
// diagonal exists but is not where the rows stand.
func sparse(rng *rand.Rand, n int) *linear.CSR {
	p := rng.Perm(n)
	var e []linear.Entry
	for i := range n {
		e = append(e, linear.Entry{I: i, J: p[i], V: math.Pow(10, 6*rng.Float64()-3)})
		for range 3 {
			e = append(e, linear.Entry{I: i, J: rng.IntN(n), V: math.Pow(10, 6*rng.Float64()-3) * float64(1-2*rng.IntN(2))})
		}
	}
	return linear.FromEntries(n, n, e)
}

// bestProduct is the largest log-product of a diagonal over all orders of the
// rows: the oracle for small n.
func bestProduct(a *linear.CSR) float64 {
	n := a.NRows
	used := make([]bool, n)
	var search func(j int) float64
	search = func(j int) float64 {
		if j == n {
			return 0
		}
		best := math.Inf(-1)
		for i := range n {
			if v := a.At(i, j); !used[i] && v != 0 {
				used[i] = true
				best = max(best, math.Log(math.Abs(v))+search(j+1))
				used[i] = false
			}
		}
		return best
	}
	return search(0)
}

func TestMatchingIsBest(t *testing.T) {
	rng := rand.New(rand.NewPCG(4, 7))
	for trial := range 200 {
		a := sparse(rng, 1+rng.IntN(7))
		m := newMatching(a)
		if err := m.run(context.Background()); err != nil {
			t.Fatal(err)
		}
		q, _, _ := m.result()
		got := 0.0
		for j, i := range q {
			got += math.Log(math.Abs(a.At(int(i), j)))
		}
		if want := bestProduct(a); math.Abs(got-want) > 1e-9 {
			t.Fatalf("trial %d: log of the product %g, best %g", trial, got, want)
		}
	}
}

// matchedWell checks what match promises of a prepared matrix.
func matchedWell(t *testing.T, name string, m *linear.CSR) {
	t.Helper()
	for i := range m.NRows {
		if d := math.Abs(m.At(i, i)); math.Abs(d-1) > 1e-11 {
			t.Fatalf("%s: diagonal entry %d has magnitude %.15g", name, i, d)
		}
		if _, vals := m.Row(i); linear.NormInf(vals) > 1+1e-11 {
			t.Fatalf("%s: row %d has an entry of magnitude %.15g", name, i, linear.NormInf(vals))
		}
	}
}

func TestMatchAndTheWayBack(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 7))
	for range 30 {
		s := systemOf(rng, sparse(rng, 5+rng.IntN(200)))
		p, back, err := matchEntry.Apply(context.Background(), s, linear.Values{})
		if err != nil {
			t.Fatal(err)
		}
		matchedWell(t, "random", p.Matrix())
		waysAgree(t, s, p, back, func(i int) float64 { return back.(matched).row[i] })
	}
}

// waysAgree checks that the residual of the prepared system is that of the
// original one at the row that Row names, in the units given by unit, and that
// guess and solution are inverse to each other.
func waysAgree(t *testing.T, s, p linear.System, back Back, unit func(row int) float64) {
	t.Helper()
	n := s.N()
	x, r, q := make([]float64, n), make([]float64, n), make([]float64, n)
	back.Solution(x, p.Guess)
	linear.Residual(r, s.A, x, s.B)
	linear.Residual(q, p.A, p.Guess, p.B)
	for i := range q {
		o := back.Row(i)
		size := math.Abs(s.B[o])
		cols, vals := s.Matrix().Row(o)
		for k, j := range cols {
			size += math.Abs(vals[k] * x[j])
		}
		if math.Abs(unit(o)*r[o]-q[i]) > 1e-13*unit(o)*size {
			t.Fatalf("row %d, original %d: residual %g, expected %g", i, o, q[i], unit(o)*r[o])
		}
	}
	for i := range x {
		if math.Abs(x[i]-s.Guess[i]) > 1e-14*math.Abs(s.Guess[i]) {
			t.Fatalf("the guess comes back as %g, was %g", x[i], s.Guess[i])
		}
	}
}

func TestMatchRefusesStructurallySingular(t *testing.T) {
	a := linear.FromEntries(3, 3, []linear.Entry{{I: 0, J: 0, V: 1}, {I: 0, J: 1, V: 2}, {I: 0, J: 2, V: 3}, {I: 1, J: 2, V: 1}, {I: 2, J: 2, V: 1}})
	_, _, err := matchEntry.Apply(context.Background(), linear.System{A: a, B: make([]float64, 3)}, linear.Values{})
	if err == nil || !strings.Contains(err.Error(), "structurally singular") {
		t.Errorf("err = %v", err)
	}
}

// Each reordering is a symmetric permutation, with residuals at their rows.
func TestReorderings(t *testing.T) {
	rng := rand.New(rand.NewPCG(2, 7))
	for _, name := range []string{"rcm", "amd", "nd", "colour"} {
		e, ok := Lookup(name)
		if !ok {
			t.Fatalf("no preparation %q", name)
		}
		for trial := range 6 {
			s := systemOf(rng, badlyScaled(rng, 600, trial%2 == 0))
			p, back, err := e.Apply(context.Background(), s, linear.Values{})
			if err != nil {
				t.Fatal(err)
			}
			waysAgree(t, s, p, back, func(int) float64 { return 1 })
			if !back.(permuted).p.Valid() {
				t.Errorf("%s: no permutation", name)
			}
			if s.Matrix().ExactlySymmetric() != p.Matrix().ExactlySymmetric() {
				t.Errorf("%s: symmetry changed", name)
			}
		}
		ctx, cancel := context.WithCancel(context.Background())
		cancel()
		if _, _, err := e.Apply(ctx, systemOf(rng, badlyScaled(rng, 5, true)), linear.Values{}); err == nil {
			t.Errorf("%s: no error after cancellation", name)
		}
	}
}

func TestSymmetrise(t *testing.T) {
	a := linear.FromEntries(2, 2, []linear.Entry{{I: 0, J: 0, V: 2}, {I: 0, J: 1, V: 1}, {I: 1, J: 0, V: 1 + 0x1p-52}, {I: 1, J: 1, V: 2}})
	p, back, err := symmetriseEntry.Apply(context.Background(), linear.System{A: a, B: []float64{1, 2}}, linear.Values{})
	if err != nil || !p.Matrix().ExactlySymmetric() || a.Val[2] != 1+0x1p-52 || back.Row(1) != 1 {
		t.Errorf("A = %v, error %v", p.A, err)
	}
	for _, v := range []float64{0, 1 + 1e-14, -1} {
		b := linear.FromEntries(2, 2, []linear.Entry{{I: 0, J: 1, V: 1}, {I: 1, J: 0, V: v}})
		if _, _, err := symmetriseEntry.Apply(context.Background(), linear.System{A: b}, linear.Values{}); err == nil {
			t.Errorf("1 and %g were made one", v)
		}
	}
}
