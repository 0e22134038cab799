package main

import (
	"bytes"
	"encoding/json"
	"fmt"
	"os"
	"os/exec"
	"strconv"
	"strings"
	"syscall"
	"testing"
	"time"

	"github.com/rogpeppe/go-internal/testscript"
)

// TestMain makes "dwindle" a command of the scripts: this test binary, run
// again.
func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){
		"dwindle": func() { os.Exit(run(os.Args[1:], os.Stdin, os.Stdout, os.Stderr)) },
	})
}

// TestScripts runs testdata/script. Beside testscript's own commands there are
//
//	status N COMMAND...     runs a command, which must exit with N
//	signal NAME COMMAND...  starts a command, sends it the signal once it has
//	                        told that a trial ended, expects exit status 4
//	value FILE PATH WANT    looks into a JSON file; PATH is a.b.0.c
//	plain FILE...           no line over 78 columns, only printable ASCII
func TestScripts(t *testing.T) {
	testscript.Run(t, testscript.Params{
		Dir: "testdata/script",
		Setup: func(e *testscript.Env) error {
			e.Setenv("XDG_STATE_HOME", e.WorkDir+"/state")
			return nil
		},
		Cmds: map[string]func(*testscript.TestScript, bool, []string){
			"status": status, "signal": sendSignal, "value": value, "plain": plainText,
		},
	})
}

// status runs the program and compares its exit status.
func status(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: status N COMMAND...")
	}
	c := command(ts, args[1:])
	c.Stdout, c.Stderr = ts.Stdout(), ts.Stderr()
	c.Run() // the status tells
	if got := strconv.Itoa(c.ProcessState.ExitCode()); got != args[0] {
		ts.Fatalf("exit status %s, want %s", got, args[0])
	}
}

func command(ts *testscript.TestScript, args []string) *exec.Cmd {
	path, err := exec.LookPath(args[0])
	ts.Check(err)
	c := exec.Command(path, args[1:]...)
	c.Dir = ts.MkAbs(".")
	c.Env = append(os.Environ(), "XDG_STATE_HOME="+ts.Getenv("XDG_STATE_HOME"), "HOME="+ts.Getenv("HOME"))
	return c
}

var signals = map[string]syscall.Signal{"INT": syscall.SIGINT, "TERM": syscall.SIGTERM, "HUP": syscall.SIGHUP}

func sendSignal(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 || signals[args[0]] == 0 {
		ts.Fatalf("usage: signal NAME COMMAND...")
	}
	c := command(ts, args[1:])
	told := &firstWrite{seen: make(chan struct{})}
	c.Stdout, c.Stderr = ts.Stdout(), told
	ts.Check(c.Start())
	select {
	case <-told.seen:
	case <-time.After(time.Minute):
		c.Process.Kill()
		ts.Fatalf("no trial ended within a minute")
	}
	ts.Check(c.Process.Signal(signals[args[0]]))
	c.Wait() // the status tells
	fmt.Fprint(ts.Stderr(), told.text.String())
	if got := c.ProcessState.ExitCode(); got != interrupted {
		ts.Fatalf("exit status %d, want %d: %s", got, interrupted, told.text.String())
	}
}

// firstWrite closes seen at the first write.
type firstWrite struct {
	seen chan struct{}
	text bytes.Buffer
}

func (f *firstWrite) Write(p []byte) (int, error) {
	if f.text.Len() == 0 {
		close(f.seen)
	}
	return f.text.Write(p)
}

func value(ts *testscript.TestScript, neg bool, args []string) {
	if len(args) != 3 {
		ts.Fatalf("usage: value FILE PATH WANT")
	}
	var v any
	ts.Check(json.Unmarshal([]byte(ts.ReadFile(args[0])), &v))
	for _, step := range strings.Split(args[1], ".") {
		switch x := v.(type) {
		case map[string]any:
			var ok bool
			if v, ok = x[step]; !ok {
				ts.Fatalf("no %q in %s", step, args[1])
			}
		case []any:
			i, err := strconv.Atoi(step)
			if err != nil || i >= len(x) {
				ts.Fatalf("no element %q in %s", step, args[1])
			}
			v = x[i]
		default:
			ts.Fatalf("%s ends before %q", args[1], step)
		}
	}
	if got := fmt.Sprint(v); (got == args[2]) == neg {
		ts.Fatalf("%s is %s", args[1], got)
	}
}

func plainText(ts *testscript.TestScript, neg bool, args []string) {
	for _, name := range args {
		for _, l := range strings.Split(ts.ReadFile(name), "\n") {
			if len(l) > 78 {
				ts.Fatalf("%s: %d columns: %s", name, len(l), l)
			}
			for _, c := range []byte(l) {
				if c < ' ' || c > '~' {
					ts.Fatalf("%s: byte %#x: %q", name, c, l)
				}
			}
		}
	}
}
