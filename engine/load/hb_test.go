package load

import (
	"fmt"
	"slices"
	"strings"
	"testing"
)

// deck lays out a Harwell–Boeing file: counts (five, or four for
// Rutherford–Boeing), type, rows, columns, entries, formats, then the body.
func deck(counts []int, kind string, rows, cols, entries int, formats [4]string, body ...string) string {
	var b strings.Builder
	fmt.Fprintf(&b, "%-72s%-8s\n", "A small frame", "FRAME")
	for _, c := range counts {
		fmt.Fprintf(&b, "%14d", c)
	}
	fmt.Fprintf(&b, "\n%-14s%14d%14d%14d%14d\n", kind, rows, cols, entries, 0)
	fmt.Fprintf(&b, "%-16s%-16s%-20s%-20s\n", formats[0], formats[1], formats[2], formats[3])
	return b.String() + strings.Join(body, "\n") + "\n"
}

func TestBoeingGood(t *testing.T) {
	i3 := "(26I3)"
	lower := []string{"  1  3  4", "  1  2  2"}
	for _, c := range []struct {
		name, text string
		want       []float64
		digits     int
		rhs        []float64
		notes      string
		format     string
	}{
		{"symmetric", deck([]int{4, 1, 1, 1, 0}, "RSA", 2, 2, 3, [4]string{i3, i3, "(4E20.12)"},
			append(lower, "  0.400000000000E+01 -0.100000000000D+01  0.333333333333E+00")...),
			[]float64{4, -1, -1, 0.333333333333}, 12, nil, "", "Harwell-Boeing real symmetric assembled"},
		{"Rutherford", deck([]int{3, 1, 1, 1}, "iua", 2, 2, 3, [4]string{i3, i3, i3}, append(lower, " 16 -5  9")...),
			[]float64{16, 0, -5, 9}, 17, nil, "", "Rutherford-Boeing integer unsymmetric assembled"},
		{"pattern", deck([]int{2, 1, 1, 0}, "psa", 2, 2, 3, [4]string{i3, i3, ""}, lower...),
			[]float64{1, 1, 1, 1}, 17, nil, "", "Rutherford-Boeing pattern symmetric assembled"},
		{"skew", deck([]int{3, 1, 1, 1}, "rza", 2, 2, 1, [4]string{i3, i3, "(E8.1)"}, "  1  2  2", "  2", " 0.5E+00"),
			[]float64{0, -.5, .5, 0}, 17, nil, "", "Rutherford-Boeing real skew-symmetric assembled"},
		// Fields that touch: only the format tells where they end.
		{"adjacent fields", deck([]int{4, 1, 1, 2, 0}, "RUA", 2, 2, 3, [4]string{"(3I1)", "(3I1)", "(1P,2E9.2)"},
			"134", "122", "-1.25E+00-3.33E-01", "-7.00E+00"),
			[]float64{-1.25, 0, -.333, -7}, 3, nil, "", "Harwell-Boeing real unsymmetric assembled"},
		{"exponent without a letter", deck([]int{3, 1, 1, 1}, "rua", 1, 1, 1, [4]string{i3, i3, "(1P3D24.15)"}, "  1  2", "  1",
			"   1.234567890123456-105"), []float64{1.234567890123456e-105}, 16, nil, "", "Rutherford-Boeing real unsymmetric assembled"},
		{"right-hand sides", deck([]int{7, 1, 1, 1, 2}, "RSA", 2, 2, 3, [4]string{i3, i3, "(3F5.1)", "(2F5.1)"},
			append([]string{fmt.Sprintf("%-14s%14d%14d", "F", 2, 0)}, append(lower, "  4.0 -1.0  3.5", "  1.0 -2.5", "  7.0  8.0")...)...),
			[]float64{4, -1, -1, 3.5}, 17, []float64{1, -2.5}, "The file holds 2 right-hand sides; the first is used.",
			"Harwell-Boeing real symmetric assembled"},
		{"guess and solution", deck([]int{7, 1, 1, 1, 3}, "RSA", 2, 2, 3, [4]string{i3, i3, "(3F5.1)", "(2F5.1)"},
			append([]string{fmt.Sprintf("%-14s%14d%14d", "FGX", 1, 0)}, append(lower, "  4.0 -1.0  3.5", "  1.0 -2.5", "  7.0  8.0", "  7.0  8.0")...)...),
			[]float64{4, -1, -1, 3.5}, 17, []float64{1, -2.5}, "The file also holds starting guesses or solutions; they are not used.",
			"Harwell-Boeing real symmetric assembled"},
		{"sparse right-hand side", deck([]int{7, 1, 1, 1, 1}, "RSA", 2, 2, 3, [4]string{i3, i3, "(3F5.1)", "(2F5.1)"},
			append([]string{fmt.Sprintf("%-14s%14d%14d", "M", 1, 1)}, append(lower, "  4.0 -1.0  3.5", "  1  2")...)...),
			[]float64{4, -1, -1, 3.5}, 17, nil, "The file's right-hand sides are stored sparse and were not read.",
			"Harwell-Boeing real symmetric assembled"},
	} {
		s, err := readText(c.text)
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		checkCSR(t, s.Matrix())
		if got := dense(s.Matrix()); !slices.Equal(got, c.want) {
			t.Errorf("%s: %v; want %v", c.name, got, c.want)
		}
		src := s.Source
		if s.Digits != c.digits || !slices.Equal(src.RHS, c.rhs) || strings.Join(src.Notes, "|") != c.notes || src.Format != c.format {
			t.Errorf("%s: digits %d, right-hand side %v, notes %q, %s", c.name, s.Digits, src.RHS, src.Notes, src.Format)
		}
	}
}

func TestBoeingBad(t *testing.T) {
	i3 := "(26I3)"
	f := [4]string{i3, i3, "(3F5.1)", "(2F5.1)"}
	good := []string{"  1  3  4", "  1  2  2", "  4.0 -1.0  3.5"}
	body := func(k int, s string) []string {
		b := slices.Clone(good)
		b[k] = s
		return b
	}
	n4, n5 := []int{3, 1, 1, 1}, []int{5, 1, 1, 1, 1}
	rhs := func(kind string, n int, more ...string) []string {
		return append(append([]string{fmt.Sprintf("%-14s%14d%14d", kind, n, 0)}, good...), more...)
	}
	for _, c := range []struct {
		name, text string
		line       int
		want       string
	}{
		{"complex", deck(n4, "csa", 2, 2, 3, f, good...), 3, "complex values are not read yet"},
		{"hermitian", deck(n4, "rha", 2, 2, 3, f, good...), 3, "hermitian"},
		{"elements", deck(n4, "rse", 2, 2, 3, f, good...), 3, "not assembled"},
		{"unknown type", deck(n4, "qsa", 2, 2, 3, f, good...), 3, "R, I, P"},
		{"not square", deck(n4, "rra", 2, 3, 3, f, good...), 3, "A must be square"},
		{"letters in a count", deck(n4, "rsa", 2, 2, 3, f, good...)[:81] + "             3             x\nrsa \n(I3)\n", 2, "columns 15 to 28"},
		{"no pointer format", deck(n4, "rsa", 2, 2, 3, [4]string{"", i3, "(3F5.1)"}, good...), 4, "column pointers: the format is missing"},
		{"odd format", deck(n4, "rsa", 2, 2, 3, [4]string{i3, i3, "(3Z5)"}, good...), 4, "unknown"},
		{"reals for pointers", deck(n4, "rsa", 2, 2, 3, [4]string{"(3F3.1)", i3, "(3F5.1)"}, good...), 4, "whole numbers"},
		{"wrong count of lines", deck([]int{4, 2, 1, 1}, "rsa", 2, 2, 3, f, good...), 2, "announces 2 pointer lines"},
		{"values announced for a pattern", deck(n4, "psa", 2, 2, 3, f, good...), 2, "announces 1 value lines"},
		{"claims too much", deck([]int{3, 1, 38461539, 333333334}, "rsa", 2, 2, 1000000000, f, good...), 4, "more than the file can hold"},
		{"first pointer", deck(n4, "rsa", 2, 2, 3, f, body(0, "  0  3  4")...), 5, "the first column pointer is 0"},
		{"falling pointer", deck(n4, "rsa", 2, 2, 3, f, body(0, "  1  4  3")...), 5, "less than the one before"},
		{"last pointer", deck(n4, "rsa", 2, 2, 3, f, body(0, "  1  3  3")...), 5, "it must be 4"},
		{"pointer cut", deck(n4, "rsa", 2, 2, 3, f, body(0, "  1  3 ")...), 5, "column pointer 3 of 3 is missing"},
		{"pointer with text", deck(n4, "rsa", 2, 2, 3, f, body(0, "  1 x3  4")...), 5, "not a whole number"},
		{"tab", deck(n4, "rsa", 2, 2, 3, f, body(0, "  1 3\t  4")...), 5, "a tab stands"},
		{"tab before", deck(n4, "rsa", 2, 2, 3, f, body(0, "  1 \t3  4")...), 5, "a tab stands"},
		{"more pointers", deck(n4, "rsa", 2, 2, 3, f, body(0, "  1  3  4  4")...), 5, "followed by"},
		{"line too long", deck(n4, "rsa", 2, 2, 3, f, body(2, "  4.0 -1.0  3.5 9")...), 7, "followed by"},
		{"row out of range", deck(n4, "rsa", 2, 2, 3, f, body(1, "  1  3  2")...), 6, "row index 3 of column 1 lies outside"},
		{"row twice", deck(n4, "rsa", 2, 2, 3, f, body(1, "  2  2  2")...), 6, "must ascend"},
		{"pair twice", deck(n4, "rsa", 2, 2, 3, f, body(1, "  1  2  1")...), 6, "(1,2) is stored, and so is (2,1)"},
		{"skew diagonal", deck(n4, "rza", 2, 2, 3, f, good...), 6, "no diagonal"},
		{"value cut", deck(n4, "rsa", 2, 2, 3, f, body(2, "  4.0 -1.0  3.")...), 7, "the line ends within value 3 of 3"},
		{"value missing", deck(n4, "rsa", 2, 2, 3, f, body(2, "  4.0       3.5")...), 7, "value 2 of 3 is missing"},
		{"value with text", deck(n4, "rsa", 2, 2, 3, f, body(2, "  4.0 -1,0  3.5")...), 7, "is not a number"},
		{"NaN", deck(n4, "rsa", 2, 2, 3, f, body(2, "  4.0  NaN  3.5")...), 7, "not finite"},
		{"no point", deck(n4, "rsa", 2, 2, 3, f, body(2, "  4.0    7  3.5")...), 7, "has no decimal point"},
		{"no exponent", deck(n4, "rsa", 2, 2, 3, [4]string{i3, i3, "(1P3E5.1)"}, body(2, "  4.0  0.0  3.5")...), 7, "has no exponent"},
		{"trailing line", deck(n4, "rsa", 2, 2, 3, f, append(slices.Clone(good), "9")...), 8, "the last number is followed by"},
		{"no right-hand side line", deck(n5, "RSA", 2, 2, 3, f, rhs("F", 1)...), 5, "more than the file can hold"},
		{"short right-hand side", deck(n5, "RSA", 2, 2, 3, f, rhs("F", 1, "  1.0      ")...), 9, "right-hand side value 2 of 2 is missing"},
		{"wrong right-hand side lines", deck([]int{6, 1, 1, 1, 2}, "RSA", 2, 2, 3, f, rhs("F", 1, "  1.0  2.0")...), 2, "announces 2 right-hand side lines"},
		{"unknown right-hand side", deck(n5, "RSA", 2, 2, 3, f, rhs("Q", 1, "  1.0  2.0")...), 5, "neither F nor M"},
		{"many right-hand sides", deck([]int{6, 1, 1, 1, 1000000}, "RSA", 2, 2, 3, f, rhs("F", 1000000, "  1.0  2.0")...), 5, "more than the file can hold"},
	} {
		_, err := readText(c.text)
		t.Run(c.name, func(t *testing.T) { wantError(t, err, c.line, c.want) })
	}
}

func TestCardFormat(t *testing.T) {
	for _, c := range []struct {
		text     string
		integer  bool
		per      int
		at       int // of the last field
		width    int
		decimals int
		scale    int
	}{
		{"(16I5)", true, 16, 75, 5, 0, 0},
		{"(20I4)", true, 20, 76, 4, 0, 0},
		{"(I8)", true, 1, 0, 8, 0, 0},
		{"(10I8.8)", true, 10, 72, 8, 8, 0},
		{"(4E20.12)", false, 4, 60, 20, 12, 0},
		{"(4d20.12)", false, 4, 60, 20, 12, 0},
		{"(1P3D24.15)", false, 3, 48, 24, 15, 1},
		{"(1P,5E16.8)", false, 5, 64, 16, 8, 1},
		{"(1P,3(E24.16E3))", false, 3, 48, 24, 16, 1},
		{"( 3(1X,1P E24.16) )", false, 3, 51, 24, 16, 1},
		{"(-2P,2F10.3)", false, 2, 10, 10, 3, -2},
		{"(E10.3,E10.3,G12.4)", false, 3, 20, 12, 4, 0},
	} {
		f, err := parseCardFormat(c.text, c.integer)
		if err != nil {
			t.Errorf("%s: %v", c.text, err)
			continue
		}
		last := f.fields[len(f.fields)-1]
		if len(f.fields) != c.per || last != (cardField{c.at, c.width, c.integer, c.decimals, c.scale}) {
			t.Errorf("%s: %d fields, the last %+v", c.text, len(f.fields), last)
		}
	}
	for _, bad := range []string{"", "16I5", "(16I5", "(16I5))", "()", "(I)", "(0I5)", "(I0)", "(5X)", "(A5)", "(I5/I5)",
		"((((I5))))", "(I5,(I5))", "((I5),I5)", "(99999999I5)", "(2()I5)", "(-3I5)", "(P3I5)", "*"} {
		if f, err := parseCardFormat(bad, true); err == nil {
			t.Errorf("%q was read as %+v", bad, f)
		}
	}
}
