package diagnose_test

import (
	"strings"
	"testing"

	"dwindle/engine/linear"
	"dwindle/samples"
)

// strung is a chain of 60 unknowns with couplings 1, held at both ends, whose
// couplings change makes anew.
func strung(t *testing.T, change func(i int) float64) linear.System {
	t.Helper()
	s, err := samples.Build("line:60")
	if err != nil {
		t.Fatal(err)
	}
	const n = 60
	d := make([]float64, n)
	d[0], d[n-1] = 1, 1
	var e []linear.Entry
	for i := range n - 1 { // the coupling of i and i+1
		k := change(i)
		d[i], d[i+1] = d[i]+k, d[i+1]+k
		e = append(e, linear.Entry{I: i, J: i + 1, V: -k}, linear.Entry{I: i + 1, J: i, V: -k})
	}
	for i, v := range d {
		e = append(e, linear.Entry{I: i, J: i, V: v})
	}
	s.A, s.B = linear.FromEntries(n, n, e), nil
	return s
}

// Unknowns tied far more stiffly than the rest are told as a tie; a pair tied
// like all others that hangs on next to nothing is free.
func TestStiffTiesAreNotFree(t *testing.T) {
	one := strung(t, func(i int) float64 {
		if i == 20 {
			return 1e9
		}
		return 1
	})
	g := told(t, one)["near-null"]
	says(t, g, "the unknowns of rows 21, 22 are tied to each other 1e+09 times as stiffly")
	if strings.Contains(g.Advice, "hold it") || strings.Contains(g.Claim, "free") {
		t.Errorf("%s; %s", g.Claim, g.Advice)
	}
	two := strung(t, func(i int) float64 {
		if i == 20 || i == 40 {
			return 1e9
		}
		return 1
	})
	says(t, told(t, two)["near-null"], "rows 21, 22, rows 41, 42 are tied")
	loose := strung(t, func(i int) float64 {
		if i == 19 || i == 21 {
			return 1e-10
		}
		return 1
	})
	says(t, told(t, loose)["near-null"], "one direction is nearly free")
}
