package inspect_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
)

// I − Pᵀ of a Markov chain is singular; what its singular values hold beside the
// zero is what gonum's SVD finds, not what factors without a last pivot make of it.
func TestSingularValuesBesideAZero(t *testing.T) {
	for seed := range 12 {
		besideAZero(t, rand.New(rand.NewPCG(5, uint64(seed))))
	}
}

func besideAZero(t *testing.T, rng *rand.Rand) {
	const n = 60
	d := mat.NewDense(n, n, nil)
	for i := range n {
		p, sum := make([]float64, n), 0.0
		for range 5 {
			p[rng.IntN(n)] += rng.Float64()
		}
		p[(i+1)%n] += 0.3
		for _, v := range p {
			sum += v
		}
		for j, v := range p {
			d.Set(j, i, d.At(j, i)-v/sum)
		}
		d.Set(i, i, d.At(i, i)+1)
	}
	var e []linear.Entry
	for i := range n {
		for j := range n {
			if v := d.At(i, j); v != 0 {
				e = append(e, linear.Entry{I: i, J: j, V: v})
			}
		}
	}
	var svd mat.SVD
	svd.Factorize(d, mat.SVDNone)
	want := svd.Values(nil)[n-2]
	b := make([]float64, n)
	b[0], b[1] = 1, -1
	x := studied(t, linear.System{Name: "chain", A: linear.FromEntries(n, n, e), B: b, Digits: 17}, inspect.Quick).Study.Raw
	if x.Smallest > 1e-13 || len(x.Low) < 2 || math.Abs(x.Low[1]-want) > 1e-9*want {
		t.Errorf("smallest %g, the low ones %v; the second is %g", x.Smallest, x.Low, want)
	}
}
