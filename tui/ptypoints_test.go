//go:build linux

package tui

import (
	"strings"
	"syscall"
	"testing"
	"time"
)

// Point 4: more than 1 s before the first output on a terminal that answers
// no queries; and no query is sent.
func TestPoint04MuteTerminal(t *testing.T) {
	x := openTerminal(t, 80, 24, 0, "moving")
	x.await("own residual by seconds")
	if d := x.first.Sub(x.began); d > time.Second {
		t.Errorf("first output after %v", d)
	}
	for _, query := range []string{"\x1b]11;?", "\x1b[6n", "\x1b[c"} {
		if strings.Contains(x.text(), query) {
			t.Errorf("the terminal was asked %q", query)
		}
	}
}

// Point 5: keys over 0.5 s late, or ticks over 1 s apart, on a terminal that
// takes 2000 bytes a second.
func TestPoint05SlowTerminal(t *testing.T) {
	x := openTerminal(t, 120, 40, 2000, "moving", childSlow+"=5")
	x.await("trials")
	var sent []time.Time
	for range 4 {
		time.Sleep(700 * time.Millisecond)
		sent = append(sent, time.Now())
		x.send("t")
	}
	time.Sleep(700 * time.Millisecond)
	heard := x.entries("today")
	if len(heard) != len(sent) {
		t.Fatalf("%d of %d keys were heard", len(heard), len(sent))
	}
	late, gap := time.Duration(0), time.Duration(0)
	for i := range sent {
		late = max(late, heard[i].at.Sub(sent[i]))
	}
	looks := x.entries("look")
	for i := 1; i < len(looks); i++ {
		gap = max(gap, looks[i].at.Sub(looks[i-1].at))
	}
	t.Logf("latest key %v, longest gap %v over %d looks", late, gap, len(looks))
	if late > 500*time.Millisecond || gap > time.Second {
		t.Errorf("latest key %v, longest gap %v", late, gap)
	}
	x.send("\x03")
	if got := x.status(); got != 4 {
		t.Errorf("exit status %d after ctrl+c", got)
	}
	x.restored()
}

// Point 6: over 10 kB/s at 120x40 with 8 moving trials at the ssh rate.
func TestPoint06BytesMoving(t *testing.T) {
	x := openTerminal(t, 120, 40, 0, "moving", childSlow+"=1", "SSH_TTY=/dev/pts/9")
	x.await("own residual by seconds")
	time.Sleep(300 * time.Millisecond)
	start, from := time.Now(), x.bytes()
	time.Sleep(4 * time.Second)
	rate := float64(x.bytes()-from) / time.Since(start).Seconds()
	t.Logf("%.0f bytes a second", rate)
	if rate > 10000 {
		t.Errorf("%.0f bytes a second", rate)
	}
	if rate < 200 {
		t.Errorf("%.0f bytes a second: nothing moved", rate)
	}
}

// Point 6: any byte when nothing changes and no clock runs.
func TestPoint06BytesDone(t *testing.T) {
	x := openTerminal(t, 120, 40, 0, "done")
	x.await("own residual by seconds")
	time.Sleep(500 * time.Millisecond)
	from := x.bytes()
	time.Sleep(2 * time.Second)
	if n := x.bytes() - from; n > 0 {
		t.Errorf("%d bytes although nothing moved: %q", n, x.text()[from:])
	}
	x.send("q")
	if got := x.status(); got != 0 {
		t.Errorf("exit status %d", got)
	}
	x.restored()
}

// Points 7 and 8: a terminal left in another state, or results lost, after
// any ending; exit status 0 after a panic.
func TestPoint07Endings(t *testing.T) {
	endings := []struct {
		name, mode string
		end        func(x *terminal)
		status     int
	}{
		{"q with its question", "moving", func(x *terminal) { x.send("q"); x.await("quit?"); x.send("y") }, 0},
		{"ctrl+c", "moving", func(x *terminal) { x.send("\x03") }, 4},
		{"TERM", "moving", func(x *terminal) { x.cmd.Process.Signal(syscall.SIGTERM) }, 4},
		{"HUP", "moving", func(x *terminal) { x.cmd.Process.Signal(syscall.SIGHUP) }, 4},
		{"INT", "moving", func(x *terminal) { x.cmd.Process.Signal(syscall.SIGINT) }, 4},
		{"a panic", "panic", func(x *terminal) {}, 5},
	}
	for _, e := range endings {
		t.Run(e.name, func(t *testing.T) {
			x := openTerminal(t, 80, 24, 0, e.mode)
			x.await("trials")
			e.end(x)
			if got := x.status(); got != e.status {
				t.Errorf("exit status %d, want %d", got, e.status)
			}
			x.restored()
			if len(x.entries("saved")) != 1 {
				t.Error("nothing was saved")
			}
			if out := x.text(); e.name != "HUP" && !strings.HasSuffix(strings.TrimSpace(out[:strings.LastIndex(out, "the result is told")+1]), "\r\x1b[Kt") {
				t.Errorf("the result is not told on a clean line after the screen: %q", out[max(len(out)-200, 0):])
			}
			if e.mode == "panic" {
				out := x.text()
				if strings.LastIndex(out, "\x1b[?1049l") > strings.Index(out, "the fake session is told to") {
					t.Error("the trace was printed on a screen that vanished")
				}
			}
		})
	}
}

// Point 8: results lost when the line hangs up for good.
func TestPoint08LineGone(t *testing.T) {
	x := openTerminal(t, 80, 24, 0, "moving")
	x.await("trials")
	x.slave.Close()
	x.master.Close()
	x.status()
	if len(x.entries("saved")) != 1 {
		t.Error("nothing was saved")
	}
}

// Point 9: a torn arrow key quits or closes something; keys of one read get
// lost.
func TestPoint09TornArrow(t *testing.T) {
	x := openTerminal(t, 80, 24, 0, "moving", childSlow+"=2")
	x.await("own residual by seconds")
	x.send("?")
	x.await("help | ")
	x.send("\x1b")
	time.Sleep(20 * time.Millisecond)
	x.send("[B")
	time.Sleep(400 * time.Millisecond)
	from := x.bytes()
	x.send("\x1b") // alone: closes the help
	time.Sleep(400 * time.Millisecond)
	if !strings.Contains(x.text()[from:], "trials | ") {
		t.Error("the help was closed before, or esc did not close it")
	}
	x.send("jjj")
	time.Sleep(100 * time.Millisecond)
	x.send("t")
	time.Sleep(300 * time.Millisecond)
	if got := x.entries("today"); len(got) != 1 || got[0].text != "today 4" {
		t.Errorf("jjj and t marked %v, want trial 4", got)
	}
}

// Point 16: a change of size draws a new frame at once.
func TestPoint16Resize(t *testing.T) {
	x := openTerminal(t, 80, 24, 0, "done")
	x.await("trials | ") // the last line of a frame
	from := x.bytes()
	x.resize(120, 40)
	got := ""
	for end := time.Now().Add(2 * time.Second); time.Now().Before(end); time.Sleep(50 * time.Millisecond) {
		if got = x.text()[from:]; strings.Contains(got, "products") && strings.Contains(got, "would stop by") {
			return
		}
	}
	t.Errorf("no new frame: %q", clip(got, 300))
}
