package load

import (
	"bytes"
	"compress/gzip"
	"context"
	"errors"
	"fmt"
	"path/filepath"
	"strings"
	"testing"
	"testing/iotest"
)

// line1D is a second-difference matrix of order n as a file.
func line1D(n int) string {
	var b strings.Builder
	fmt.Fprintf(&b, "%s%d %d %d\n", mmBanner("coordinate real symmetric"), n, n, 2*n-1)
	for i := 1; i <= n; i++ {
		fmt.Fprintf(&b, "%d %d %.17g\n", i, i, 2+1/float64(i))
		if i < n {
			fmt.Fprintf(&b, "%d %d -1\n", i+1, i)
		}
	}
	return b.String()
}

func squeeze(t testing.TB, text string) []byte {
	t.Helper()
	var b bytes.Buffer
	z := gzip.NewWriter(&b)
	if _, err := z.Write([]byte(text)); err != nil {
		t.Fatal(err)
	}
	if err := z.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// However the bytes arrive, the matrix is the same.
func TestStreams(t *testing.T) {
	text := line1D(20000)
	want, err := readText(text)
	if err != nil {
		t.Fatal(err)
	}
	z := squeeze(t, text)
	ctx := context.Background()
	plain, err := Read(ctx, "-", strings.NewReader(text), -1, nil)
	if err != nil {
		t.Fatal(err)
	}
	sameMatrix(t, plain.Matrix(), want.Matrix())
	halves, err := Read(ctx, "-", iotest.HalfReader(strings.NewReader(text)), -1, nil)
	if err != nil {
		t.Fatal(err)
	}
	sameMatrix(t, halves.Matrix(), want.Matrix())
	packed, err := Read(ctx, "a.mtx", bytes.NewReader(z), int64(len(z)), nil)
	if err != nil {
		t.Fatal(err)
	}
	sameMatrix(t, packed.Matrix(), want.Matrix())
}

// Where the size is unknown, a claim shows false only at the end.
func TestStreamEndsEarly(t *testing.T) {
	i3 := "(26I3)"
	f := [4]string{i3, i3, "(3F5.1)", "(2F5.1)"}
	counts := []int{4, 1, 1, 1, 1}
	rhs := fmt.Sprintf("%-14s%14d%14d", "F", 1, 0)
	for _, c := range []struct {
		text string
		line int
		want string
	}{
		{mm + "2 2 1000000000000\n1 1 1\n", 3, "the file ends after 1"},
		{mmBanner("array real general") + "2000000000 2000000000\n1\n", 3, "the file ends after 1"},
		{deck(counts[:4], "rsa", 2, 2, 3, f, "  1  3  4"), 5, "the file ends before row index 1 of 3"},
		{deck(counts[:4], "rsa", 2, 2, 3, f, "  1  3  4", "  1  2  2"), 6, "the file ends before value 1 of 3"},
		{deck(counts, "RSA", 2, 2, 3, f, rhs, "  1  3  4", "  1  2  2", "  4.0 -1.0  3.5"), 8, "ends before right-hand side value 1 of 2"},
		{deck(counts, "RSA", 2, 2, 3, f, "M", "  1  3  4", "  1  2  2", "  4.0 -1.0  3.5"), 8, "ends after 0 of 1 right-hand side lines"},
		{deck(counts[:4], "rsa", 2, 2, 3, f)[:200], 3, "the header ends after 3 of 4 lines"},
	} {
		_, err := Read(context.Background(), "t", strings.NewReader(c.text), -1, nil)
		wantError(t, err, c.line, c.want)
	}
}

func TestDamagedGzip(t *testing.T) {
	text := line1D(20000)
	z := squeeze(t, text)
	var e *Error
	for name, bad := range map[string][]byte{
		"cut": z[:len(z)/2], "without its checksum": z[:len(z)-4],
		"wrong checksum": append(bytes.Clone(z[:len(z)-8]), 0, 0, 0, 0, 0, 0, 0, 0),
		"text behind":    append(bytes.Clone(z), "more"...),
	} {
		_, err := Read(context.Background(), "a.mtx.gz", bytes.NewReader(bad), int64(len(bad)), nil)
		if !errors.As(err, &e) || e.Line < 2 || !strings.Contains(e.Text, "cannot be read further") {
			t.Errorf("%s: %v", name, err)
		}
	}
}

func TestProgressAndCancel(t *testing.T) {
	text := line1D(50000)
	for name, b := range map[string][]byte{"plain": []byte(text), "gzip": squeeze(t, text)} {
		var seen []float64
		if _, err := Read(context.Background(), "a", bytes.NewReader(b), int64(len(b)), func(f float64) { seen = append(seen, f) }); err != nil {
			t.Fatal(err)
		}
		for k, f := range seen {
			if f < 0 || f > 1 || k > 0 && f < seen[k-1] {
				t.Fatalf("%s: progress %v", name, seen)
			}
		}
		if len(seen) < 5 || seen[len(seen)-1] != 1 {
			t.Errorf("%s: %d reports, the last %v", name, len(seen), seen[len(seen)-1])
		}
		ctx, stop := context.WithCancel(context.Background())
		calls := 0
		_, err := Read(ctx, "a", bytes.NewReader(b), int64(len(b)), func(float64) { calls++; stop() })
		if !errors.Is(err, context.Canceled) || calls > 2 {
			t.Errorf("%s: cancelled at the first report: %v after %d reports", name, err, calls)
		}
	}
}

func TestNames(t *testing.T) {
	for path, want := range map[string]string{
		"a/b/frame.mtx": "frame.mtx", "fr\x1b[31mame.mtx": "fr?[31mame.mtx", "a\tb": "a?b", "板.mtx": "?.mtx", "e\u0301.mtx": "e?.mtx",
	} {
		s, err := Read(context.Background(), path, strings.NewReader(mm+"1 1 1\n1 1 1\n"), -1, nil)
		if err != nil || s.Name != want {
			t.Errorf("%q: name %q, %v; want %q", path, s.Name, err, want)
		}
	}
}

func TestErrorText(t *testing.T) {
	_, err := File(context.Background(), "no/such\x1bfile.mtx", nil)
	if err == nil || err.Error() != "no/such?file.mtx: no such file or directory" {
		t.Errorf("missing file: %v", err)
	}
	if _, err = File(context.Background(), t.TempDir(), nil); err == nil || !strings.HasSuffix(err.Error(), ": is a folder, not a file") {
		t.Errorf("folder: %v", err)
	}
	path := put(t, "weir.mtx", mm+"2 2 1\n1 3 1\n")
	_, err = File(context.Background(), path, nil)
	if want := path + ":3: (1,3) lies outside; indices run from 1 to 2"; err == nil || err.Error() != want {
		t.Errorf("%v; want %s", err, want)
	}
	if e := (&Error{File: filepath.Base(path), Line: 3, Text: "x"}); e.Error() != "weir.mtx:3: x" {
		t.Error(e)
	}
}
