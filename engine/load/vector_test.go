package load

import (
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// put writes a file into a fresh folder and returns its path.
func put(t *testing.T, name, text string) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), name)
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	return path
}

func TestVectorGood(t *testing.T) {
	array := mmBanner("array real general") + "% two columns\n3 2\n1\n2\n3\n4\n5\n6\n"
	several := "The file holds 2 columns; the first is used (add :COL to its name to pick another)."
	for _, c := range []struct {
		name, text, col string
		want            []float64
		note            string
	}{
		{"array", mmBanner("array integer general") + "3 1\n1\n2\n3\n", "", []float64{1, 2, 3}, ""},
		{"first of two", array, "", []float64{1, 2, 3}, several},
		{"column 1", array, ":1", []float64{1, 2, 3}, ""},
		{"column 2", array, ":2", []float64{4, 5, 6}, ""},
		{"plain", "1\n-2.5e3\n3D0\n", "", []float64{1, -2500, 3}, ""},
		{"plain, no last newline", "1\n2\n3", "", []float64{1, 2, 3}, ""},
		{"comments and blanks", "# x\n% y\n\n 1\n\n\t2 \r\n3\n\n", "", []float64{1, 2, 3}, ""},
		{"plain columns", "1 4\n2\t5\n3 6\n", "", []float64{1, 2, 3}, several},
		{"plain column 2", "1 4\n2\t5\n3 6\n", ":2", []float64{4, 5, 6}, ""},
	} {
		v, notes, err := VectorFile(put(t, "b.txt", c.text)+c.col, 3)
		if err != nil || !slices.Equal(v, c.want) || strings.Join(notes, "|") != c.note {
			t.Errorf("%s: %v, %q, %v", c.name, v, notes, err)
		}
	}
}

func TestVectorBad(t *testing.T) {
	for _, c := range []struct {
		name, text, col string
		line            int
		want            string
	}{
		{"short", "1\n2\n", "", 2, "the vector has 2 rows; the matrix has 3"},
		{"long", "1\n2\n3\n4\n", "", 4, "more than the 3 rows"},
		{"empty", "", "", 1, "the vector has 0 rows"},
		{"text", "1\ntwo\n3\n", "", 2, `"two" is not a number`},
		{"text in another column", "1 1\n2 two\n3 3\n", ":1", 2, `"two" is not a number`},
		{"comma", "1\n2,5\n3\n", "", 2, "is not a number"},
		{"NaN", "1\n2\nnan\n", "", 3, "not finite"},
		{"overflow", "1\n1e999\n3\n", "", 2, "too large"},
		{"uneven", "1 2\n3\n4 5\n", "", 2, "holds 1 numbers, the ones before it 2"},
		{"no such column", "1 2\n3 4\n5 6\n", ":3", 1, "column 3 does not exist; the file has 2"},
		{"no such array column", mmBanner("array real general") + "3 1\n1\n2\n3\n", ":2", 2, "column 2 does not exist"},
		{"column 0", "1\n2\n3\n", ":0", 0, "counted from 1"},
		{"array without columns", mmBanner("array real general") + "3 0\n", "", 2, "holds no column"},
		{"array of another length", mmBanner("array real general") + "2 1\n1\n2\n", "", 2, "has 2 rows; the matrix has 3"},
		{"a matrix", mm + "3 3 1\n1 1 1\n", "", 2, "array format"},
		{"short array", mmBanner("array real general") + "3 1\n1.0\n2.00\n", "", 4, "ends after 2"},
		{"array with a NaN", mmBanner("array real general") + "3 1\n1\nNaN\n3\n", "", 4, "not finite"},
	} {
		v, _, err := VectorFile(put(t, "b.txt", c.text)+c.col, 3)
		if v != nil {
			t.Errorf("%s: read as %v", c.name, v)
		}
		t.Run(c.name, func(t *testing.T) { wantError(t, err, c.line, c.want) })
	}
}

func TestVectorNameWithColon(t *testing.T) {
	v, _, err := VectorFile(put(t, "b:2", "1 4\n2 5\n"), 2)
	if err != nil || !slices.Equal(v, []float64{1, 2}) {
		t.Errorf("a file named b:2: %v, %v; want its first column", v, err)
	}
	if _, _, err := VectorFile(filepath.Join(t.TempDir(), "none:2"), 2); err == nil || !strings.Contains(err.Error(), "none: ") {
		t.Errorf("a missing file: %v", err)
	}
}
