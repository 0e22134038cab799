package tui

import (
	"os"
	"sync"
	"time"
)

// gate stands between the program and the terminal. Writes are queued and one
// goroutine drains them, so a terminal that takes 2 kB a second never blocks
// the keys; while it is busy no new frame is drawn, so at most one is under
// way. It keeps the file's other methods, which the program needs to ask for
// the window's size.
type gate struct {
	*os.File
	mu      sync.Mutex
	change  *sync.Cond
	queue   []byte
	writing bool
	waits   bool // Write returns only when the terminal has taken everything
	closed  bool
	wanted  bool   // somebody waits for the queue to drain
	idle    func() // called, outside the lock, when it has and somebody did
	err     error
}

// newGate returns a gate in front of out.
func newGate(out *os.File) *gate {
	g := &gate{File: out, idle: func() {}}
	g.change = sync.NewCond(&g.mu)
	go g.pump()
	return g
}

// Write queues p. After an error of the terminal everything is dropped: a
// line that hung up takes no more frames.
func (g *gate) Write(p []byte) (int, error) {
	g.mu.Lock()
	defer g.mu.Unlock()
	if g.err != nil {
		return len(p), nil
	}
	g.queue = append(g.queue, p...)
	g.change.Broadcast()
	for g.waits && g.under() {
		g.change.Wait()
	}
	return len(p), nil
}

// under says whether bytes are still under way.
func (g *gate) under() bool { return g.err == nil && (g.writing || len(g.queue) > 0) }

// busy says whether bytes are still under way.
func (g *gate) busy() bool {
	g.mu.Lock()
	defer g.mu.Unlock()
	return g.under()
}

// want asks for a call of idle when the terminal has taken everything.
func (g *gate) want() {
	g.mu.Lock()
	defer g.mu.Unlock()
	g.wanted = true
}

// patient makes Write wait for the terminal: before the program is suspended
// or after a panic, what restores the terminal must arrive in order.
func (g *gate) patient(on bool) {
	g.mu.Lock()
	defer g.mu.Unlock()
	g.waits = on
}

// drain waits until the terminal has taken everything, at most for limit,
// and ends the goroutine.
func (g *gate) drain(limit time.Duration) {
	end := time.AfterFunc(limit, func() {
		g.mu.Lock()
		g.closed = true
		g.mu.Unlock()
		g.change.Broadcast()
	})
	defer end.Stop()
	g.mu.Lock()
	defer g.mu.Unlock()
	for g.under() && !g.closed {
		g.change.Wait()
	}
	g.closed = true
	g.change.Broadcast()
}

// pump writes what is queued until the gate is closed.
func (g *gate) pump() {
	for g.step() {
	}
}

// step waits for bytes and writes them; false ends the pump.
func (g *gate) step() bool {
	g.mu.Lock()
	for len(g.queue) == 0 && !g.closed {
		g.change.Wait()
	}
	if g.closed && len(g.queue) == 0 {
		g.mu.Unlock()
		return false
	}
	p := g.queue
	g.queue, g.writing = nil, true
	g.mu.Unlock()

	_, err := g.File.Write(p)

	g.mu.Lock()
	g.writing = false
	if err != nil {
		g.err, g.queue = err, nil
	}
	call := g.wanted && !g.under()
	if call {
		g.wanted = false
	}
	g.change.Broadcast()
	g.mu.Unlock()
	if call {
		go g.idle() // it may wait for a program that waits for the terminal
	}
	return err == nil
}
