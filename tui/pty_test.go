//go:build linux

package tui

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"sync"
	"sync/atomic"
	"syscall"
	"testing"
	"time"

	"golang.org/x/sys/unix"
)

// terminal is a pseudo terminal with the interface running on it.
type terminal struct {
	t      *testing.T
	master *os.File
	slave  *os.File
	cmd    *exec.Cmd
	log    string
	before unix.Termios

	mu    sync.Mutex
	out   bytes.Buffer
	first time.Time // of the first byte
	began time.Time
	pace  int         // bytes a second the terminal takes; 0 for all
	rush  atomic.Bool // no pace any more
	ended chan error
}

// openTerminal starts the child on a terminal of w x h cells; env adds to its
// environment.
func openTerminal(t *testing.T, w, h, pace int, mode string, env ...string) *terminal {
	t.Helper()
	log := filepath.Join(t.TempDir(), "log")
	cmd := exec.Command(os.Args[0])
	cmd.Env = append(env, childMode+"="+mode, childLog+"="+log)
	x := onTerminal(t, w, h, pace, cmd)
	x.log = log
	return x
}

// openCommand starts a command on a terminal of w x h cells.
func openCommand(t *testing.T, w, h, pace int, path string, args ...string) *terminal {
	t.Helper()
	cmd := exec.Command(path, args...)
	cmd.Env = []string{"XDG_STATE_HOME=" + t.TempDir()}
	return onTerminal(t, w, h, pace, cmd)
}

// onTerminal starts cmd on a terminal that takes pace bytes a second.
func onTerminal(t *testing.T, w, h, pace int, cmd *exec.Cmd) *terminal {
	t.Helper()
	x := &terminal{t: t, pace: pace, cmd: cmd, ended: make(chan error, 1)}
	x.open(w, h)
	x.cmd.Env = append(append(cleanEnv(), "TERM=xterm-256color", "LANG=C.UTF-8"), cmd.Env...)
	x.cmd.Stdin, x.cmd.Stdout, x.cmd.Stderr = x.slave, x.slave, x.slave
	x.cmd.SysProcAttr = &syscall.SysProcAttr{Setsid: true, Setctty: true}
	x.began = time.Now()
	if err := x.cmd.Start(); err != nil {
		t.Fatal(err)
	}
	go x.read()
	go func() { x.ended <- x.cmd.Wait() }()
	t.Cleanup(func() {
		x.cmd.Process.Kill()
		x.master.Close()
		x.slave.Close()
	})
	return x
}

// cleanEnv is the environment without what decides colours, locale and rate.
func cleanEnv() []string {
	var out []string
	for _, e := range os.Environ() {
		name, _, _ := strings.Cut(e, "=")
		switch name {
		case "TERM", "LANG", "LC_ALL", "LC_CTYPE", "NO_COLOR", "CLICOLOR", "CLICOLOR_FORCE", "COLORTERM", "SSH_CONNECTION", "SSH_TTY", "TMUX":
			continue
		}
		out = append(out, e)
	}
	return out
}

// open makes the pseudo terminal.
func (x *terminal) open(w, h int) {
	x.t.Helper()
	var err error
	if x.master, err = os.OpenFile("/dev/ptmx", os.O_RDWR, 0); err != nil {
		x.t.Fatal(err)
	}
	fd := int(x.master.Fd())
	if err := unix.IoctlSetPointerInt(fd, unix.TIOCSPTLCK, 0); err != nil {
		x.t.Fatal(err)
	}
	n, err := unix.IoctlGetUint32(fd, unix.TIOCGPTN)
	if err != nil {
		x.t.Fatal(err)
	}
	if x.slave, err = os.OpenFile("/dev/pts/"+strconv.Itoa(int(n)), os.O_RDWR|unix.O_NOCTTY, 0); err != nil {
		x.t.Fatal(err)
	}
	x.resize(w, h)
	x.before = x.termios()
}

// resize tells the terminal its size.
func (x *terminal) resize(w, h int) {
	if err := unix.IoctlSetWinsize(int(x.master.Fd()), unix.TIOCSWINSZ, &unix.Winsize{Row: uint16(h), Col: uint16(w)}); err != nil {
		x.t.Fatal(err)
	}
}

// termios is the state of the line discipline.
func (x *terminal) termios() unix.Termios {
	s, err := unix.IoctlGetTermios(int(x.slave.Fd()), unix.TCGETS)
	if err != nil {
		x.t.Fatal(err)
	}
	return *s
}

// read takes what the child writes, no faster than the pace.
func (x *terminal) read() {
	buf := make([]byte, 4096)
	if x.pace > 0 {
		buf = buf[:x.pace/20]
	}
	for {
		n, err := x.master.Read(buf)
		x.mu.Lock()
		if x.first.IsZero() && n > 0 {
			x.first = time.Now()
		}
		x.out.Write(buf[:n])
		x.mu.Unlock()
		if err != nil && !errors.Is(err, io.EOF) {
			return
		}
		if x.pace > 0 && !x.rush.Load() {
			time.Sleep(time.Second / 20)
		}
	}
}

// bytes is how much the child has written so far.
func (x *terminal) bytes() int {
	x.mu.Lock()
	defer x.mu.Unlock()
	return x.out.Len()
}

// text is what the child has written so far.
func (x *terminal) text() string {
	x.mu.Lock()
	defer x.mu.Unlock()
	return x.out.String()
}

// send types keys.
func (x *terminal) send(keys string) {
	if _, err := x.master.WriteString(keys); err != nil {
		x.t.Fatal(err)
	}
}

// await waits until the child has written text.
func (x *terminal) await(text string) {
	x.t.Helper()
	for end := time.Now().Add(15 * time.Second); time.Now().Before(end); time.Sleep(10 * time.Millisecond) {
		if strings.Contains(x.text(), text) {
			return
		}
	}
	x.t.Fatalf("%q never appeared in %q", text, x.text())
}

// status waits for the child's end and returns its exit status.
func (x *terminal) status() int {
	x.t.Helper()
	select {
	case <-x.ended:
		x.rush.Store(true)
		x.settle()
		return x.cmd.ProcessState.ExitCode()
	case <-time.After(15 * time.Second):
		x.t.Fatal("the interface did not end")
		return -1
	}
}

// settle waits until the reader has taken everything.
func (x *terminal) settle() {
	for n := -1; n != x.bytes(); time.Sleep(100 * time.Millisecond) {
		n = x.bytes()
	}
}

// entry is one line of the child's log.
type entry struct {
	at   time.Time
	text string
}

// entries are the lines of the child's log that begin with prefix.
func (x *terminal) entries(prefix string) []entry {
	data, err := os.ReadFile(x.log)
	if err != nil {
		x.t.Fatal(err)
	}
	var out []entry
	for _, line := range strings.Split(strings.TrimSpace(string(data)), "\n") {
		var ms int64
		fmt.Sscan(line, &ms)
		if _, text, ok := strings.Cut(line, " "); ok && strings.HasPrefix(text, prefix) {
			out = append(out, entry{time.UnixMilli(ms), text})
		}
	}
	return out
}

// restored fails unless the terminal is as it was before.
func (x *terminal) restored() {
	x.t.Helper()
	out := x.text()
	for _, p := range [][2]string{{"\x1b[?1049l", "\x1b[?1049h"}, {"\x1b[?25h", "\x1b[?25l"}} {
		if off, on := strings.LastIndex(out, p[0]), strings.LastIndex(out, p[1]); off < on {
			x.t.Errorf("%q came after the last %q", p[1], p[0])
		}
	}
	if strings.Contains(out, "\x1b[?1003h") || strings.Contains(out, "\x1b[?1002h") || strings.Contains(out, "\x1b[?1000h") {
		x.t.Error("the mouse was switched on")
	}
	if x.termios() != x.before {
		x.t.Error("the line discipline is not as it was")
	}
}
