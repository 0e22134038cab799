package load

import (
	"math"
	"math/rand/v2"
	"strconv"
	"strings"
	"testing"
)

func TestDecimal(t *testing.T) {
	for _, c := range []struct {
		text   string
		bare   bool
		n      int
		val    float64
		digits int
	}{
		{"0", false, 1, 0, 0}, {"-0", false, 2, math.Copysign(0, -1), 0}, {"+1", false, 2, 1, 1},
		{"1.", false, 2, 1, 1}, {".5", false, 2, .5, 1}, {"00.00500", false, 8, .005, 3},
		{"1e5", false, 3, 1e5, 1}, {"1D-05", false, 5, 1e-5, 1}, {"-2.50d+2", false, 8, -250, 3},
		{"1.5-3", false, 3, 1.5, 2}, {"1.5-3", true, 5, 1.5e-3, 2}, {"1.5+103", true, 7, 1.5e103, 2},
		{"1e", false, 1, 1, 1}, {"1e+", false, 1, 1, 1}, {"1 2", false, 1, 1, 1},
		{"9007199254740993", false, 16, 9007199254740992, 16},
		{"0.1234567890123456789012", false, 24, 0.1234567890123456789012, 22},
		{"1e400", false, 5, math.Inf(1), 1}, {"-1e400", false, 6, math.Inf(-1), 1}, {"1e-400", false, 6, 0, 1},
		{"", false, 0, 0, 0}, {".", false, 0, 0, 0}, {"-", false, 0, 0, 0}, {"e5", false, 0, 0, 0}, {"nan", false, 0, 0, 0},
	} {
		x, n := scanDecimal([]byte(c.text), c.bare)
		if n != c.n || math.Float64bits(x.val) != math.Float64bits(c.val) || x.digits != c.digits {
			t.Errorf("%q: %d bytes, %v, %d digits; want %d, %v, %d", c.text, n, x.val, x.digits, c.n, c.val, c.digits)
		}
	}
}

// sameAsLibrary compares with strconv.ParseFloat, after D is made E. What the
// library reads beyond decimal numbers (names, hexadecimals, underscores) is
// not ours.
func sameAsLibrary(t *testing.T, text string) {
	x, n := scanDecimal([]byte(text), false)
	lib := strings.NewReplacer("d", "e", "D", "e").Replace(text)
	want, err := strconv.ParseFloat(lib, 64)
	ours := n == len(text) && n > 0
	theirs := (err == nil || math.IsInf(want, 0)) && !strings.ContainsAny(text, "xXnNiIpP_")
	if ours != theirs {
		t.Fatalf("%q: read %v, by the library %v (%v)", text, ours, theirs, err)
	}
	if ours && math.Float64bits(x.val) != math.Float64bits(want) {
		t.Fatalf("%q: %v; want %v", text, x.val, want)
	}
}

func TestDecimalRandom(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for range 200000 {
		v := math.Float64frombits(r.Uint64())
		if math.IsNaN(v) || math.IsInf(v, 0) {
			continue
		}
		sameAsLibrary(t, strconv.FormatFloat(v, 'e', r.IntN(20)-1, 64))
		sameAsLibrary(t, strconv.FormatFloat(r.NormFloat64()*1e6, "fge"[r.IntN(3)], r.IntN(20)-1, 64))
	}
}

func FuzzFloat(f *testing.F) {
	for _, s := range []string{"1", "-0.0", "1e22", "1e23", "9007199254740993", "1D-308", "4.9406564584124654e-324",
		"1.7976931348623159e308", "0.1e-5", "123456789012345678901234567890", "2.2250738585072011e-308", "1.e5", ".5", "+.5e+05", "1_0", "0x1p3"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		if strings.ContainsAny(s, "\x00") {
			return
		}
		sameAsLibrary(t, s)
	})
}

func TestDigits(t *testing.T) {
	for _, c := range []struct {
		values string
		want   int
	}{
		{"1 2 -256 0", 17},
		{"0.25 -1.0 256", 17},
		{"4.000000e+00 -1.000000e+00", 17},
		{"0.400000000000E+01 -.1D+01", 17},
		{"1e+06 -1e6 0.5", 17},
		{"0.0000000 0", 17},
		{"0.1", 1},
		{"0.10", 2},
		{"0.33333 1e+06", 5},
		{"2.8323e+06 1.5", 5},
		{"2832268.5 1", 8}, // seven digits before the point: more than six in all
		{"0.333333 123456789", 9},
		{"0.3 1000000", 1}, // zeros that may only hold the place
		{"0.3 1000000.0", 8},
		{"0.0001234", 4},
		{"0.100000000000E+01 0.333333333333E+00", 12},
		{"1.2345678901234567", 17},
		{"0.12345678901234567890", 17},
		{"0.1234567890123456", 16},
	} {
		var d digitCount
		for _, w := range strings.Fields(c.values) {
			x, n := scanDecimal([]byte(w), false)
			if n != len(w) {
				t.Fatalf("%q is not a number", w)
			}
			d.add(x)
		}
		if got := d.result(); got != c.want {
			t.Errorf("%s: %d digits; want %d", c.values, got, c.want)
		}
	}
}
