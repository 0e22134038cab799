package tui

import (
	"fmt"
	"math"
	"math/rand"
	"testing"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// wild returns n numbers, some of them no numbers.
func wild(rng *rand.Rand, n int) []float64 {
	out := make([]float64, n)
	for i := range out {
		switch rng.Intn(8) {
		case 0:
			out[i] = []float64{math.NaN(), math.Inf(1), math.Inf(-1), 0, 5e-324, -5e-324, math.MaxFloat64}[rng.Intn(7)]
		default:
			out[i] = math.Pow(10, rng.Float64()*40-20) * float64(rng.Intn(3)-1)
		}
	}
	return out
}

// wildStudy is a second look that found anything.
func wildStudy(rng *rand.Rand) *inspect.Study {
	v := wild(rng, 40)
	spectrum := func() *inspect.Spectrum {
		if rng.Intn(3) == 0 {
			return nil
		}
		w := wild(rng, 12)
		s := &inspect.Spectrum{Of: "A \x1b[31m", How: "lanczos", Smallest: w[0], Largest: w[1], Condition: w[2], Low: w[3 : rng.Intn(4)+3], High: w[8:]}
		if rng.Intn(2) == 0 {
			s.Exact = true
			for k := range 11 {
				s.Values = append(s.Values, complex(w[k], w[11]*float64(rng.Intn(2))))
			}
		}
		return s
	}
	s := &inspect.Study{Raw: spectrum(), Equilibrated: spectrum(), Jacobi: spectrum(), Rest: spectrum(), Digits: v[0],
		Normality: &inspect.Normality{Henrici: v[1], FieldMin: v[2], FieldMax: v[3]},
		Null:      []inspect.NullDirection{{Quotient: v[4], Next: v[5], Rows: []int{3, 1 << 30}}}}
	for k := range rng.Intn(10) {
		s.Density = append(s.Density, inspect.Bin{From: v[10+k], To: v[20+k], Count: v[30], Sd: v[31]})
	}
	return s
}

// wildTrial is a history whose estimates are anything.
func wildTrial(rng *rand.Rand) trace.History {
	h := historyOf(trace.Stop(rng.Intn(16)), 1, 0.1, 0.01, 0.001)
	v := wild(rng, 30)
	for k := range rng.Intn(8) {
		h.Locks = append(h.Locks, trace.Lock{Value: v[k], Iter: rng.Intn(9) - 2, Copies: rng.Intn(30) - 2})
		h.EnergyErrors = append(h.EnergyErrors, trace.EnergyError{Iter: rng.Intn(9) - 2, Lower: v[k], Upper: v[k+8]})
		h.Predictions = append(h.Predictions, trace.Prediction{Iter: k, Total: v[k], Low: v[k+1], High: v[k+2]})
		h.WouldStop = append(h.WouldStop, trace.StopMark{Rule: "energy", Iter: rng.Intn(9) - 2, True: v[k]})
		h.Without = append(h.Without, trace.Counterfactual{What: trace.Deflated, Largest: v[k], Next: v[k+1]})
		h.Fields = append(h.Fields, trace.Field{Name: "\a\x1b]0;x", Residual: v[k], Tol: v[k+1]})
		h.Columns = append(h.Columns, trace.Column{Seconds: v[k]})
		h.Counts = append(h.Counts, rng.Intn(9))
	}
	if rng.Intn(2) == 0 {
		h.Locks = nil
		for k := range 9 {
			h.Harmonic = append(h.Harmonic, complex(v[k], v[k+9]))
		}
	}
	h.Probe = &trace.MProbe{Distance: v[20], Plain: v[21]}
	h.Condition = trace.Condition{Of: "A", Smallest: v[22], Largest: v[23], Estimate: v[24]}
	return h
}

// Points 1, 2, 3 and 14 on spectra, error bounds, predictions, fields and
// probes that hold anything, at random sizes.
func TestPoint01To03WildNumbers(t *testing.T) {
	rng := rand.New(rand.NewSource(11))
	for round := range 25 {
		s := sessionOf(wildTrial(rng), wildTrial(rng))
		facts := *s.snap.Facts
		facts.Study = wildStudy(rng)
		s.snap.Facts = &facts
		everyScreen(t, s, [][2]int{{1 + rng.Intn(200), 1 + rng.Intn(60)}, {80, 24}}, fmt.Sprint("round ", round))
	}
}

// someStudy is an invented second look.
func someStudy() *inspect.Study {
	s := &inspect.Study{Digits: 9,
		Raw: &inspect.Spectrum{Of: "A", How: "lanczos", Certainty: inspect.Measured, Norm: "2", Smallest: 2e-3, Largest: 8.2e4, Condition: 4.1e7,
			Low: []float64{2e-3, 5e-3}, High: []float64{8.2e4}},
		Jacobi: &inspect.Spectrum{Of: "A scaled by its diagonal", How: "lanczos", Certainty: inspect.Estimated, Norm: "2", Smallest: 1.4e-6, Largest: 3, Condition: 2.2e6}}
	for k := range 24 {
		from := 2e-3 * math.Pow(10, float64(k)/3)
		s.Density = append(s.Density, inspect.Bin{From: from, To: from * math.Pow(10, 1./3), Count: 20000 * math.Exp(-math.Pow(float64(k)-14, 2)/18) / 7.5, Sd: 40})
	}
	return s
}
