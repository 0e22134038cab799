package load

import (
	"context"
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"dwindle/engine/linear"
)

// openData returns the folder of open matrices.
func openData(t testing.TB) string {
	dir := os.Getenv("DWINDLE_OPEN")
	if dir == "" {
		t.Skip("set DWINDLE_OPEN to the folder of open matrices to run this test")
	}
	return dir
}

func load(t testing.TB, path string) linear.System {
	t.Helper()
	s, err := File(context.Background(), path, nil)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func TestDump(t *testing.T) {
	dir := openData(t)
	names, _ := filepath.Glob(filepath.Join(dir, "*"))
	for _, f := range names {
		if strings.HasSuffix(f, "bad") || strings.HasSuffix(f, ".md") {
			continue
		}
		s := load(t, f)
		t.Log(s.Name, s.N(), s.Matrix().Entries(), s.Digits, s.Source)
	}
	bad, _ := filepath.Glob(filepath.Join(dir, "bad", "*"))
	for _, f := range bad {
		_, err := File(context.Background(), f, nil)
		var e *Error
		if !errors.As(err, &e) || e.Line < 1 {
			t.Errorf("%s: %v", f, err)
		}
		t.Log(err)
	}
}
