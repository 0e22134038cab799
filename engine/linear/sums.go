package linear

import "math"

// Zeroness says how nearly a sum is zero; larger is nearer.
type Zeroness uint8

// The degrees of zeroness of a sum of k numbers.
const (
	NotZero      Zeroness = iota
	WithinDigits          // |Σ| ≤ (k·2⁻⁵³ + delta)·Σ|a|: the printed digits hide the difference
	ToRounding            // |Σ| ≤ k·2⁻⁵³·Σ|a|
	ExactlyZero           // Σ = 0 in exact arithmetic
)

// Zero tells how nearly the numbers sum to zero; delta is the relative change
// of each that their printed digits leave open. The sum is taken exactly.
func Zero(v []float64, delta float64) Zeroness { return new(ExactSum).zero(v, delta) }

func (e *ExactSum) zero(v []float64, delta float64) Zeroness {
	sum, size := 0.0, 0.0
	for _, x := range v {
		sum += x
		size += math.Abs(x)
	}
	round := float64(len(v)) * 0x1p-53 * size
	if !(size < 1e300) || math.Abs(sum) > 2*round+delta*size {
		return NotZero
	}
	e.Reset()
	for _, x := range v {
		e.Add(x)
	}
	switch sum = math.Abs(e.Value()); {
	case sum == 0:
		return ExactlyZero
	case sum <= round:
		return ToRounding
	case sum <= round+delta*size:
		return WithinDigits
	}
	return NotZero
}

// RowSums tells for each component how nearly all its rows of a sum to zero:
// where they do, the indicator of the component is a null vector of a. For the
// columns of A pass Aᵀ.
func (c *Components) RowSums(a *CSR, delta float64) []Zeroness {
	z := make([]Zeroness, c.Count)
	for i := range z {
		z[i] = ExactlyZero
	}
	var e ExactSum
	for i, k := range c.Of {
		if z[k] != NotZero {
			_, vals := a.Row(i)
			z[k] = min(z[k], e.zero(vals, delta))
		}
	}
	return z
}
