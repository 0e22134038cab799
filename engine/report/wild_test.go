package report

import (
	"math/rand/v2"

	"dwindle/engine/choose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// wildDeep adds what deeper looks find, with anything a field can hold.
func wildDeep(r *rand.Rand, d *Document) {
	text := func() string { return nasty[r.IntN(len(nasty))] }
	num := func() float64 { return odd[r.IntN(len(odd))] }
	if d.Facts != nil {
		s := &inspect.Study{Digits: num(), Raw: wildSpectrum(r, text, num), Rest: wildSpectrum(r, text, num),
			Null:      []inspect.NullDirection{{Quotient: num(), Next: num(), Rows: []int{1}, Shares: []float64{num()}, Rigid: text(), Load: num(), Support: r.IntN(3)}},
			Normality: &inspect.Normality{Henrici: num(), FieldMin: num(), FieldMax: num(), SkewMax: num()},
			Couplings: &inspect.Couplings{OneWay: num(), Ratio: num(), Jump: num(), Mesh: true, Dimension: num()},
			Lines:     []inspect.LineRows{{Kind: text(), Count: 1, Value: num(), Other: num()}},
			Growth:    &inspect.Growth{Pairing: text(), Unknowns: []int{1, 2}, Iterations: []int{3}, Exponent: num()},
			Restore:   &inspect.Restore{Shift: num(), Of: text()}}
		for range r.IntN(4) {
			s.Density = append(s.Density, inspect.Bin{From: num(), To: num(), Count: num(), Sd: num()})
		}
		d.Facts.Study = s
		d.Facts.Pattern = [][]float64{{num(), num()}, {num(), num()}}
	}
	for i := range d.Trials {
		wildMore(r, &d.Trials[i], text, num)
	}
	for range r.IntN(3) {
		d.Choice.Ranked = append(d.Choice.Ranked, choose.Ranked{Pairing: text(), Reached: r.IntN(2) == 0, Seconds: num(), Low: num(), High: num(),
			For: [len(choose.Sides)]float64{num(), num(), num()}, BreakEven: num(), Expected: num()})
		d.Choice.Outcomes = append(d.Choice.Outcomes, choose.Outcome{Pairing: text(), What: text(), Predicted: num(), Came: num()})
		d.Choice.RuledOut = append(d.Choice.RuledOut, choose.Ruled{Pairing: text(), Reason: text()})
		d.Choice.Settings = append(d.Choice.Settings, text())
	}
}

func wildSpectrum(r *rand.Rand, text func() string, num func() float64) *inspect.Spectrum {
	s := &inspect.Spectrum{Of: text(), How: text(), Smallest: num(), Largest: num(), Condition: num(), Condition1: num(), Negative: r.IntN(3) - 1,
		Low: []float64{num(), num()}, High: []float64{num()}}
	for range r.IntN(4) {
		s.Values = append(s.Values, complex(num(), num()))
	}
	return s
}

func wildMore(r *rand.Rand, t *trace.History, text func() string, num func() float64) {
	t.MemoryBytes, t.Delay, t.Floor = r.Int64N(1e12), r.IntN(3), num()
	t.Condition.Smallest, t.Condition.Largest = num(), num()
	for range r.IntN(4) {
		t.Locks = append(t.Locks, trace.Lock{Value: num(), Iter: r.IntN(500), Copies: r.IntN(3), Weight: num()})
		t.EnergyErrors = append(t.EnergyErrors, trace.EnergyError{Iter: r.IntN(500), Lower: num(), Upper: num()})
		t.Harmonic = append(t.Harmonic, complex(num(), num()))
		t.Predictions = append(t.Predictions, trace.Prediction{Iter: r.IntN(9), Total: num(), Low: num(), High: num()})
		t.Without = append(t.Without, trace.Counterfactual{What: text(), Removed: r.IntN(3), Largest: num(), Next: num(), Iterations: r.IntN(9)})
		t.Fields = append(t.Fields, trace.Field{Name: text(), Residual: num(), Componentwise: num(), Tol: num()})
		t.Columns = append(t.Columns, trace.Column{Index: 1, Seconds: num(), True: num()})
		t.Counts = append(t.Counts, r.IntN(500))
		t.WouldStop = append(t.WouldStop, trace.StopMark{Rule: "energy", Iter: r.IntN(500), True: num()})
	}
	t.Probe = &trace.MProbe{Asymmetry: num(), Nonlinear: num(), Unrepeatable: num(), Distance: num(), WrongWay: num(), Plain: num()}
}
