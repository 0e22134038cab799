package spectrum_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/spectrum"
)

// Nodes and weights against the dense eigenpairs, by gonum, of the Lanczos
// matrix multiplied out; the bounds hold the eigenvalues of the operator.
func TestGaussAgainstDense(t *testing.T) {
	values := strakos(24, .1, 100, .9)
	c := conjugate(t, diagonalOf(values), plain{}, ones(24), 0, 12, nil)
	q, ok := spectrum.Gauss(c.alphas, c.betas)
	if !ok {
		t.Fatal("no quadrature of a definite matrix")
	}
	k := len(c.alphas)
	dense := mat.NewSymDense(k, nil)
	for j, a := range c.alphas {
		d := 1 / a
		if j > 0 {
			d += c.betas[j-1] / c.alphas[j-1]
			dense.SetSym(j-1, j, math.Sqrt(c.betas[j-1])/c.alphas[j-1])
		}
		dense.SetSym(j, j, d)
	}
	var eigen mat.EigenSym
	eigen.Factorize(dense, true)
	var vectors mat.Dense
	eigen.VectorsTo(&vectors)
	sum, out := 0.0, math.Sqrt(c.betas[k-1])/c.alphas[k-1]
	for i, want := range eigen.Values(nil) {
		if math.Abs(q.Nodes[i]-want) > 1e-11*want {
			t.Errorf("node %d: %.15g, want %.15g", i, q.Nodes[i], want)
		}
		w, b := vectors.At(0, i), vectors.At(k-1, i)
		if math.Abs(q.Weights[i]-w*w) > 1e-11 || math.Abs(q.Bounds[i]-out*math.Abs(b)) > 1e-9*out {
			t.Errorf("node %d: weight %g, bound %g, want %g, %g", i, q.Weights[i], q.Bounds[i], w*w, out*math.Abs(b))
		}
		sum += q.Weights[i]
		nearest := math.Inf(1)
		for _, v := range values {
			nearest = math.Min(nearest, math.Abs(v-q.Nodes[i]))
		}
		if nearest > q.Bounds[i]*(1+1e-9)+1e-11 {
			t.Errorf("node %g: no eigenvalue within %g", q.Nodes[i], q.Bounds[i])
		}
	}
	if math.Abs(sum-1) > 1e-13 {
		t.Errorf("the weights add up to %.16g", sum)
	}
}

func TestGaussRefuses(t *testing.T) {
	for _, c := range []course{{}, {alphas: []float64{1, -1}, betas: []float64{1, 1}},
		{alphas: []float64{1, 1}, betas: []float64{-1, 1}}, {alphas: []float64{math.NaN()}, betas: []float64{1}}} {
		if _, ok := spectrum.Gauss(c.alphas, c.betas); ok {
			t.Errorf("%v, %v: taken for definite", c.alphas, c.betas)
		}
	}
	q, ok := spectrum.Gauss([]float64{.25}, []float64{0})
	if !ok || q.Nodes[0] != 4 || q.Weights[0] != 1 || q.Bounds[0] != 0 {
		t.Errorf("one step: %+v", q)
	}
}
