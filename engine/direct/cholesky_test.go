package direct

import (
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
	"dwindle/engine/load"
)

// openMatrix reads one of the open matrices, or skips.
func openMatrix(t *testing.T, name string) *linear.CSR {
	t.Helper()
	dir := os.Getenv("DWINDLE_OPEN")
	if dir == "" {
		t.Skip("DWINDLE_OPEN does not name the folder of open matrices")
	}
	s, err := load.File(context.Background(), filepath.Join(dir, name), nil)
	if err != nil {
		t.Fatal(err)
	}
	return s.Matrix()
}

func factored(t *testing.T, a *linear.CSR, how Ordering) *Cholesky {
	t.Helper()
	c, err := FactorCholesky(context.Background(), a, Analyse(a, Order(a, how)), nil)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// lower returns L as a dense matrix.
func (c *Cholesky) lower() *mat.Dense {
	d := mat.NewDense(c.l.N, c.l.N, nil)
	for k := range c.l.up {
		b := c.block(k)
		for i, r := range c.l.rowsOf(k) {
			for j := range min(i+1, b.cols) {
				d.Set(int(r), int(c.l.start[k])+j, b.row(i)[j])
			}
		}
	}
	return d
}

func denseOf(a *linear.CSR) *mat.Dense {
	d := mat.NewDense(a.NRows, a.NCols, nil)
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, j := range cols {
			d.Set(i, int(j), vals[k])
		}
	}
	return d
}

// randomDefinite is a random symmetric, diagonally dominant matrix.
func randomDefinite(rng *rand.Rand, n int) *linear.CSR {
	a := randomPattern(rng, n, 2)
	for i := range n {
		cols, vals := a.Row(i)
		for k, j := range cols {
			if int(j) == i {
				vals[k] = float64(len(cols)) + rng.Float64()
			}
		}
	}
	return a
}

// ‖P A Pᵀ − L Lᵀ‖ is of the size of rounding (Higham 2002, Theorem 10.3), and
// the factor takes the memory and entries that were predicted.
func TestCholeskyFactor(t *testing.T) {
	rng := rand.New(rand.NewPCG(8, 1))
	cases := []*linear.CSR{grid(1), grid(2), grid(17), box(6)}
	for range 20 {
		cases = append(cases, randomDefinite(rng, 1+rng.IntN(120)))
	}
	for n, a := range cases {
		for _, how := range Orderings {
			c := factored(t, a, Ordering(how))
			l := c.lower()
			var p, d mat.Dense
			p.Mul(l, l.T())
			d.Sub(denseOf(a.Permute(c.l.Order, c.l.Order)), &p)
			if err := mat.Norm(&d, math.Inf(1)) / mat.Norm(&p, math.Inf(1)); err > 1e-14 {
				t.Errorf("case %d, %s: residual of the factor %g", n, how, err)
			}
			if got, want := c.Bytes(), Analyse(a, Order(a, Ordering(how))).Bytes(); got != want {
				t.Errorf("case %d, %s: %d bytes, predicted %d", n, how, got, want)
			}
		}
	}
}

// Without a chance of cancellation the true entries of the factor are all
// nonzero, so they can be counted against the prediction.
func TestPredictedEntries(t *testing.T) {
	for _, a := range []*linear.CSR{grid(20), box(7)} {
		for _, how := range Orderings {
			c := factored(t, a, Ordering(how))
			nonzero := int64(0)
			for k := range c.l.up {
				b := c.block(k)
				for i := range b.rows {
					for _, v := range b.row(i)[:min(i+1, b.cols)] {
						if v != 0 {
							nonzero++
						}
					}
				}
			}
			if nonzero != c.Entries() {
				t.Errorf("%s: %d entries, predicted %d", how, nonzero, c.Entries())
			}
		}
	}
}

func solvedWith(t *testing.T, a *linear.CSR, s Solver) (err float64) {
	t.Helper()
	n := a.NRows
	want, b, x := make([]float64, n), make([]float64, n), make([]float64, n)
	linear.Uniform(want, 5)
	a.Apply(b, want)
	s.Solve(x, b)
	return componentwise(a, x, b)
}

// componentwise is the backward error of Oettli and Prager.
func componentwise(a *linear.CSR, x, b []float64) float64 {
	worst := 0.0
	for i := range b {
		cols, vals := a.Row(i)
		r, size := b[i], math.Abs(b[i])
		for k, j := range cols {
			r -= vals[k] * x[j]
			size += math.Abs(vals[k] * x[j])
		}
		if math.IsNaN(r) {
			return r
		}
		if r != 0 {
			worst = max(worst, math.Abs(r)/size)
		}
	}
	return worst
}

// Backward errors after one step of refinement are of the size of rounding.
func TestCholeskySolves(t *testing.T) {
	for name, a := range map[string]*linear.CSR{"plate 60": grid(60), "box 12": box(12),
		"bcsstk01": openMatrix(t, "bcsstk01.rsa"), "bcsstk13": openMatrix(t, "bcsstk13.mtx.gz"),
		"bcsstk16": openMatrix(t, "bcsstk16.mtx.gz"), "494_bus": openMatrix(t, "494_bus.mtx"), "LFAT5": openMatrix(t, "LFAT5.mtx")} {
		for _, how := range []Ordering{AMD, ND} {
			c := factored(t, a, how)
			plain, fine := solvedWith(t, a, c), solvedWith(t, a, Refine(a, c, a.NRows, 1))
			t.Logf("%s, %s: %d entries, componentwise error %.2g, refined %.2g", name, how, c.Entries(), plain, fine)
			if !(fine < 1e-14) {
				t.Errorf("%s, %s: componentwise error %g", name, how, fine)
			}
		}
	}
}

// The same bits for every number of threads.
func TestCholeskyThreads(t *testing.T) {
	a := box(16)
	var first []float64
	for _, threads := range []int{1, 2, 3} {
		linear.SetThreads(threads)
		c := factored(t, a, ND)
		if first == nil {
			first = c.val
		} else if !slices.Equal(first, c.val) {
			t.Errorf("%d threads give another factor", threads)
		}
	}
	linear.SetThreads(1)
}

func TestCholeskyBreaksDown(t *testing.T) {
	indefinite := grid(9)
	indefinite.Val[indefinite.Ptr[40]+2] = -3 // the diagonal entry of row 40
	neumann := grid(9)
	for i := range 81 { // row sums of zero: exactly singular
		cols, vals := neumann.Row(i)
		for k, j := range cols {
			if int(j) == i {
				vals[k] = float64(len(cols) - 1)
			}
		}
	}
	empty := linear.FromEntries(3, 3, []linear.Entry{{I: 0, J: 0, V: 1}, {I: 2, J: 2, V: 1}})
	for name, a := range map[string]*linear.CSR{"indefinite": indefinite, "singular": neumann, "empty row": empty} {
		_, err := FactorCholesky(context.Background(), a, Analyse(a, Order(a, AMD)), nil)
		var p *PivotError
		if !errors.As(err, &p) || p.Pivot > 1e-13 || p.Row < 0 || p.Row >= a.NRows {
			t.Errorf("%s: %v", name, err)
		}
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	a := grid(5)
	if _, err := FactorCholesky(ctx, a, Analyse(a, Order(a, AMD)), nil); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
}
