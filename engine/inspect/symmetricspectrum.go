package inspect

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/spectrum"
)

// symmetricSpectrum fills in the outermost eigenvalues of a symmetric view:
// all of them densely where that is affordable; else the ends by Lanczos on
// the matrix, and those next to zero on its inverse.
func (e *exam) symmetricSpectrum(v *view, x *Spectrum) (*Spectrum, error) {
	if e.densely(v.order(), 0.6) {
		if values := spectrum.DenseSymmetric(v.m); values != nil {
			x.fillDense(values)
			if e.f.PositiveDefinite.Answer == Yes {
				x.positive()
			}
		}
	}
	var near spectrum.Outermost // of the inverse: the small end matters more, and is first
	var err error
	if v.invertible() {
		if near, err = e.inverseEnds(v); err != nil {
			return nil, err
		}
	}
	if !x.Exact {
		if err := e.bareEnds(v, x, len(near.High) > 0); err != nil {
			return nil, err
		}
		if !finite(x.Largest) {
			return nil, nil
		}
	}
	if v.index == nil {
		x.zero(e.zeros())
	}
	if c := e.f.NegativeCount; v.index == nil && (c.Answer == No || c.Answer == Yes) {
		x.Negative = int(c.Value) // scaling alters no sign
	}
	if len(near.High) > 0 {
		x.fillNear(near, e.f.PositiveDefinite.Answer == Yes, v.shift)
	}
	return x, nil
}

// zeros is how many eigenvalues at the low end of a semi-definite A are proved
// to be zero; no scaling alters that.
func (e *exam) zeros() int {
	f := e.f
	if f.Semidefinite.Answer != Yes || f.Semidefinite.Certainty != Proved || f.RowSumsZero.Answer != Yes || f.RowSumsZero.Certainty != Proved {
		return 0
	}
	k := 0
	for _, z := range linear.FindComponents(e.a).RowSums(e.a, 0) {
		if z == linear.ExactlyZero {
			k++
		}
	}
	return k
}

// zero puts k proved zeros in the place of what was measured at the low end.
// What comes next is known where all values are.
func (x *Spectrum) zero(k int) {
	if k == 0 {
		return
	}
	low := make([]float64, k)
	if x.Exact && k < len(x.Low) {
		low = append(low, x.Low[k:]...)
	}
	x.Zeros, x.Smallest, x.SmallestBound, x.Low = k, 0, 0, low[:min(len(low), endsKept)]
}

// fillDense takes all eigenvalues, rising. The smallest magnitude is known to
// the rounding of the largest only.
func (x *Spectrum) fillDense(values []float64) {
	n := len(values)
	x.How, x.Exact, x.Certainty, x.Negative = "dense", true, Measured, 0
	x.Smallest, x.Largest = values[0], values[n-1]
	nearest, farthest := math.Inf(1), max(-values[0], values[n-1])
	round := float64(n) * 0x1p-53 * farthest
	x.SmallestBound, x.LargestBound = round, round
	x.Values = make([]complex128, n)
	for i, v := range values {
		x.Values[i] = complex(v, 0)
		nearest = min(nearest, math.Abs(v))
		if v < -round {
			x.Negative++
		}
	}
	for k := range min(endsKept, n) {
		x.Low, x.High = append(x.Low, values[k]), append(x.High, values[n-1-k])
	}
	x.Condition = farthest / nearest
	if nearest <= 10*round {
		x.Certainty = Estimated // only that it is at least as large is known
		x.Condition = farthest / max(nearest, round)
	}
}

// bareEnds measures both ends by products alone: the low one only where the
// inverse has not shown it.
func (e *exam) bareEnds(v *view, x *Spectrum, shown bool) error {
	definite, low, products := e.f.PositiveDefinite.Answer == Yes, 2, bareProducts
	if definite && shown {
		low, products = 0, endProducts
	}
	out, err := e.ends(v.order(), v.m.Apply, low, 2, e.product(), products)
	if err != nil || len(out.High) == 0 {
		return err
	}
	x.How = "lanczos"
	x.Largest, x.LargestBound = out.High[0].Value, out.High[0].Bound
	x.High = pairValues(out.High)
	if len(out.Low) > 0 && !(definite && out.Low[0].Bound >= out.Low[0].Value) { // else nothing is known of it
		x.Smallest, x.SmallestBound = out.Low[0].Value, out.Low[0].Bound
		x.Low = pairValues(out.Low)
	}
	if definite && x.Smallest > 0 && x.SmallestBound < x.Smallest {
		x.Condition = x.Largest / x.Smallest // a lower bound until both ends are settled
		if out.Settled {
			x.Certainty = Measured
		}
	}
	return nil
}

// inverseEnds are the ends of the inverse: the eigenvalues next to zero.
func (e *exam) inverseEnds(v *view) (spectrum.Outermost, error) {
	low := 2
	if e.f.PositiveDefinite.Answer == Yes || e.f.Semidefinite.Answer == Yes {
		low = 0
	}
	return e.ends(v.order(), v.inverse, low, 4, e.solveWork(), endProducts)
}

// besideZero adds to the zeros of a semi-definite A, which are proved, what
// comes next: from the ends of the inverse of A + shift·I.
func (x *Spectrum) besideZero(out spectrum.Outermost, shift float64) {
	if x.Exact || x.Zeros == 0 {
		return
	}
	for _, p := range out.High {
		value, bound := inverted(p)
		if value -= shift; value > 100*0x1p-53*x.Largest && bound <= 0.05*value && len(x.Low) < endsKept {
			x.How, x.Low = "factor", append(x.Low, value)
		}
	}
}

// fillNear takes the eigenvalues next to zero from the ends of the inverse, and
// the condition with them.
func (x *Spectrum) fillNear(out spectrum.Outermost, definite bool, shift float64) {
	if shift != 0 {
		x.besideZero(out, shift)
		return
	}
	nearest, bound := inverted(out.High[0])
	if len(out.Low) > 0 && -out.Low[0].Value > out.High[0].Value {
		nearest, bound = inverted(out.Low[0])
	}
	if !(math.Abs(nearest) > 0) {
		return
	}
	if definite && finite(nearest) && !(x.Exact && bound >= x.SmallestBound) {
		x.resolve(out, nearest, bound)
	}
	if !x.Exact {
		x.How = "factor"
	}
	x.Condition = max(math.Abs(x.Largest), math.Abs(x.Smallest)) / math.Abs(nearest)
	x.Certainty = Estimated
	if !(bound > 0.05*math.Abs(nearest)) && !(x.LargestBound > 0.05*math.Abs(x.Largest)) {
		x.Certainty = Measured
	}
}

// resolve takes the low end of a definite operator as its inverse resolves it;
// of the dense values beyond, those that stand above their rounding. No value
// is less than the last one resolved.
func (x *Spectrum) resolve(out spectrum.Outermost, smallest, bound float64) {
	dense, round := x.Low, x.SmallestBound
	x.Smallest, x.SmallestBound, x.Low = smallest, bound, nil
	for _, p := range out.High {
		if p.Value > lostBelow*out.High[0].Value {
			x.Low = append(x.Low, 1/p.Value)
		}
	}
	if !x.Exact {
		return
	}
	k := len(x.Low)
	for i, v := range x.Values {
		x.Values[i] = complex(max(real(v), x.Low[k-1]), 0)
		if i < k {
			x.Values[i] = complex(x.Low[i], 0)
		}
	}
	if k < len(dense) && dense[k] > 10*round {
		x.Low = append(x.Low, dense[k:]...)
	}
}

// positive keeps the dense values of a definite operator from being told as
// negative: where rounding hides the smallest it is at most that.
func (x *Spectrum) positive() {
	if round := x.SmallestBound; !(x.Smallest > 0) {
		x.Smallest, x.Low = round, nil
		for i, v := range x.Values {
			x.Values[i] = complex(max(real(v), 0), 0)
		}
	}
	x.Negative = 0
}

// inverted turns an eigenvalue of the inverse into one of the matrix, with its
// bound.
func inverted(p spectrum.Pair) (value, bound float64) {
	m := math.Abs(p.Value)
	if !(p.Bound < m) {
		return 1 / p.Value, math.Inf(1)
	}
	return 1 / p.Value, p.Bound / m / (m - p.Bound) // the square of m may not be a number
}

func pairValues(list []spectrum.Pair) []float64 {
	var out []float64
	for _, p := range list {
		out = append(out, p.Value)
	}
	return out
}
