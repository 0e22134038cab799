package precond

import (
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// line returns the 1-D Dirichlet operator tridiag(sub, diag, super).
func line(n int, sub, diag, super float64) *linear.CSR {
	var e []linear.Entry
	for i := 0; i < n; i++ {
		e = append(e, linear.Entry{I: i, J: i, V: diag})
		if i > 0 {
			e = append(e, linear.Entry{I: i, J: i - 1, V: sub}, linear.Entry{I: i - 1, J: i, V: super})
		}
	}
	return linear.FromEntries(n, n, e)
}

// plate returns the 5-point operator with stencil 4, −1 on an n x n grid.
func plate(n int) *linear.CSR {
	var e []linear.Entry
	for i := 0; i < n*n; i++ {
		e = append(e, linear.Entry{I: i, J: i, V: 4})
		if i%n > 0 {
			e = append(e, linear.Entry{I: i, J: i - 1, V: -1}, linear.Entry{I: i - 1, J: i, V: -1})
		}
		if i >= n {
			e = append(e, linear.Entry{I: i, J: i - n, V: -1}, linear.Entry{I: i - n, J: i, V: -1})
		}
	}
	return linear.FromEntries(n*n, n*n, e)
}

// kershaw returns the 4 x 4 positive definite matrix whose incomplete
// Cholesky factorisation breaks down (Kershaw, J. Comput. Phys. 26 (1978)).
func kershaw() *linear.CSR {
	return fromRows([][]float64{{3, -2, 0, 2}, {-2, 3, -2, 0}, {0, -2, 3, -2}, {2, 0, -2, 3}})
}

// fromRows stores the nonzero entries of a dense matrix.
func fromRows(rows [][]float64) *linear.CSR {
	var e []linear.Entry
	for i, r := range rows {
		for j, v := range r {
			if v != 0 {
				e = append(e, linear.Entry{I: i, J: j, V: v})
			}
		}
	}
	return linear.FromEntries(len(rows), len(rows[0]), e)
}

// unsymmetric returns a diagonally dominant random matrix of unsymmetric
// pattern.
func unsymmetric(n int) *linear.CSR {
	r := rand.New(rand.NewPCG(7, 11))
	var e []linear.Entry
	for i := 0; i < n; i++ {
		e = append(e, linear.Entry{I: i, J: i, V: 8 + r.Float64()})
		for k := 0; k < 4; k++ {
			e = append(e, linear.Entry{I: i, J: r.IntN(n), V: r.Float64() - 0.5})
		}
	}
	return linear.FromEntries(n, n, e)
}

// made builds the written preconditioner for a.
func made(t *testing.T, a linear.Operator, written string) (linear.Applier, trace.BuildNotes) {
	t.Helper()
	m, notes, err := tryMake(t, a, written)
	if err != nil {
		t.Fatal(err)
	}
	return m, notes
}

func tryMake(t *testing.T, a linear.Operator, written string) (linear.Applier, trace.BuildNotes, error) {
	t.Helper()
	e, v := lookup(t, written)
	return e.Build(context.Background(), parted(a), v, nil)
}

// parted is the system of a with every other unknown in the second block, for
// the methods that ask for two.
func parted(a linear.Operator) linear.System {
	n, _ := a.Dims()
	s := linear.System{A: a, Second: make([]bool, n)}
	for i := 1; i < n; i += 2 {
		s.Second[i] = true
	}
	return s
}

func lookup(t *testing.T, written string) (Entry, linear.Values) {
	t.Helper()
	p, err := linear.ParsePairing("cg+" + written)
	if err != nil {
		t.Fatal(err)
	}
	e, ok := Lookup(p.Precond.Name)
	if !ok {
		t.Fatalf("no preconditioner %q", p.Precond.Name)
	}
	v, err := linear.Resolve(e.Name, e.Params, p.Precond.Args)
	if err != nil {
		t.Fatal(err)
	}
	return e, v
}

// broke asserts that err is a Breakdown in the row (from 0).
func broke(t *testing.T, err error, row int) {
	t.Helper()
	var b *Breakdown
	if !errors.As(err, &b) {
		t.Fatalf("error %v, want a *Breakdown", err)
	}
	if b.Row != row {
		t.Errorf("breaks down in row %d, want %d: %v", b.Row, row, err)
	}
}

// dense returns a as a dense matrix.
func dense(a *linear.CSR) *mat.Dense {
	d := mat.NewDense(a.NRows, a.NCols, nil)
	for i := 0; i < a.NRows; i++ {
		cols, vals := a.Row(i)
		for k, c := range cols {
			d.Set(i, int(c), vals[k])
		}
	}
	return d
}

// inverse returns M⁻¹ as a dense matrix, column by column.
func inverse(m linear.Applier, n int) *mat.Dense {
	d := mat.NewDense(n, n, nil)
	x, y := make([]float64, n), make([]float64, n)
	for j := 0; j < n; j++ {
		clear(x)
		x[j] = 1
		m.Apply(y, x)
		d.SetCol(j, y)
	}
	return d
}

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol*math.Max(1, math.Abs(want))) {
		t.Errorf("%s is %.15g, want %.15g within %g", what, got, want, tol)
	}
}
