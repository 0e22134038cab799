package run

import (
	"math"
	"testing"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// A method that watches ‖Aᵀr‖ is held against ‖Aᵀb‖, in whatever units A comes:
// its own number starts at one, and a small A is no floor.
func TestNormalEquationsNorm(t *testing.T) {
	for _, scale := range []float64{1e-6, 1, 1e6} {
		s := sample(t, "plate:12")
		m := s.Matrix()
		small := &linear.CSR{NRows: m.NRows, NCols: m.NCols, Ptr: m.Ptr, Col: m.Col, Val: make([]float64, len(m.Val))}
		linear.Scale(small.Val, scale, m.Val)
		s.A = small
		for _, pairing := range []string{"lsmr+none", "scale/lsmr+jacobi"} {
			h := finish(t, s, limits(1e-8, 2000), nil, pairing)[0]
			if h.Stop != trace.Converged || h.Norm != trace.NormalEquationNorm || h.FloorHits != 0 {
				t.Errorf("scale %g, %s: %v in the norm %q, %d audits at the floor: %s", scale, pairing, h.Stop, h.Norm, h.FloorHits, h.Reason)
			}
			if got := h.Records[0].Residual; math.Abs(got-1) > 1e-12 {
				t.Errorf("scale %g, %s: starts at %g", scale, pairing, got)
			}
			for _, w := range h.WouldStop {
				if w.Iter >= 0 {
					t.Errorf("scale %g, %s: rule %s is judged by another norm", scale, pairing, w.Rule)
				}
			}
		}
	}
}
