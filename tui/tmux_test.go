//go:build linux

package tui

import (
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"github.com/charmbracelet/x/ansi"
)

// multiplexer is a private tmux server with one shell in it.
type multiplexer struct {
	t    *testing.T
	name string
	log  string
}

// openMultiplexer starts the server with a window of w x h cells.
func openMultiplexer(t *testing.T, w, h int) *multiplexer {
	t.Helper()
	if _, err := exec.LookPath("tmux"); err != nil {
		t.Skip("tmux is not installed: what a person sees is not tested")
	}
	x := &multiplexer{t: t, name: fmt.Sprintf("tui-%d-%d", os.Getpid(), time.Now().UnixNano()), log: filepath.Join(t.TempDir(), "log")}
	x.run("-f", "/dev/null", "new-session", "-d", "-x", fmt.Sprint(w), "-y", fmt.Sprint(h), "env", "-i",
		"PATH="+os.Getenv("PATH"), "TERM=tmux-256color", "LANG=C.UTF-8", "PS1=ready> ", "bash", "--norc", "--noprofile", "-i")
	t.Cleanup(func() { exec.Command("tmux", "-L", x.name, "kill-server").Run() })
	x.await("ready>")
	return x
}

// run runs a tmux command and returns its output.
func (x *multiplexer) run(args ...string) string {
	x.t.Helper()
	out, err := exec.Command("tmux", append([]string{"-u", "-L", x.name}, args...)...).CombinedOutput()
	if err != nil {
		x.t.Fatalf("tmux %v: %v: %s", args, err, out)
	}
	return string(out)
}

// start starts the child from the shell.
func (x *multiplexer) start(mode string) {
	x.keys(fmt.Sprintf("clear; %s=%s %s=%s %s=3 %s", childMode, mode, childLog, x.log, childSlow, os.Args[0]), "Enter")
	x.await("own residual by seconds")
}

// keys types keys.
func (x *multiplexer) keys(keys ...string) { x.run(append([]string{"send-keys"}, keys...)...) }

// screen is what a person sees.
func (x *multiplexer) screen() string { return x.run("capture-pane", "-p") }

// await waits until text is on the screen.
func (x *multiplexer) await(text string) {
	x.t.Helper()
	for end := time.Now().Add(15 * time.Second); time.Now().Before(end); time.Sleep(30 * time.Millisecond) {
		if strings.Contains(x.screen(), text) {
			return
		}
	}
	x.t.Fatalf("%q never appeared on\n%s", text, x.screen())
}

// state is alternate screen, cursor and mouse of the terminal.
func (x *multiplexer) state() string {
	return strings.TrimSpace(x.run("display", "-p", "#{alternate_on} #{cursor_flag} #{mouse_any_flag}"))
}

// Point 7: a suspension leaves the shell a sound terminal, and the trials'
// clocks stand still (point 8).
func TestPoint07And08Suspend(t *testing.T) {
	x := openMultiplexer(t, 80, 24)
	x.start("moving")
	x.keys("C-z")
	x.await("Stopped")
	if got := x.state(); got != "0 1 0" {
		t.Errorf("suspended: alternate, cursor, mouse = %s", got)
	}
	x.keys("echo typed-$((6*7))", "Enter")
	x.await("typed-42")
	began := time.Now()
	time.Sleep(1500 * time.Millisecond)
	x.keys("fg", "Enter")
	x.await("own residual by seconds")
	away := time.Since(began)
	if got := x.state(); !strings.HasPrefix(got, "1 0") {
		t.Errorf("back: alternate, cursor, mouse = %s", got)
	}
	time.Sleep(300 * time.Millisecond)
	x.keys("C-c")
	x.await("ready>")
	if got := x.state(); got != "0 1 0" {
		t.Errorf("ended: alternate, cursor, mouse = %s", got)
	}
	data, _ := os.ReadFile(x.log)
	for end := time.Now().Add(10 * time.Second); !strings.Contains(string(data), " own ") && time.Now().Before(end); {
		time.Sleep(30 * time.Millisecond) // the prompt is back before the program has ended
		data, _ = os.ReadFile(x.log)
	}
	for _, want := range []string{" suspend\n", " continue\n", " saved\n"} {
		if !strings.Contains(string(data), want) {
			t.Errorf("no%q in the log", want)
		}
	}
	at := func(what string) float64 {
		var ms int64
		for _, line := range strings.Split(string(data), "\n") {
			if strings.HasSuffix(line, " "+what) {
				fmt.Sscan(line, &ms)
				break
			}
		}
		return float64(ms) / 1000
	}
	var own float64
	fmt.Sscanf(string(data[strings.LastIndex(string(data), " own ")+1:]), "own %f", &own)
	first := at("look")
	lived := at("saved") - first
	paused := at("continue") - at("suspend")
	if paused < 1.4 || paused > away.Seconds()+2 {
		t.Errorf("suspended for %.2f s", paused)
	}
	if got := own - 3; got > lived-paused+0.6 {
		t.Errorf("own time %.2f s in %.2f s of which %.2f s were suspended", got, lived, paused)
	}
}

// Point 16: old text after a change of size, in both directions.
func TestPoint16Sizes(t *testing.T) {
	x := openMultiplexer(t, 200, 50)
	x.start("done")
	for _, size := range [][2]int{{80, 24}, {40, 12}, {20, 4}, {120, 40}, {80, 24}} {
		x.run("resize-window", "-x", fmt.Sprint(size[0]), "-y", fmt.Sprint(size[1]))
		f := newFake(8, still(20))
		f.finish()
		m := screenOf(f, size[0], size[1], "dot")
		m.on = true
		want := strings.TrimRight(ansi.Strip(m.View()), "\n ")
		got := ""
		for end := time.Now().Add(5 * time.Second); time.Now().Before(end); time.Sleep(50 * time.Millisecond) {
			if got = strings.TrimRight(x.screen(), "\n "); got == want {
				break
			}
		}
		if got != want {
			t.Fatalf("%v: the screen is not what was drawn:\n%s\n---\n%s", size, got, want)
		}
	}
	x.keys("q")
	x.await("ready>")
}
