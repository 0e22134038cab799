package main

import (
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

// Every command in a sh block of the README runs as it stands, unquoted, in
// bash and in zsh, and ends with status 0.
func TestReadmeCommands(t *testing.T) {
	lines := shellLines(t, filepath.Join("..", "..", "README.md"))
	if len(lines) < 5 {
		t.Fatalf("the README shows %d commands in sh blocks", len(lines))
	}
	bin := t.TempDir()
	if out, err := exec.Command("go", "build", "-o", bin, ".").CombinedOutput(); err != nil {
		t.Fatalf("%v\n%s", err, out)
	}
	for _, shell := range [][]string{{"bash", "--norc", "-c"}, {"zsh", "-f", "-c"}} {
		t.Run(shell[0], func(t *testing.T) {
			path, err := exec.LookPath(shell[0])
			if err != nil {
				t.Skipf("left out: no %s here", shell[0])
			}
			dir := t.TempDir()
			for _, line := range lines {
				cmd := exec.Command(path, append(shell[1:], line)...)
				cmd.Dir = dir
				cmd.Env = append(os.Environ(), "PATH="+bin+":"+os.Getenv("PATH"), "XDG_STATE_HOME="+dir)
				out, err := cmd.CombinedOutput()
				if err != nil {
					t.Errorf("%s: %v\n%s", line, err, out)
				}
				if len(out) == 0 {
					t.Errorf("%s prints nothing", line)
				}
			}
		})
	}
}

// shellLines returns the lines of the sh blocks of a Markdown file.
func shellLines(t *testing.T, path string) (lines []string) {
	t.Helper()
	text, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	inside := false
	for _, l := range strings.Split(string(text), "\n") {
		switch {
		case strings.HasPrefix(l, "```"):
			inside = l == "```sh"
		case inside && l != "":
			lines = append(lines, l)
		}
	}
	return lines
}
