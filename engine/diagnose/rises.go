package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// rises is the growth of a residual that looks like divergence.
const rises = 5

// residualRises: cg's residual grows while its error falls, as it may. Told
// of one trial, see plainest.
var residualRises = Rule{"residual-rises", func(c Case) []Finding {
	h, ok := plainest(c, func(h trace.History) bool {
		p, e := peak(h)
		return e < 1 && !outOfReach(c) && p.growth >= rises && h.Energy
	})
	if !ok {
		return nil
	}
	p, e := peak(h)
	return []Finding{{Weight: Note, Certainty: inspect.Measured, Subject: h.Pairing,
		Claim: fmt.Sprintf("its residual grows %s-fold until it %d while its error in the energy norm falls to %s of the first: no divergence, cg minimises the error",
			num(p.growth), p.iter, num(e)),
		Advice: "minres, or the smallest residual so far, makes a curve that only falls; the answer is no better for it",
		Evidence: []Evidence{{Quantity: "residual over the first", Value: p.growth, Iteration: p.iter},
			{Quantity: "energy error over the first", Value: e, Iteration: p.iter}}}}
}}

// top is the highest point of a residual curve.
type top struct {
	growth float64 // over the first
	iter   int
}

// peak returns the highest point of the residual and the energy error there,
// relative to the first; NaN where it is not known.
func peak(h trace.History) (p top, energy float64) {
	energy = math.NaN()
	if len(h.Records) == 0 || len(h.EnergyErrors) == 0 {
		return p, energy
	}
	for _, r := range h.Records {
		if g := r.Residual / h.Records[0].Residual; g > p.growth {
			p = top{g, int(r.Iter)}
		}
	}
	for _, e := range h.EnergyErrors {
		if e.Iter > p.iter {
			break
		}
		energy = e.Lower / h.EnergyErrors[0].Lower
	}
	return p, energy
}
