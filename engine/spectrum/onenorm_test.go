package spectrum

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// The estimate is a lower bound of the true 1-norm (computed from all entries
// by gonum) and, on random matrices, within a factor of three.
func TestOneNorm(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for _, n := range []int{1, 2, 5, 40} {
		for range 20 {
			a := mat.NewDense(n, n, nil)
			for i := range n {
				for j := range n {
					a.Set(i, j, rng.NormFloat64()*math.Exp(3*rng.NormFloat64()))
				}
			}
			times := func(m mat.Matrix) func(dst, x []float64) {
				return func(dst, x []float64) { mat.NewVecDense(n, dst).MulVec(m, mat.NewVecDense(n, x)) }
			}
			got, want := OneNorm(n, times(a), times(a.T())), mat.Norm(a, 1)
			if got > want*(1+1e-12) || got < want/3 {
				t.Errorf("order %d: %g, the norm is %g", n, got, want)
			}
		}
	}
}
