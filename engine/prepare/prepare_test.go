package prepare

import (
	"context"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"dwindle/engine/linear"
)

// badlyScaled is a random sparse matrix with rows and columns in very
// different units; with symmetric it equals its transpose.
func badlyScaled(rng *rand.Rand, n int, symmetric bool) *linear.CSR {
	unit := make([]float64, n)
	for i := range unit {
		unit[i] = math.Pow(10, 16*rng.Float64()-8)
	}
	var e []linear.Entry
	for i := range n {
		e = append(e, linear.Entry{I: i, J: i, V: (1 + rng.Float64()) * unit[i] * unit[i]})
		for range 3 {
			j, v := rng.IntN(n), rng.NormFloat64()
			if j == i {
				continue
			}
			e = append(e, linear.Entry{I: i, J: j, V: v * unit[i] * unit[j]})
			if symmetric {
				e = append(e, linear.Entry{I: j, J: i, V: v * unit[i] * unit[j]})
			}
		}
	}
	return linear.FromEntries(n, n, e)
}

func systemOf(rng *rand.Rand, a *linear.CSR) linear.System {
	n := a.NRows
	s := linear.System{A: a, B: make([]float64, n), Guess: make([]float64, n), Exact: make([]float64, n), Digits: 17}
	for i := range n {
		s.Exact[i], s.Guess[i] = rng.NormFloat64(), rng.NormFloat64()
	}
	a.Apply(s.B, s.Exact)
	return s
}

func TestScaleAndTheWayBack(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 1))
	for trial := range 20 {
		symmetric := trial%2 == 0
		a := badlyScaled(rng, 40, symmetric)
		s := systemOf(rng, a)
		p, back, err := scaleEntry.Apply(context.Background(), s, linear.Values{})
		if err != nil {
			t.Fatal(err)
		}
		m := p.Matrix()
		if symmetric && !m.ExactlySymmetric() {
			t.Error("a symmetric matrix lost its symmetry")
		}
		for _, q := range []*linear.CSR{m, m.Transpose()} {
			for i := range q.NRows {
				if _, v := q.Row(i); linear.NormInf(v) < 0.9 || linear.NormInf(v) > 1.1 {
					t.Errorf("row or column %d has norm %g", i, linear.NormInf(v))
				}
			}
		}
		residualsAgree(t, s, p, back.(scaling))
	}
}

// residualsAgree checks Dr (b − A x) = b̃ − Ã y with x = Dc y, each row to the
// rounding of its own sum.
func residualsAgree(t *testing.T, s, p linear.System, back scaling) {
	n := s.N()
	x, r, q := make([]float64, n), make([]float64, n), make([]float64, n)
	for _, y := range [][]float64{p.Guess, p.Exact} {
		back.Solution(x, y)
		linear.Residual(r, s.A, x, s.B)
		linear.Residual(q, p.A, y, p.B)
		for i := range r {
			size := math.Abs(p.B[i])
			cols, vals := p.Matrix().Row(i)
			for k, j := range cols {
				size += math.Abs(vals[k] * y[j])
			}
			if math.Abs(back.row[back.Row(i)]*r[i]-q[i]) > 100*0x1p-53*size {
				t.Fatalf("row %d: scaled residual %g, expected %g", i, q[i], back.row[i]*r[i])
			}
		}
	}
	back.Solution(x, p.Exact)
	for i := range x {
		if math.Abs(x[i]-s.Exact[i]) > 4*0x1p-53*math.Abs(s.Exact[i]) {
			t.Error("the way back does not give the solution")
		}
	}
}

func TestScaleLeavesEmptyRowsAlone(t *testing.T) {
	a := linear.FromEntries(3, 3, []linear.Entry{{I: 0, J: 0, V: 1e8}, {I: 2, J: 0, V: 0}})
	p, _, err := scaleEntry.Apply(context.Background(), linear.System{A: a, B: []float64{1, 2, 3}}, linear.Values{})
	if err != nil || p.B[1] != 2 || p.B[2] != 3 || p.Matrix().At(0, 0) > 2 || p.Guess != nil {
		t.Errorf("b = %v, A = %v, err = %v", p.B, p.Matrix().Val, err)
	}
}

func TestScaleCanBeCancelled(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	a := linear.FromEntries(1, 1, []linear.Entry{{V: 4}})
	if _, _, err := scaleEntry.Apply(ctx, linear.System{A: a, B: []float64{1}}, linear.Values{}); err == nil {
		t.Error("no error after cancellation")
	}
}

// Seepage on a ring of cells without a fixed head: constants are the null
// vectors, so b = e₁ has the part 1/n that no flow can carry away.
func TestProject(t *testing.T) {
	n := 8
	var e []linear.Entry
	for i := range n {
		e = append(e, linear.Entry{I: i, J: i, V: 2}, linear.Entry{I: i, J: (i + 1) % n, V: -1}, linear.Entry{I: (i + 1) % n, J: i, V: -1})
	}
	s := linear.System{A: linear.FromEntries(n, n, e), B: make([]float64, n)}
	s.B[0] = 1
	p, back, err := projectEntry.Apply(context.Background(), s, linear.Values{})
	if err != nil {
		t.Fatal(err)
	}
	want := []float64{0.875, -0.125, -0.125, -0.125, -0.125, -0.125, -0.125, -0.125}
	if !slices.Equal(p.B, want) || s.B[0] != 1 {
		t.Errorf("projected b = %v, b = %v", p.B, s.B)
	}
	x := make([]float64, n)
	if back.Solution(x, want); !slices.Equal(x, want) || back.Row(3) != 3 {
		t.Error("the projection must leave x as it is")
	}
}

// A chain of springs with weights has a null vector that no sum shows: D L D
// maps the inverse of D to zero (closed form). Given with a vector that is none,
// it alone is taken out of b.
func TestProjectOfFoundVectors(t *testing.T) {
	n := 6
	d, null, other := make([]float64, n), make([]float64, n), make([]float64, n)
	for i := range n {
		d[i] = float64(int(1) << i)
		null[i], other[i] = 1/d[i], float64(i)
	}
	var e []linear.Entry
	for i := range n - 1 {
		e = append(e, linear.Entry{I: i, J: i, V: d[i] * d[i]}, linear.Entry{I: i + 1, J: i + 1, V: d[i+1] * d[i+1]},
			linear.Entry{I: i, J: i + 1, V: -d[i] * d[i+1]}, linear.Entry{I: i + 1, J: i, V: -d[i] * d[i+1]})
	}
	s := linear.System{A: linear.FromEntries(n, n, e), B: []float64{1, 0, 0, 0, 0, 0}, Null: [][]float64{other, null, null}}
	p, _, err := projectEntry.Apply(context.Background(), s, linear.Values{})
	if err != nil {
		t.Fatal(err)
	}
	along := linear.Dot(s.B, null) / linear.Dot(null, null)
	for i := range n {
		if want := s.B[i] - along*null[i]; math.Abs(p.B[i]-want) > 1e-15 {
			t.Errorf("projected b[%d] = %g, want %g", i, p.B[i], want)
		}
	}
}

func TestProjectRefusesRegular(t *testing.T) {
	s := linear.System{A: linear.FromEntries(1, 1, []linear.Entry{{V: 4}}), B: []float64{1}}
	if _, _, err := projectEntry.Apply(context.Background(), s, linear.Values{}); err == nil {
		t.Error("a regular system was projected")
	}
}

// What is left of a matrix without its stored zeros is the same matrix.
func TestPrune(t *testing.T) {
	a := linear.FromEntries(3, 3, []linear.Entry{{I: 0, J: 0, V: 2}, {I: 0, J: 2}, {I: 1, J: 1}, {I: 1, J: 2, V: 3}, {I: 2, J: 0, V: -1}})
	p, _, err := pruneEntry.Apply(context.Background(), linear.System{A: a, B: make([]float64, 3)}, linear.Values{})
	if err != nil {
		t.Fatal(err)
	}
	m := p.Matrix()
	if m.Entries() != 3 || len(m.Ptr) != 4 {
		t.Errorf("%d entries are left of 5 with two zeros", m.Entries())
	}
	for i := range 3 {
		for j := range 3 {
			if m.At(i, j) != a.At(i, j) {
				t.Errorf("entry (%d,%d) is %g, was %g", i, j, m.At(i, j), a.At(i, j))
			}
		}
	}
}

func TestCatalogue(t *testing.T) {
	for _, e := range Catalogue {
		if got, ok := Lookup(e.Name); !ok || got.Title != e.Title || e.Source == "" || e.Apply == nil || e.Estimate == nil {
			t.Errorf("entry %q is incomplete", e.Name)
		}
		if _, _, err := e.Apply(context.Background(), linear.System{A: linear.Func{N: 1}, B: []float64{1}}, linear.Values{}); err == nil {
			t.Errorf("%s took a matrix without entries", e.Name)
		}
	}
	if _, ok := Lookup("nothing"); ok {
		t.Error("found what is not there")
	}
}
