package choose

import (
	"strings"
	"testing"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// On a singular A the one answer that a pairing gave is not the only one, and
// the choice says so before anything else that could overturn it.
func TestSingularIsADoubt(t *testing.T) {
	h := trace.History{Pairing: "gmres:30+none", Stop: trace.Converged, Iterations: 5, OwnTime: time.Second, CPUShare: 1}
	f := &inspect.Facts{N: 9, RHS: "file"}
	f.Singular = inspect.Fact{Answer: inspect.Yes, Certainty: inspect.Measured}
	if got := Rank(f, []trace.History{h}, nil, "", 0).Doubts; len(got) == 0 || !strings.HasPrefix(got[0], "x is not unique: A is singular (measured)") {
		t.Errorf("doubts %q", got)
	}
	f.Singular.Answer = inspect.No
	if got := Rank(f, []trace.History{h}, nil, "", 0).Doubts; strings.Contains(strings.Join(got, ";"), "unique") {
		t.Errorf("doubts of a regular A: %q", got)
	}
}

// The pairing that break-even is told against is named.
func TestBreakEvenNamesThePairing(t *testing.T) {
	cheap := trace.History{Pairing: "cg+none", Stop: trace.Converged, Iterations: 100, OwnTime: 10 * time.Second, CPUShare: 1}
	dear := trace.History{Pairing: "cg+ic:0", Stop: trace.Converged, Iterations: 10, OwnTime: 9 * time.Second, SetupTime: 8 * time.Second, CPUShare: 1}
	for _, r := range Rank(&inspect.Facts{N: 9}, []trace.History{cheap, dear}, nil, "", 0).Ranked {
		if want := map[string]string{"cg+ic:0": "cg+none"}[r.Pairing]; r.Cheapest != want {
			t.Errorf("%s is told against %q, want %q", r.Pairing, r.Cheapest, want)
		}
	}
}
