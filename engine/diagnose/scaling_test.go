package diagnose

import (
	"math"
	"strings"
	"testing"

	"dwindle/engine/inspect"
)

// A condition beyond all numbers is no measure of what scaling takes away: none
// is told. One that is a number is.
func TestNoInfiniteConditionIsLaidToScaling(t *testing.T) {
	f := definite()
	f.RowNorm = inspect.Range{Min: 1e-150, Max: 1e150}
	after := &inspect.Spectrum{Of: "equilibrated A", Condition: 20, Certainty: inspect.Measured}
	for _, c := range []float64{1e9, math.Inf(1)} {
		f.Study = &inspect.Study{Raw: &inspect.Spectrum{Of: "A", Condition: c, Certainty: inspect.Measured}, Equilibrated: after}
		g, ok := said(caseOf(f))["row-scaling"]
		if tells := strings.Contains(g.Claim, "condition"); !ok || tells != !math.IsInf(c, 1) || strings.Contains(g.Claim, "Inf") {
			t.Errorf("condition %g: %q", c, g.Claim)
		}
	}
}
