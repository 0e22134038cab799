package choose

import (
	"strings"
	"testing"

	"dwindle/engine/trace"
)

// Where half of what the file stores is zero, everything is tried without it.
func TestRacePrunesStoredZeros(t *testing.T) {
	r := race(trial("cg+none", trace.Converged, 0, second))
	r.Facts.Stored, r.Facts.ExplicitZeros = 100, 50
	for _, p := range r.kinds() {
		if !strings.HasPrefix(p, "prune/") {
			t.Errorf("%s carries the zeros along", p)
		}
	}
	r.Facts.ExplicitZeros = 49
	if list := r.kinds(); len(list) == 0 || strings.HasPrefix(list[0], "prune/") {
		t.Errorf("pruned for a few zeros: %v", list)
	}
}
