package tui

import (
	"math"
	"strings"
	"testing"
)

// Point 14: names with escapes, line ends, tabs and wide signs.
func TestPoint14Names(t *testing.T) {
	f := newFake(8, still(12.3))
	evil := "a\x1b[31mb\n\tc\x07\u202e水門\ufe0f\u0301.mtx\xff"
	f.scripts[0].pairing = evil
	f.findings[0].Claim, f.findings[0].Subject = evil+evil, evil
	for _, g := range glyphNames {
		m := screenOf(named14{f, evil}, 80, 24, g)
		sound(t, m, "evil "+g)
		if v := m.View(); strings.ContainsAny(v, "\x07\t\u202e") || strings.Contains(v, "\x1b") || !strings.Contains(v, "ab c") {
			t.Errorf("%s: not cleaned: %q", g, v)
		}
		for i, line := range strings.Split(m.View(), "\n") {
			if strings.HasPrefix(line, ">  1") && width(line) > 0 && width(strings.Split(line, "~ running")[0]) != 60 {
				t.Errorf("%s: line %d broke its columns: %q", g, i, line)
			}
		}
	}
}

// named14 gives the system another name.
type named14 struct {
	*fake
	name string
}

// Point 15: numbers that change width or that are none.
func TestPoint15Numbers(t *testing.T) {
	for _, c := range []struct {
		v    float64
		want string
	}{{0, "0"}, {math.Copysign(0, -1), "0"}, {math.NaN(), "-"}, {math.Inf(1), "-"}, {math.Inf(-1), "-"}, {1e-8, "1.0e-08"},
		{9.96e-9, "1.0e-08"}, {1e-102, "1e-102"}, {-2.5e3, "-2.5e+03"}, {5e-324, "5e-324"}} {
		if got := sci(c.v); got != c.want {
			t.Errorf("sci(%v) = %q, want %q", c.v, got, c.want)
		}
	}
	if iterations(999999) != "999999" || iterations(1234567) != "1.23M" {
		t.Error("iterations do not fit their column")
	}
	if power(1e-8) != "1e-08" || power(3.2e-7) != "3.2e-07" {
		t.Error("tolerances change their form")
	}
	if count(1390112) != "1 390 112" || count(-1000) != "-1 000" || compact(1390112) != "1.39M" {
		t.Error("counts lost their form")
	}
}

// Point 16: something drawn before the size is known.
func TestPoint16NoSize(t *testing.T) {
	m := newModel(Config{}, newFake(8, still(1)))
	m.look()
	if m.View() != "" {
		t.Error("drawn without a size")
	}
}
