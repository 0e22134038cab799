package trace

import (
	"math"
	"testing"
)

// The forms have three digits and never more than seven characters;
// what rounds up to the next unit is told in it.
func TestTook(t *testing.T) {
	for _, c := range []struct {
		s    float64
		want string
	}{
		{0, "0 s"}, {math.NaN(), "-"}, {math.Inf(1), "-"}, {-1, "-"},
		{3e-9, "3 ns"}, {0.9996e-6, "1.0 us"}, {4.9e-6, "4.9 us"}, {9.44e-6, "9.4 us"}, {9.96e-6, "10 us"}, {84.4e-6, "84 us"}, {999.4e-6, "999 us"},
		{999.6e-6, "1.00 ms"}, {3.386e-3, "3.39 ms"}, {0.9994, "999 ms"}, {0.9996, "1.00 s"}, {9.994, "9.99 s"}, {9.996, "10.0 s"},
		{99.94, "99.9 s"}, {99.96, "100 s"}, {1234.4, "1234 s"}, {99999.4, "99999 s"}, {99999.6, "27.8 h"}, {3.6e8, "100000 h"},
	} {
		if got := Took(c.s); got != c.want {
			t.Errorf("%g s: %q, want %q", c.s, got, c.want)
		}
	}
	for s := 1e-9; s < 3.5e8; s *= 1.0137 {
		if got := Took(s); len(got) > 7 {
			t.Errorf("%g s: %q", s, got)
		}
	}
}
