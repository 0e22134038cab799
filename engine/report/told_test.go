package report

import (
	"math"

	"dwindle/engine/choose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// told is typical with everything that deeper looks add, invented as well.
func told() Document {
	d := typical()
	d.Trials = append([]trace.History{}, d.Trials...)
	facts := *d.Facts
	facts.Pattern = [][]float64{{1, 0.2, 0}, {0.2, 1, 0.2}, {0, 0.2, 1}}
	facts.Study = toldStudy()
	d.Facts = &facts
	ic := &d.Trials[1]
	ic.Floor = 1e-12
	ic.Condition = trace.Condition{Of: "M⁻¹A", Smallest: 0.3, Largest: 1.2, Estimate: 4, Settled: true}
	ic.Locks = []trace.Lock{{Value: 0.3, Iter: 12, Copies: 1, Weight: 0.1}, {Value: 1.2, Iter: 9, Copies: 2}}
	for k := range 20 {
		e := math.Pow(0.4, float64(k))
		ic.EnergyErrors = append(ic.EnergyErrors, trace.EnergyError{Iter: k, Lower: 0.8 * e, Upper: 1.1 * e})
	}
	ic.Predictions = []trace.Prediction{{Iter: 10, Total: 21, Low: 18, High: 26}}
	ic.Fields = []trace.Field{{Name: "pressure", Rows: 100, Residual: 1e-7, Componentwise: 1e-6, Tol: 1e-6}}
	ic.Probe = &trace.MProbe{Asymmetry: 1e-16, Distance: 0.4, WrongWay: math.NaN(), Plain: 0.9, Deviation: 0.31}
	ic.Counts, ic.Delay = []int{19, 20, 21}, 2
	ic.Columns = []trace.Column{{Index: 2, Iterations: 21, Seconds: 0.03, True: 9e-9, Reached: true}}
	d.Trials[2].Harmonic = []complex128{complex(0.1, 0.2), complex(0.1, -0.2)}
	d.Choice.Ranked[0].For = [len(choose.Sides)]float64{0.03, 0.28, 28}
	d.Choice.Ranked[0].Low, d.Choice.Ranked[0].High = 0.025, 0.035
	d.Choice.Settings = []string{"conjugate gradients", "incomplete Cholesky, no fill", "b as it is, no scaling"}
	d.Choice.RuledOut = []choose.Ruled{{Pairing: "cg+ilu:0", Reason: "its M is not symmetric"}}
	d.Choice.Outcomes = []choose.Outcome{{Pairing: "cg+ic:0", What: "iterations, told at half time", Predicted: 21, Came: 20},
		{Pairing: "cg+none", What: "iterations, told at half time", Predicted: 58, Came: 60},
		{Pairing: "gmres:30+none", What: "iterations, told at half time", Predicted: 300, Came: 800}}
	return d
}

// toldStudy is a second look, every part filled in.
func toldStudy() *inspect.Study {
	nan := math.NaN()
	raw := &inspect.Spectrum{Of: "A", How: "dense", Certainty: inspect.Measured, Exact: true, Norm: "2", Smallest: 0.04, Largest: 7.96,
		Condition: 199, Negative: 0, Low: []float64{0.04, 0.1}, High: []float64{7.96, 7.9}}
	for k := range 400 {
		raw.Values = append(raw.Values, complex(4-3.96*math.Cos(float64(k)*math.Pi/399), 0))
	}
	raw.Values[200] = complex(3, 0.5)
	s := &inspect.Study{Raw: raw, Digits: 13,
		Equilibrated: &inspect.Spectrum{Of: "equilibrated A", How: "lanczos", Certainty: inspect.Estimated, Norm: "2", Smallest: 0.01, Largest: 1.99, Condition: 199, Negative: -1},
		Null:         []inspect.NullDirection{{Quotient: 1e-14, Next: 0.01, Rows: []int{3, 5}, Shares: []float64{0.6, 0.3}, Rigid: "rotation", Support: 6, Vector: []float64{0, 1, 0}}},
		Normality:    &inspect.Normality{Henrici: 0.2, Exact: true, FieldMin: -0.1, FieldMax: 8, FieldHoldsZero: true, SkewMax: 0.5, LeftmostRe: nan, RightRe: nan},
		Couplings:    &inspect.Couplings{OneWay: 0.9, Ratio: 100, Jump: 1e4, JumpRows: []int{7}, Mesh: true, Dimension: 2},
		Block:        &inspect.Block{Size: 3, Share: 0.98},
		Lines:        []inspect.LineRows{{Kind: "penalty", Count: 2, Rows: []int{0, 9}, Value: 1e12, Other: 4}},
		Lopsided:     &inspect.Lopsided{Rows: []int{1}, Count: 1, Identity: 1, IdentityRows: []int{1}, OnlyThem: true},
		Growth:       &inspect.Growth{Pairing: "cg+none", Unknowns: []int{100, 400}, Iterations: []int{30, 60}, Exponent: 0.5},
		Restore:      &inspect.Restore{Shift: 0.2, Of: "I", Rows: []int{3}}}
	for k := range 10 {
		s.Density = append(s.Density, inspect.Bin{From: float64(k), To: float64(k + 1), Count: 40 + float64(k), Sd: 5})
	}
	return s
}
