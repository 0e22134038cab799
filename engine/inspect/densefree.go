package inspect

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/spectrum"
)

// pairs are all singular vectors of B with their values, rising.
type pairs struct {
	left, right [][]float64
	values      []float64
}

// doubtful says whether A has no factors of its own, or such as may have no
// correct digit: what they stretch is then no direction of A.
func (e *exam) doubtful() bool {
	x := e.out.Equilibrated
	return e.singular || x != nil && (x.Condition > shaky || x.Condition1 > shaky)
}

// denseFree finds the free directions densely, where A may be singular, is not
// symmetric, and is small: all that are mapped to zero, and no other beyond
// mostFree in all. Factors of A shifted would hide a zero eigenvalue that is
// defective. It returns the quotient of the first that is left out; ok is false
// where nothing was looked for.
func (e *exam) denseFree(norm float64, quotients *[]float64) (next float64, ok bool) {
	if e.symmetric || !e.doubtful() || !e.densely(e.f.N, 20) {
		return math.NaN(), false
	}
	left, right := spectrum.DenseNull(e.scaled, 1)
	if len(right) == 0 {
		return math.NaN(), false
	}
	e.dense = &pairs{left, right, make([]float64, len(right))}
	for k, v := range right {
		e.dense.values[k] = imageOf(e.scaled, v)
	}
	for k, v := range right {
		q := e.dense.values[k] / norm
		if q > freeLimit || q > ZeroLimit && len(e.free) >= mostFree {
			return q, true
		}
		e.free, *quotients = append(e.free, v), append(*quotients, q)
	}
	return math.NaN(), true
}

// sharpen takes from a left direction what the iteration for the singular
// vectors has left of those that are not nearly free: for y'B = r' that is
// (r'v)/s along the left vector of each value s and right vector v.
func (p *pairs) sharpen(y []float64, bt *linear.CSR, norm float64) {
	r := make([]float64, len(y))
	bt.Apply(r, y)
	for k, s := range p.values {
		if s > freeLimit*norm {
			linear.Axpy(-linear.Dot(r, p.right[k])/s, p.left[k], y)
		}
	}
	linear.Scale(y, 1/linear.Norm2(y), y)
}
