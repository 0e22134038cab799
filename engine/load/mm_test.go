package load

import (
	"slices"
	"strings"
	"testing"
)

const mm = "%%MatrixMarket matrix coordinate real general\n"

func mmBanner(rest string) string { return "%%MatrixMarket matrix " + rest + "\n" }

func TestMatrixMarketGood(t *testing.T) {
	for _, c := range []struct {
		name, text          string
		want                []float64
		stored, dups, zeros int
		digits              int
		format              string
		symmetric           bool
		note                string
	}{
		{"general", mm + "2 2 3\n1 1 1.5\n2 1 -2\n2 2 0.3333\n", []float64{1.5, 0, -2, .3333}, 3, 0, 0, 4,
			"Matrix Market coordinate real general", false, ""},
		{"any case, comments, blanks, CRLF, no last newline", "%%matrixmarket MATRIX Coordinate DOUBLE General\r\n% c\r\n\r\n%\r\n 2\t2  2 \r\n\r\n 1 1\t1D0\r\n% c\r\n2 2 2.e-1",
			[]float64{1, 0, 0, .2}, 2, 0, 0, 1, "Matrix Market coordinate real general", false, ""},
		{"symmetric", mmBanner("coordinate integer symmetric") + "3 3 4\n1 1 1\n2 1 2\n3 2 3\n3 3 4\n",
			[]float64{1, 2, 0, 2, 0, 3, 0, 3, 4}, 4, 0, 0, 17, "Matrix Market coordinate integer symmetric", true, ""},
		{"upper triangle", mmBanner("coordinate real symmetric") + "2 2 2\n1 1 1\n1 2 2\n",
			[]float64{1, 2, 2, 0}, 2, 0, 0, 17, "Matrix Market coordinate real symmetric", true, "The file stores the upper triangle; it was mirrored."},
		{"both sides, each pair once", mmBanner("coordinate real symmetric") + "3 3 2\n1 2 1\n3 1 2\n",
			[]float64{0, 1, 2, 1, 0, 0, 2, 0, 0}, 2, 0, 0, 17, "Matrix Market coordinate real symmetric", true,
			"The file stores entries on both sides of the diagonal, each pair once; they were mirrored."},
		{"skew", mmBanner("coordinate real skew-symmetric") + "2 2 1\n2 1 0.1\n",
			[]float64{0, -.1, .1, 0}, 1, 0, 0, 1, "Matrix Market coordinate real skew-symmetric", false, ""},
		{"pattern", mmBanner("coordinate pattern symmetric") + "2 2 2\n1 1\n2 1\n",
			[]float64{1, 1, 1, 0}, 2, 0, 0, 17, "Matrix Market coordinate pattern symmetric", true, ""},
		{"pattern twice", mmBanner("coordinate pattern general") + "2 2 2\n1 2\n1 2\n",
			[]float64{0, 2, 0, 0}, 2, 1, 0, 17, "Matrix Market coordinate pattern general", false,
			"Entries of the pattern that stand twice were summed, so that their value is 2 or more."},
		// In file order (1e16 + 1) - 1e16 is 0: the 1 is lost.
		{"duplicates in file order", mm + "1 1 3\n1 1 1e16\n1 1 1\n1 1 -1e16\n", []float64{0}, 3, 2, 0, 17,
			"Matrix Market coordinate real general", false, ""},
		{"duplicates of a symmetric file", mmBanner("coordinate real symmetric") + "2 2 5\n1 1 1\n2 1 1\n2 1 2\n1 1 4\n2 1 8\n",
			[]float64{5, 11, 11, 0}, 5, 3, 0, 17, "Matrix Market coordinate real symmetric", true, ""},
		{"explicit zeros", mm + "2 2 3\n1 1 0\n1 2 -0.0\n2 2 0.10\n", []float64{0, 0, 0, .1}, 3, 0, 2, 2,
			"Matrix Market coordinate real general", false, ""},
		{"underflow", mm + "1 1 1\n1 1 1e-400\n", []float64{0}, 1, 0, 1, 1,
			"Matrix Market coordinate real general", false, "Values too small for a double were read as 0: 1."},
		{"unsorted row", mm + "2 2 3\n2 2 4\n2 1 3\n1 2 2\n", []float64{0, 2, 3, 4}, 3, 0, 0, 17,
			"Matrix Market coordinate real general", false, ""},
		{"array", mmBanner("array real general") + "2 2\n1\n2\n0\n4\n", []float64{1, 0, 2, 4}, 4, 0, 0, 17,
			"Matrix Market array real general", false, "Zeros of the array were left out: 1 of 4 values."},
		{"array symmetric", mmBanner("array integer symmetric") + "2 2\n1\n2\n3\n", []float64{1, 2, 2, 3}, 3, 0, 0, 17,
			"Matrix Market array integer symmetric", true, ""},
		{"array skew", mmBanner("array real skew-symmetric") + "3 3\n1\n2\n3\n", []float64{0, -1, -2, 1, 0, -3, 2, 3, 0}, 3, 0, 0, 17,
			"Matrix Market array real skew-symmetric", false, ""},
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
		if src.Stored != c.stored || src.Duplicates != c.dups || src.ExplicitZeros != c.zeros || s.Digits != c.digits {
			t.Errorf("%s: stored %d, duplicates %d, zeros %d, digits %d", c.name, src.Stored, src.Duplicates, src.ExplicitZeros, s.Digits)
		}
		if src.Format != c.format || src.Symmetric != c.symmetric || strings.Join(src.Notes, "|") != c.note {
			t.Errorf("%s: %q, symmetric %v, notes %q", c.name, src.Format, src.Symmetric, src.Notes)
		}
	}
}

func TestMatrixMarketKeepsZeros(t *testing.T) {
	s, err := readText(mm + "2 2 3\n1 1 1\n1 2 0\n2 2 1\n")
	if err != nil || s.Matrix().Entries() != 3 {
		t.Errorf("%d entries, %v; want 3: an explicit zero is an entry", s.Matrix().Entries(), err)
	}
}

func TestMatrixMarketBad(t *testing.T) {
	sym := mmBanner("coordinate real symmetric")
	for _, c := range []struct {
		name, text string
		line       int
		want       string
	}{
		{"nothing", "", 1, "the file is empty"},
		{"blank", " \n\n", 1, "the file is empty"},
		{"binary", "ab\x00cd", 1, "not a text file"},
		{"prose", "Dear all,\nfind below\nmy matrix\n", 1, "neither"},
		{"list", "1 1 4\n1 2 -1\n", 1, "a list of numbers without a header"},
		{"list with sizes", "2 2 3\n1 1 4\n", 1, "%%MatrixMarket matrix coordinate real general"},
		{"one percent sign", "%MatrixMarket matrix coordinate real general\n1 1 1\n1 1 1\n", 1, "%%MatrixMarket"},
		{"short banner", "%%MatrixMarket matrix coordinate real\n1 1 1\n1 1 1\n", 1, "banner"},
		{"long banner", "%%MatrixMarket matrix coordinate real general more\n1 1 1\n1 1 1\n", 1, "banner"},
		{"vector object", "%%MatrixMarket vector array real general\n1 1\n1\n", 1, `"vector"`},
		{"complex", mmBanner("coordinate complex general") + "1 1 1\n1 1 1 0\n", 1, "not read yet"},
		{"hermitian", mmBanner("coordinate real hermitian") + "1 1 1\n1 1 1\n", 1, "hermitian"},
		{"pattern array", mmBanner("array pattern general") + "1 1\n1\n", 1, "pattern"},
		{"no size line", mm + "% c\n", 2, "the size line is missing"},
		{"words for sizes", mm + "% c\ntwo 2 2\n", 3, "size line"},
		{"two sizes", mm + "2 2\n1 1 1\n", 2, "size line"},
		{"four sizes", mm + "2 2 1 0\n1 1 1\n", 2, "size line"},
		{"negative size", mm + "-2 -2 1\n1 1 1\n", 2, "size line"},
		{"endless size", mm + "99999999999999999999 2 1\n1 1 1\n", 2, "size line"},
		{"large order", mm + "2147483648 2147483648 1\n1 1 1\n", 2, "not read"},
		{"empty rows", mm + "2000000000 2000000000 1\n1 1 1\n", 2, "most rows would be empty"},
		{"claims too much", mm + "2 2 1000000000\n1 1 1\n", 2, "more than the file can hold"},
		{"array claims too much", mmBanner("array real general") + "2000000000 2000000000\n1\n", 2, "more than the file can hold"},
		{"not square", mm + "2 3 1\n1 1 1\n", 2, "A must be square; this one has 2 rows and 3 columns"},
		{"order 0", mm + "0 0 0\n", 2, "empty"},
		{"short", mm + "2 2 3\n1 1 1.000000000\n2 2 1.0000\n", 4, "claims 3 entries; the file ends after 2"},
		{"short and cut", mm + "2 2 2\n1 1 1.0000000\n2 2", 4, "the value is missing"},
		{"too many", mm + "2 2 1\n1 1 1\n% c\n2 2 1\n", 5, `the last entry is followed by "2 2 1"`},
		{"row 0", mm + "2 2 2\n1 1 1\n0 1 1\n", 4, "(0,1) lies outside"},
		{"row 3", mm + "2 2 2\n1 1 1\n3 1 1\n", 4, "(3,1) lies outside"},
		{"column 3", mm + "2 2 2\n1 1 1\n\n1 3 1\n", 5, "(1,3) lies outside"},
		{"negative index", mm + "2 2 1\n-1 1 1\n", 3, `"-1" is not a row index`},
		{"index with a point", mm + "2 2 1\n1 1.0 1\n", 3, `"1.0" is not a column index`},
		{"endless index", mm + "2 2 1\n1 11111111111111111111111111 1\n", 3, "out of range"},
		{"text for a value", mm + "2 2 1\n1 1 one\n", 3, `"one" is not a number`},
		{"text behind a value", mm + "2 2 1\n1 1 1x\n", 3, `"1x" is not a number`},
		{"hexadecimal", mm + "2 2 1\n1 1 0x1p3\n", 3, "is not a number"},
		{"comma", mm + "2 2 1\n1 1 1,5\n", 3, "is not a number"},
		{"half an exponent", mm + "2 2 1\n1 1 1e\n", 3, "is not a number"},
		{"exponent without letter", mm + "2 2 1\n1 1 1.5-3\n", 3, "is not a number"},
		{"escape", mm + "2 2 1\n1 1 \x1b[31m\n", 3, `"\x1b[31m" is not a number`},
		{"NaN", mm + "2 2 1\n1 1 NaN\n", 3, "not finite"},
		{"infinity", mm + "2 2 1\n1 1 -inf\n", 3, "not finite"},
		{"overflow", mm + "2 2 1\n1 1 1e999\n", 3, "too large"},
		{"no value", mm + "2 2 1\n1 1    \n", 3, "the value is missing"},
		{"no column", mm + "2 2 1\n1     \n", 3, "the column index is missing"},
		{"four numbers", mm + "2 2 1\n1 1 1 1\n", 3, `the entry is followed by "1"`},
		{"pattern with values", mmBanner("coordinate pattern general") + "2 2 1\n1 1 1\n", 3, `the entry is followed by "1"`},
		{"integer with a point", mmBanner("coordinate integer general") + "2 2 1\n1 1 1.5\n", 3, "not an integer"},
		{"pair twice", sym + "3 3 4\n1 1 1\n2 1 1\n% c\n3 3 1\n1 2 1\n", 7, "(1,2) is stored, and so is (2,1)"},
		{"pair twice, upper first", sym + "3 3 4\n1 3 1\n2 1 1\n3 1 1\n3 3 1\n", 5, "(3,1) is stored, and so is (1,3)"},
		{"pair twice, then a comment", sym + "3 3 4\n1 1 1\n\n2 1 1\n1 2 1\n\n3 3 1\n", 6, "(1,2) is stored, and so is (2,1)"},
		{"skew pair twice", mmBanner("coordinate real skew-symmetric") + "2 2 2\n2 1 1\n1 2 -1\n", 4, "(1,2) is stored"},
		{"sum too large", mm + "2 2 4\n1 1 1e308\n2 2 1\n1 1 1e308\n1 1 -1e308\n", 5, "the entries (1,1) add up to more"},
		{"symmetric sum too large", sym + "2 2 3\n2 1 -1e308\n% c\n2 1 -1e308\n2 2 1\n", 5, "add up to more"},
		{"skew diagonal", mmBanner("coordinate real skew-symmetric") + "2 2 2\n2 1 1\n2 2 0\n", 4, "no diagonal"},
		{"array with two a line", mmBanner("array real general") + "2 2\n1 2\n3 4\n", 3, "one value a line"},
		{"short array", mmBanner("array real general") + "2 2\n1.000\n2.000\n3.000\n", 5, "ends after 3"},
		{"bzip2", "BZh91AY&SY", 1, "bzip2"},
		{"xz", "\xfd7zXZ\x00", 1, "xz"},
		{"zstd", "\x28\xb5\x2f\xfd", 1, "zstd"},
		{"zip", "PK\x03\x04..", 1, "zip"},
		{"long word", mm + "1 1 1\n1 1 " + strings.Repeat("x", 50) + "\n", 3, `"` + strings.Repeat("x", 40) + `"... is not a number`},
		{"damaged gzip", "\x1f\x8b\x01\x02\x03", 1, "gzip"},
	} {
		_, err := readText(c.text)
		t.Run(c.name, func(t *testing.T) { wantError(t, err, c.line, c.want) })
	}
}

func TestLongLine(t *testing.T) {
	_, err := readText(mm + "1 1 1\n1 1 " + strings.Repeat("1", 3<<20) + "\n")
	wantError(t, err, 3, "longer than")
	s, err := readText(mm + "1 1 1\n1 1 0." + strings.Repeat("1", 1<<19) + "\n")
	if err != nil || s.Digits != 17 {
		t.Errorf("a line of half a mebibyte: %v, %d digits", err, s.Digits)
	}
}
