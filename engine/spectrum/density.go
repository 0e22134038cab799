package spectrum

import (
	"context"
	"math"

	"dwindle/engine/linear"
)

// Bar is one bar of a spectral density.
type Bar struct {
	From, To float64
	Count    float64 // eigenvalues in [From, To), estimated
	Sd       float64 // standard error of Count over the probes; NaN with one probe
}

// Density estimates how many eigenvalues of a symmetric operator of order n lie
// between neighbouring edges (rising), by stochastic Lanczos quadrature: Gauss
// rules of order steps for probes vectors of random signs, N·mean Σ τ over the
// nodes of a bar (Golub and Meurant 1994; Ubaru, Chen and Saad, SIAM J. Matrix
// Anal. Appl. 38, 2017). What lies outside the edges is counted with the
// nearest bar. It takes steps·probes products.
func Density(ctx context.Context, n int, apply func(dst, x []float64), edges []float64, steps, probes int) ([]Bar, error) {
	bars := make([]Bar, len(edges)-1)
	squares := make([]float64, len(bars))
	for p := range probes {
		b := newBasis(n, apply, Wanted{Basis: min(steps, n), Products: steps})
		b.v = [][]float64{signs(n, uint64(p))}
		for !b.closed && b.size < b.Basis {
			if err := ctx.Err(); err != nil {
				return nil, err
			}
			b.extend()
		}
		if !b.ritz() {
			continue
		}
		share := make([]float64, len(bars))
		for j, v := range b.values {
			share[slot(edges, v)] += float64(n) * b.s[j] * b.s[j] // first component of vector j
		}
		for k, c := range share {
			bars[k].Count += c / float64(probes)
			squares[k] += c * c / float64(probes)
		}
	}
	for k := range bars {
		bars[k].From, bars[k].To = edges[k], edges[k+1]
		spread := max(0, squares[k]-bars[k].Count*bars[k].Count)
		bars[k].Sd = math.Sqrt(spread / float64(probes-1))
	}
	return bars, nil
}

// slot finds the bar of a value.
func slot(edges []float64, v float64) int {
	k := 0
	for k < len(edges)-2 && v >= edges[k+1] {
		k++
	}
	return k
}

// signs is a unit vector of random signs, the p-th of a fixed sequence.
func signs(n int, p uint64) []float64 {
	v := make([]float64, n)
	linear.Uniform(v, 0xde25+p<<32)
	for i, x := range v {
		v[i] = math.Copysign(1/math.Sqrt(float64(n)), x)
	}
	return v
}
