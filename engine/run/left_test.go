package run

import (
	"math"
	"testing"

	"dwindle/engine/trace"
)

// GMRES from the left is held against ‖M⁻¹b‖ and says which norm it watches;
// only the rule for that norm is judged by its number.
func TestLeftNorm(t *testing.T) {
	s := sample(t, "plate:12")
	for pairing, want := range map[string]trace.Norm{"gmres:10,left+ssor:1.5": trace.LeftNorm, "gmres:10,left+none": trace.TwoNorm,
		"gmres:10+ssor:1.5": trace.TwoNorm, "scale/gmres:10,left+ssor:1.5": trace.LeftNorm, "scale/gmres:10,left+none": trace.ScaledNorm} {
		h := finish(t, s, limits(1e-8, 2000), nil, pairing)[0]
		if h.Pairing != pairing || h.Norm != want || h.Stop != trace.Converged || h.Monotone != (want != trace.LeftNorm) {
			t.Errorf("%s: %s, norm %q, %v %s, monotone %v", pairing, h.Pairing, h.Norm, h.Stop, h.Reason, h.Monotone)
		}
		if got := h.Records[0].Residual; math.Abs(got-1) > 1e-12 {
			t.Errorf("%s starts at %g", pairing, got)
		}
		for _, w := range h.WouldStop {
			left := want == trace.LeftNorm
			if w.Rule == "preconditioned" && (w.Iter >= 0) != left || w.Rule == "rhs" && (w.Iter >= 0) == left {
				t.Errorf("%s: rule %s held first at %d", pairing, w.Rule, w.Iter)
			}
		}
	}
}

// The side that M stands on is right unless it is said.
func TestSideIsQuiet(t *testing.T) {
	for text, want := range map[string]string{"gmres+jacobi": "gmres:30+jacobi", "gmres:20,right+jacobi": "gmres:20+jacobi",
		"gmres:side=left+jacobi": "gmres:30,left+jacobi"} {
		if m, err := Parse(text); err != nil || m.Name != want {
			t.Errorf("%s is %s, want %s (%v)", text, m.Name, want, err)
		}
	}
}
