package precond

import (
	"context"
	"math/rand/v2"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// The small solvers against gonum's.
func TestSmallSolvers(t *testing.T) {
	r := rand.New(rand.NewPCG(4, 2))
	for _, n := range []int{1, 2, 5, 12} {
		v := make([]float64, n*n)
		for i := range v {
			v[i] = r.NormFloat64()
		}
		a := mat.NewDense(n, n, slices.Clone(v))
		var spd mat.Dense
		spd.Mul(a, a.T())
		b := make([]float64, n)
		for i := range b {
			b[i] = r.NormFloat64()
		}
		check := func(what string, m *mat.Dense, x []float64) {
			var want mat.VecDense
			if err := want.SolveVec(m, mat.NewVecDense(n, b)); err != nil {
				t.Fatal(err)
			}
			for i := range x {
				near(t, what, x[i], want.AtVec(i), 1e-9)
			}
		}
		s := square{n, slices.Clone(v)}
		p, x := make([]int, n), make([]float64, n)
		if broke := s.lu(p); broke >= 0 {
			t.Fatalf("no pivot in row %d", broke)
		}
		for i, from := range p {
			x[i] = b[from]
		}
		s.solveLU(x)
		check("LU", a, x)
		s = square{n, slices.Clone(spd.RawMatrix().Data)}
		if broke := s.cholesky(); broke >= 0 {
			t.Fatalf("not definite in row %d", broke)
		}
		copy(x, b)
		s.solveCholesky(x)
		check("Cholesky", &spd, x)
	}
	s := square{2, []float64{1, 2, 2, 1}}
	if s.cholesky() != 1 {
		t.Error("an indefinite matrix is factored")
	}
	s = square{2, []float64{1, 2, 2, 4}}
	if s.lu(make([]int, 2)) != 1 {
		t.Error("a singular matrix is factored")
	}
}

func TestLeastSquares(t *testing.T) {
	r := rand.New(rand.NewPCG(8, 2))
	for _, shape := range [][2]int{{1, 1}, {4, 4}, {9, 3}, {20, 7}} {
		rows, cols := shape[0], shape[1]
		b, c := make([]float64, rows*cols), make([]float64, rows)
		m := mat.NewDense(rows, cols, nil)
		for k := range b {
			b[k] = r.NormFloat64()
			m.Set(k%rows, k/rows, b[k])
		}
		for k := range c {
			c[k] = r.NormFloat64()
		}
		var want mat.VecDense
		if err := want.SolveVec(m, mat.NewVecDense(rows, slices.Clone(c))); err != nil {
			t.Fatal(err)
		}
		leastSquares(context.Background(), b, rows, cols, c)
		for j := 0; j < cols; j++ {
			near(t, "unknown", c[j], want.AtVec(j), 1e-12)
		}
	}
	// The second column is twice the first: its unknown is 0.
	c := []float64{2, 4, 1}
	leastSquares(context.Background(), []float64{1, 2, 0, 2, 4, 0}, 3, 2, c)
	near(t, "first unknown", c[0], 2, 1e-14)
	near(t, "second unknown", c[1], 0, 1e-14)
}
