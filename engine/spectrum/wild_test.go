package spectrum

import (
	"math"
	"math/rand/v2"
	"testing"
)

// Coefficients spread over up to seventy decades, definite or not, in either
// form: the ends are numbers in order, never move inwards as the matrix grows,
// and their signs agree with the inertia.
func TestWildCoefficients(t *testing.T) {
	rng := rand.New(rand.NewPCG(11, 12))
	for trial := range 800 {
		spread := float64(1 + trial%40)
		wild := func() float64 { return math.Exp(spread * rng.NormFloat64()) }
		var T Tridiagonal
		last := Extremes{Smallest: math.Inf(1), Largest: math.Inf(-1)}
		for range 60 {
			grows := false
			if trial%2 == 0 {
				alpha := wild()
				if trial%3 == 0 && rng.IntN(4) == 0 {
					alpha = -alpha
				}
				grows = T.AddCG(alpha, wild())
			} else {
				grows = T.AddLanczos(rng.NormFloat64()*wild(), wild())
			}
			x := T.Extremes()
			if fault := implausible(x, last, T.form == fromCG); fault != "" {
				t.Fatalf("trial %d: %s: %+v after %+v", trial, fault, x, last)
			}
			if last = x; !grows {
				break
			}
		}
	}
}

func implausible(x, last Extremes, signed bool) string {
	switch {
	case !finite(x.Smallest) || !finite(x.Largest) || !(x.ResidualSmallest >= 0) || !(x.ResidualLargest >= 0):
		return "not numbers"
	case x.Smallest > x.Largest:
		return "not in order"
	case last.Order > 1 && (x.Smallest > last.Smallest || x.Largest < last.Largest):
		return "moved inwards" // from order 1, whose value is exact, by rounding only
	case signed && x.Negative < last.Negative: // in the other form the rounding bound grows with T
		return "lost a negative value"
	case x.Negative > 0 && x.Smallest > 0, signed && x.Negative == 0 && x.Smallest <= 0:
		return "sign against inertia"
	}
	return ""
}
