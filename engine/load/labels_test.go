package load

import (
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

func writeLines(t *testing.T, text string) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "names.txt")
	if err := os.WriteFile(path, []byte(text), 0o600); err != nil {
		t.Fatal(err)
	}
	return path
}

func TestLabels(t *testing.T) {
	long := strings.Repeat("x", 60)
	got, err := LabelsFile(writeLines(t, " 1:ux \r\n\n1:\x1b[31mrz\n"+long+"\n\n"), 4)
	want := []string{"1:ux", "", "1:?[31mrz", long[:45] + "..."}
	if err != nil || !slices.Equal(got, want) {
		t.Errorf("%q, %v; want %q", got, err, want)
	}
}

func TestFields(t *testing.T) {
	names, of, err := FieldsFile(writeLines(t, "u\nu\np\nu\n"), 4)
	if err != nil || !slices.Equal(names, []string{"u", "p"}) || !slices.Equal(of, []int32{0, 0, 1, 0}) {
		t.Errorf("%q %v %v", names, of, err)
	}
}

func TestNamesThatDoNotFit(t *testing.T) {
	var many strings.Builder
	for i := range 70 {
		fmt.Fprintf(&many, "field %d\n", i)
	}
	fields := func(path string, n int) error { _, _, err := FieldsFile(path, n); return err }
	labels := func(path string, n int) error { _, err := LabelsFile(path, n); return err }
	for _, c := range []struct {
		read       func(string, int) error
		text, want string
		n          int
	}{
		{labels, "a\nb\n", ":2: the file has labels for 2 rows; the matrix has 3", 3},
		{labels, "a\nb\nc\n", ":3: the file has labels for more than the 2 rows of the matrix", 2},
		{labels, "", ":1: the file has labels for 0 rows; the matrix has 1", 1},
		{fields, "u\n\nu\n", ":2: the name of a field is missing", 3},
		{fields, many.String(), ":65: more than 64 different fields", 70},
	} {
		if err := c.read(writeLines(t, c.text), c.n); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%.60q: %v, want %q", c.text, err, c.want)
		}
	}
	if err := labels(filepath.Join(t.TempDir(), "none"), 1); err == nil {
		t.Error("a missing file is read")
	}
}
