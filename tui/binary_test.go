//go:build linux

package tui

import (
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

// buildCommand builds the real command for the tests that need it.
func buildCommand(t *testing.T) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "dwindle")
	if out, err := exec.Command("go", "build", "-o", path, "dwindle/cmd/dwindle").CombinedOutput(); err != nil {
		t.Fatalf("the command does not build: %v\n%s", err, out)
	}
	return path
}

// The real command on a mute terminal: help at once and without any escape
// (points 3 and 4), then a sample solved, left with q, the terminal restored
// (point 7).
func TestRealCommand(t *testing.T) {
	path := buildCommand(t)
	help := openCommand(t, 80, 24, 0, path, "--help")
	if got := help.status(); got != 0 {
		t.Errorf("--help ends with %d", got)
	}
	if d := help.first.Sub(help.began); d > time.Second {
		t.Errorf("--help took %v", d)
	}
	if strings.Contains(help.text(), "\x1b") {
		t.Errorf("an escape in --help: %q", help.text())
	}
	help.restored()

	x := openCommand(t, 80, 24, 0, path, "sample:plate:20")
	x.await("own residual by seconds")
	x.await("0 going")
	if d := x.first.Sub(x.began); d > time.Second {
		t.Errorf("first output after %v", d)
	}
	x.send("\t")
	x.await("system facts")
	x.send("q")
	if got := x.status(); got != 0 {
		t.Errorf("exit status %d", got)
	}
	x.restored()
}
