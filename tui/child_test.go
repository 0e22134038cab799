package tui

import (
	"errors"
	"fmt"
	"os"
	"strconv"
	"testing"
	"time"
)

// The tests of bytes, keys and endings run this test binary again as a child
// on a terminal of its own, where it shows the interface on a fake session.
// These variables tell the child what to do.
const (
	childMode = "TUI_CHILD"      // moving, done, panic
	childLog  = "TUI_CHILD_LOG"  // file for calls, ticks and what was saved
	childSlow = "TUI_CHILD_FROM" // seconds at which the fake's clock starts
)

func TestMain(m *testing.M) {
	if mode := os.Getenv(childMode); mode != "" {
		os.Exit(beChild(mode))
	}
	os.Exit(m.Run())
}

// beChild shows the interface and returns the exit status a command would.
func beChild(mode string) int {
	log, err := os.OpenFile(os.Getenv(childLog), os.O_APPEND|os.O_CREATE|os.O_WRONLY, 0o644)
	if err != nil {
		return 9
	}
	start := time.Now()
	from, _ := strconv.ParseFloat(os.Getenv(childSlow), 64)
	note := func(format string, args ...any) {
		fmt.Fprintf(log, "%d %s\n", time.Now().UnixMilli(), fmt.Sprintf(format, args...))
	}
	f := newFake(8, func() time.Duration { return time.Since(start) + span1(from) })
	f.heard = note
	if mode == "done" {
		f.finish()
	}
	if mode == "panic" {
		f.bomb = start.Add(time.Second)
	}
	m, p, err := assemble(Config{Rate: 0, Glyphs: os.Getenv("TUI_CHILD_GLYPHS"), saveNow: func(session) func() { note("saved"); return func() { fmt.Println("the result is told") } }}, f)
	if err != nil {
		return 8
	}
	busy := m.busy
	m.busy = func() bool { note("look"); return busy() }
	err = conduct(m, p)
	note("own %.3f", f.clock())
	switch {
	case err == nil:
		return 0
	case errors.Is(err, ErrInterrupted):
		return 4
	}
	return 5
}
