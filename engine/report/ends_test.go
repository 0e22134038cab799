package report

import (
	"strings"
	"testing"

	"dwindle/engine/inspect"
)

// An end of a spectrum that a subspace has not settled is no more than a bound:
// on ex14 (FIDAP) the least eigenvalue is -0.2576 (NumPy), while a subspace
// that resolves 1e7 to fifteen digits stops at -0.025, give or take 16.
func TestAnUnsettledEndIsABound(t *testing.T) {
	f := new(inspect.Facts)
	x := inspect.Spectrum{Of: "A", How: "factor", Certainty: inspect.Measured, Smallest: -0.025, SmallestBound: 15.6, Largest: 1.27e7, LargestBound: 10}
	if s := spectrumText(x, f); !strings.HasPrefix(s, "of A: at most -0.025 to 1.27e+07") {
		t.Error(s)
	}
	x.SmallestBound, x.LargestBound = 1e-4, 1e6
	if s := spectrumText(x, f); !strings.HasPrefix(s, "of A: -0.025 to at least 1.27e+07") {
		t.Error(s)
	}
}
