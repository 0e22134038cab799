package diagnose

import (
	"math"
	"strings"
	"testing"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// A pairing that broke down before its first residual is not told with one.
func TestBeatenTellsNoResidualThatIsNone(t *testing.T) {
	c := Case{Facts: &inspect.Facts{}, Trials: []trace.History{
		{Pairing: "bicgstab+ilu:0", Today: true, Stop: trace.BrokeDown, TrueResidual: math.NaN()},
		{Pairing: "richardson:1+lu", Stop: trace.Converged, TrueResidual: 1e-9, Iterations: 1, OwnTime: time.Millisecond}}}
	got := beaten.Judge(c)
	if len(got) != 1 || strings.Contains(got[0].Claim, "NaN") || !strings.Contains(got[0].Claim, "ends broke-down; richardson:1+lu") {
		t.Errorf("%+v", got)
	}
	c.Trials[0].TrueResidual = 0.5
	if got = beaten.Judge(c); len(got) != 1 || !strings.Contains(got[0].Claim, "broke-down at 0.5") {
		t.Errorf("%+v", got)
	}
}
