package inspect

import (
	"math"

	"dwindle/engine/spectrum"
)

// singularSpectrum fills in the outermost singular values of a view, and of A
// itself the eigenvalues, where the order is small.
func (e *exam) singularSpectrum(v *view, x *Spectrum) (*Spectrum, error) {
	n := v.order()
	if e.densely(n, 2) {
		if s := spectrum.DenseSingular(v.m); s != nil {
			x.fillSingular(s)
		}
	}
	if x.How == "dense" && v.m == e.a && e.densely(n, 10) {
		if values := spectrum.DenseEigenvalues(v.m); values != nil {
			x.Exact, x.Values = true, values
		}
	}
	if x.How == "" {
		if err := e.largestSingular(v, x); err != nil || !finite(x.Largest) {
			return nil, err
		}
	}
	if !v.invertible() {
		return x, nil
	}
	return x, e.smallestSingular(v, x)
}

// fillSingular takes all singular values, falling.
func (x *Spectrum) fillSingular(s []float64) {
	n := len(s)
	x.How, x.Certainty = "dense", Measured
	round := float64(n) * 0x1p-53 * s[0]
	x.Largest, x.Smallest, x.LargestBound, x.SmallestBound = s[0], s[n-1], round, round
	for k := range min(endsKept, n) {
		x.Low, x.High = append(x.Low, s[n-1-k]), append(x.High, s[k])
	}
	x.Condition = s[0] / s[n-1]
	if s[n-1] <= 10*round {
		x.Certainty, x.Condition = Estimated, s[0]/max(s[n-1], round)
	}
}

// largestSingular measures the large end by Lanczos on AᵀA.
func (e *exam) largestSingular(v *view, x *Spectrum) error {
	w := make([]float64, v.order())
	out, err := e.ends(v.order(), func(dst, y []float64) {
		v.m.Apply(w, y)
		v.m.ApplyT(dst, w)
	}, 0, 2, 2*e.product(), endProducts)
	if err != nil || len(out.High) == 0 {
		return err
	}
	x.How = "lanczos"
	x.Largest = math.Sqrt(out.High[0].Value)
	x.LargestBound = out.High[0].Bound / (2 * x.Largest)
	for _, p := range out.High {
		x.High = append(x.High, math.Sqrt(max(0, p.Value)))
	}
	return nil
}

// lostBelow is the share of the largest value of an inverse, or of (AᵀA)⁻¹,
// below which rounding leaves nothing of the others.
const lostBelow = 1e-12

// smallestSingular measures the small end by Lanczos on (AᵀA)⁻¹.
func (e *exam) smallestSingular(v *view, x *Spectrum) error {
	w := make([]float64, v.order())
	out, err := e.ends(v.order(), func(dst, y []float64) {
		v.inverseT(w, y)
		v.inverse(dst, w)
	}, 0, 4, 2*e.solveWork(), endProducts)
	if err != nil || len(out.High) == 0 {
		return err
	}
	square, bound := inverted(out.High[0])
	if !(square > 0) || !finite(square) || !finite(bound) {
		return nil // it over- or underflows; what is known stays
	}
	x.Smallest, x.SmallestBound = math.Sqrt(square), bound/(2*math.Sqrt(square))
	var low []float64
	for _, p := range out.High {
		if p.Value > lostBelow*out.High[0].Value {
			low = append(low, 1/math.Sqrt(p.Value))
		}
	}
	x.Low = append(low, x.Low[min(len(low), len(x.Low)):]...)
	if x.How != "dense" {
		x.How = "factor"
	}
	x.Condition, x.Certainty = x.Largest/x.Smallest, Estimated
	if x.SmallestBound <= 0.05*x.Smallest && x.LargestBound <= 0.05*x.Largest {
		x.Certainty = Measured
	}
	return nil
}
