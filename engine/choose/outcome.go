package choose

import (
	"dwindle/engine/diagnose"
	"dwindle/engine/trace"
)

// HalfTime is what an outcome calls a prediction that was told at half of a
// trial's iterations.
const HalfTime = "iterations, told at half time"

// outcomes holds predictions against what came: of trials that reached the
// target, what was told last before half of their iterations; of tries that
// findings offered, what was foreseen for them.
func outcomes(trials []trace.History, findings []diagnose.Finding) []Outcome {
	var out []Outcome
	for _, h := range trials {
		if !reached(h) || h.Direct {
			continue
		}
		if p, ok := atHalfTime(h); ok {
			out = append(out, Outcome{Pairing: h.Pairing, What: HalfTime, Predicted: p.Total, Came: float64(h.Iterations)})
		}
	}
	for _, f := range findings {
		for _, p := range f.Predicts {
			for _, h := range trials {
				if h.Pairing == p.Pairing && reached(h) && p.Quantity == "iterations" {
					out = append(out, Outcome{Pairing: h.Pairing, What: "iterations, foreseen by " + f.Rule, Predicted: p.Value, Came: float64(h.Iterations)})
				}
			}
		}
	}
	return out
}

// atHalfTime is the last prediction told in the first half of a trial.
func atHalfTime(h trace.History) (trace.Prediction, bool) {
	var last trace.Prediction
	found := false
	for _, p := range h.Predictions {
		if 2*p.Iter <= h.Iterations {
			last, found = p, true
		}
	}
	return last, found
}
