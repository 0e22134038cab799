package report

import (
	"math"
	"strconv"

	"gonum.org/v1/plot"
)

// reach is the axis of eigenvalues: logarithmic where all are positive,
// logarithmic to both sides of zero (asinh) where some are not, and linear
// where they span less than a decade.
type reach struct {
	low, high float64
	bend      float64 // of the asinh; 0 for none
	log       bool
}

// newReach covers finite values; ok is false where there are none.
func newReach(values []float64) (r reach, ok bool) {
	r = reach{low: math.Inf(1), high: math.Inf(-1)}
	least := math.Inf(1) // size of the smallest that is not zero
	for _, x := range values {
		if !finite(x) {
			continue
		}
		r.low, r.high = min(r.low, x), max(r.high, x)
		if x != 0 {
			least = min(least, math.Abs(x))
		}
	}
	if r.low > r.high {
		return r, false
	}
	size := max(math.Abs(r.low), math.Abs(r.high))
	switch {
	case r.low > 0 && r.high >= 10*r.low:
		r.log = true
		r.low, r.high = max(r.low/1.3, math.SmallestNonzeroFloat64), r.high*1.3
	case size > 0 && size >= 100*least:
		r.bend = max(least, size*1e-14)
		r.low, r.high = r.low-0.3*math.Abs(r.low), r.high+0.3*math.Abs(r.high)
	default:
		pad := 0.06 * (r.high - r.low)
		if pad == 0 {
			pad = max(size*0.1, 1e-300)
		}
		r.low, r.high = r.low-pad, r.high+pad
	}
	return r, true
}

func (r reach) of(x float64) float64 {
	switch {
	case r.log:
		return math.Log10(max(x, r.low))
	case r.bend > 0:
		return math.Asinh(x / r.bend)
	}
	return x
}

// Normalize makes it the axis of a plot: values far outside end just outside.
func (r reach) Normalize(_, _, x float64) float64 {
	low, high := r.of(r.low), r.of(r.high)
	share := (r.of(x) - low) / (high - low)
	if math.IsNaN(share) {
		return 0
	}
	return min(max(share, -1), 2)
}

// ticks are about most numbers on the axis.
func (r reach) ticks(most int) []plot.Tick {
	switch {
	case r.log:
		return r.powers(math.Log10(r.low), math.Log10(r.high), 1, most)
	case r.bend > 0:
		out := []plot.Tick{{Value: 0, Label: "0"}}
		first := math.Log10(r.bend)
		out = append(out, r.powers(first, math.Log10(max(r.high, 0)), 1, most/2)...)
		return append(out, r.powers(first, math.Log10(max(-r.low, 0)), -1, most/2)...)
	}
	return roundTicks(r.low, r.high, most)
}

// powers are powers of ten of one sign with exponents between low and high.
func (r reach) powers(low, high, sign float64, most int) []plot.Tick {
	if !(high > low) {
		return nil
	}
	var out []plot.Tick
	for _, t := range decadeTicks(math.Floor(low)+1, high, max(most, 1)) {
		label := t.Label
		if sign < 0 {
			label = "-" + label
		}
		out = append(out, plot.Tick{Value: sign * math.Pow(10, t.Value), Label: label})
	}
	if len(out) < 2 && r.log {
		return roundTicks(r.low, r.high, most)
	}
	return out
}

// short prints a value of a spectrum.
func short(x float64) string {
	if !finite(x) {
		return "-"
	}
	return strconv.FormatFloat(x, 'g', 3, 64)
}
