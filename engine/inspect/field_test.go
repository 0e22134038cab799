package inspect_test

import (
	"math"
	"strings"
	"testing"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
)

// drift is 2E(0) − 1.5E(−1) − 0.5E(1) of order n.
func drift(n int) *linear.CSR {
	var out []linear.Entry
	for i := range n {
		out = append(out, e(i, i, 2))
		if i > 0 {
			out = append(out, e(i, i-1, -1.5), e(i-1, i, -0.5))
		}
	}
	return linear.FromEntries(n, n, out)
}

// The symmetric part of drift is 2E(0) − E(−1) − E(1), with the eigenvalues
// 2 ± 2cos(π/(n+1)) at its ends: found where dense values are affordable, and
// told as what lies inside where Lanczos has not settled.
func TestFieldOfDrift(t *testing.T) {
	for _, n := range []int{100, 200, 400} {
		s := ones(drift(n), 17)
		low, high := 2-2*math.Cos(math.Pi/float64(n+1)), 2+2*math.Cos(math.Pi/float64(n+1))
		f := studied(t, s, inspect.Quick)
		expect(t, "symmetric part", f.SymmetricPart, inspect.Yes, inspect.Proved)
		m := f.Study.Normality
		within(t, "smallest", m.FieldMin, low, 1e-8)
		within(t, "largest", m.FieldMax, high, 1e-12)
		if !m.FieldSettled || strings.Contains(f.SymmetricPart.Why, "at most") {
			t.Errorf("n = %d: %s", n, f.SymmetricPart.Why)
		}
	}
	sparse := inspect.Quick
	sparse.Dense = 100
	f := studied(t, ones(drift(400), 17), sparse)
	m := f.Study.Normality
	if low := 2 - 2*math.Cos(math.Pi/401); m.FieldSettled || m.FieldMin < low*(1-1e-9) {
		t.Errorf("settled %v at %g; the end is %g", m.FieldSettled, m.FieldMin, low)
	}
	if why := f.SymmetricPart.Why; !strings.Contains(why, "from at most") || !strings.Contains(why, "to at least") {
		t.Errorf("not settled, and told as %q", why)
	}
}
