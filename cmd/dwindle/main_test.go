package main

import (
	"bytes"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strings"
	"syscall"
	"testing"
	"time"

	"github.com/spf13/cobra"
)

func TestParseSize(t *testing.T) {
	for text, want := range map[string]int64{"2GiB": 2 << 30, "500M": 500 << 20, "1.5g": 3 << 29, "4096": 4096, "1e9": 1e9, "3GB": 3e9, "64 kib": 65536, "10b": 10} {
		if got, err := parseSize(text); err != nil || got != want {
			t.Errorf("%s: %d, %v; want %d", text, got, err, want)
		}
	}
	for _, text := range []string{"", "G", "-1G", "0", "nan", "inf", "1e30T", "2GiBs"} {
		if got, err := parseSize(text); err == nil {
			t.Errorf("%q is read as %d", text, got)
		}
	}
}

// TestQuote: what a shell would change is quoted, nothing else.
func TestQuote(t *testing.T) {
	for word, want := range map[string]string{
		"sample:plate:200,jump=1e4": "sample:plate:200,jump=1e4",
		"match,rcm/gmres:30+ilu:0":  "match,rcm/gmres:30+ilu:0",
		"a b":                       "'a b'",
		"":                          "''",
		"it's":                      `'it'\''s'`,
		"gmres(30)+ilu(0)":          "'gmres(30)+ilu(0)'",
		"=x":                        "'=x'",
		"~/x":                       "'~/x'",
	} {
		got := quote(word)
		if got != want {
			t.Errorf("%q becomes %s, want %s", word, got, want)
		}
		if out, err := exec.Command("sh", "-c", "printf %s "+got).Output(); err == nil && string(out) != word {
			t.Errorf("sh reads %s as %q", got, out)
		}
	}
}

// TestPanic: a panic anywhere in a command ends in status 5.
func TestPanic(t *testing.T) {
	var stderr bytes.Buffer
	broken := writerFunc(func([]byte) (int, error) { panic("the writer broke") })
	if got := run([]string{"methods"}, strings.NewReader(""), broken, &stderr); got != fault {
		t.Errorf("status %d", got)
	}
	if !strings.Contains(stderr.String(), "internal fault: the writer broke") {
		t.Errorf("%q", stderr.String())
	}
}

type writerFunc func([]byte) (int, error)

func (f writerFunc) Write(p []byte) (int, error) { return f(p) }

// TestClosedOutput: whatever cannot be printed ends in status 5.
func TestClosedOutput(t *testing.T) {
	t.Setenv("XDG_STATE_HOME", t.TempDir())
	full := writerFunc(func([]byte) (int, error) { return 0, syscall.ENOSPC })
	for _, args := range [][]string{{"--help"}, {"methods"}, {"sample"}, {"sample", "plate:3"}, {"facts", "sample:plate:3"},
		{"run", "sample:plate:3", "--pair", "cg+none"}} {
		var stderr bytes.Buffer
		if got := run(args, strings.NewReader(""), full, &stderr); got != fault {
			t.Errorf("%v: status %d, %s", args, got, stderr.String())
		}
	}
	saved, _ := filepath.Glob(os.Getenv("XDG_STATE_HOME") + "/dwindle/*.txt")
	if len(saved) != 1 {
		t.Errorf("the run that could not be printed was not saved: %v", saved)
	}
}

// TestSecondSignal: while the first signal waits for a read that cannot be
// called back, the second ends the program at once.
func TestSecondSignal(t *testing.T) {
	path, err := exec.LookPath("dwindle")
	if err != nil {
		t.Fatal(err)
	}
	c := exec.Command(path, "run", "-")
	hold, err := c.StdinPipe()
	if err != nil {
		t.Fatal(err)
	}
	defer hold.Close()
	if err := c.Start(); err != nil {
		t.Fatal(err)
	}
	io.WriteString(hold, "%%MatrixMarket matrix coordinate real general\n")
	done := make(chan error, 1)
	go func() { done <- c.Wait() }()
	time.Sleep(time.Second)
	for range 2 {
		c.Process.Signal(syscall.SIGTERM)
		time.Sleep(300 * time.Millisecond)
	}
	select {
	case <-done:
		if got := c.ProcessState.ExitCode(); got != interrupted {
			t.Errorf("status %d", got)
		}
	case <-time.After(patience / 2):
		c.Process.Kill()
		t.Error("the second signal did not end it")
	}
}

// TestOptions: every option of the command line is there, and no other.
func TestOptions(t *testing.T) {
	root := rootCommand()
	for path, want := range map[string]string{
		"":        "pair today goal columns guess null coordinates split tol tol-field stop iterations seconds trial-seconds rhs labels fields dofs threads memory identify as out history solution session vectors glyphs rate",
		"run":     "pair today goal columns guess null coordinates split tol tol-field stop iterations seconds trial-seconds rhs labels fields dofs threads memory identify as out history solution session vectors strict",
		"facts":   "rhs labels fields dofs threads memory identify as out",
		"sample":  "out",
		"methods": "measure threads",
	} {
		c, _, err := root.Find(strings.Fields(path))
		if err != nil {
			t.Fatal(err)
		}
		if got := optionNames(c); got != want {
			t.Errorf("%q has %s, want %s", path, got, want)
		}
	}
}

func optionNames(c *cobra.Command) string {
	var names []string
	for _, m := range regexp.MustCompile(`(?m)^ +(?:-\w, +)?--([a-z-]+)`).FindAllStringSubmatch(c.LocalFlags().FlagUsages(), -1) {
		names = append(names, m[1])
	}
	return strings.Join(names, " ")
}

// TestBadFiles: every broken file is refused with status 3 and its line.
func TestBadFiles(t *testing.T) {
	open := os.Getenv("DWINDLE_OPEN")
	if open == "" {
		t.Skip("DWINDLE_OPEN names no folder of open matrices")
	}
	files, _ := filepath.Glob(open + "/bad/*")
	if len(files) < 10 {
		t.Fatalf("only %d broken files in %s", len(files), open)
	}
	for _, f := range files {
		var out, stderr bytes.Buffer
		got := run([]string{"run", f}, strings.NewReader(""), &out, &stderr)
		place := regexp.MustCompile(regexp.QuoteMeta(filepath.Base(f)) + `:[0-9]+: \S`)
		if got != unreadable || out.Len() > 0 || !place.MatchString(stderr.String()) {
			t.Errorf("%s: status %d: %s", filepath.Base(f), got, stderr.String())
		}
	}
}
