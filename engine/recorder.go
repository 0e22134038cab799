package engine

import (
	"bytes"
	"encoding/gob"
	"errors"
	"io"
	"os"
	"slices"
	"strings"
	"time"

	"dwindle/engine/inspect"
)

// recorder writes a session to a file as it goes: at least each second, and
// whenever a trial ends. It works on its own goroutine and reads what anyone
// may read, so that no trial ever waits for a disk.
type recorder struct {
	s    *Session
	path string
	file *os.File
	buf  bytes.Buffer
	gob  *gob.Encoder

	facts  *inspect.Facts
	about  int // 0 before it is written; grows with what is in it
	trials map[int]*told
	seen   recorded
	at     time.Time // of the last frame
	last   part      // what it held
	stop   chan struct{}
	done   chan struct{}
}

// recorded is what asks for a frame at once when it changes.
type recorded struct {
	phase        Phase
	trials, over int
}

const (
	recordEvery = time.Second
	recordLook  = 200 * time.Millisecond
)

// newRecorder creates the file. An existing file is replaced only if it is a
// session file itself: a slip must not cost a matrix.
func newRecorder(s *Session, path string) (*recorder, error) {
	if old, err := os.Open(path); err == nil {
		is := isSessionFile(old)
		old.Close()
		if !is {
			return nil, &RecordError{path, errors.New("exists and is not a session file; name another")}
		}
	}
	file, err := os.OpenFile(path, os.O_WRONLY|os.O_CREATE|os.O_TRUNC, 0o600)
	if err == nil {
		_, err = io.WriteString(file, magicLine())
	}
	if err != nil {
		return nil, &RecordError{path, reasonOf(err)}
	}
	r := &recorder{s: s, path: path, file: file, trials: map[int]*told{}, stop: make(chan struct{}), done: make(chan struct{})}
	r.gob = gob.NewEncoder(&r.buf)
	return r, nil
}

// RecordError says why a session file could not be written.
type RecordError struct {
	Path string
	Err  error
}

// Error names the file and the cause.
func (e *RecordError) Error() string { return e.Path + ": the session file: " + e.Err.Error() }

// Unwrap returns the cause.
func (e *RecordError) Unwrap() error { return e.Err }

// reasonOf is the cause alone, without the path that the message names.
func reasonOf(err error) error {
	var p *os.PathError
	if errors.As(err, &p) {
		return p.Err
	}
	return err
}

// run writes until it is stopped, or until writing fails, which ends the
// recording and nothing else.
func (r *recorder) run() {
	defer close(r.done)
	defer r.file.Close()
	tick := time.NewTicker(recordLook)
	defer tick.Stop()
	for {
		closing := false
		select {
		case <-r.stop:
			closing = true
		case <-tick.C:
		}
		if err := r.look(closing); err != nil {
			r.s.set(func() { r.s.recordErr = &RecordError{r.path, reasonOf(err)} })
			return
		}
		if closing {
			return
		}
	}
}

// look writes a frame where one is due.
func (r *recorder) look(closing bool) error {
	now := r.s.recorded()
	if !closing && now == r.seen && time.Since(r.at) < recordEvery {
		return nil
	}
	r.seen, r.at = now, time.Now()
	p := r.part()
	if p.Closed = closing; !closing && r.at != (time.Time{}) && p.empty() && slices.Equal(p.Order, r.last.Order) {
		return nil
	}
	if p.empty() { // time went by, and nothing happened in it
		p.Elapsed = r.last.Elapsed
	}
	r.last = p
	r.buf.Reset()
	if err := r.gob.Encode(p); err != nil {
		return err
	}
	_, err := r.file.Write(framed(r.buf.Bytes()))
	return err
}

// part is what has changed since the last frame.
func (r *recorder) part() part {
	v, about := r.s.state()
	p := part{Elapsed: v.Elapsed}
	if v.Facts != r.facts {
		p.Facts, r.facts = v.Facts, v.Facts
	}
	if n := 1 + len(about.System.Fingerprint) + len(about.Ruled); n != r.about {
		p.About, r.about = about, n
	}
	for _, t := range v.Trials {
		p.Order = append(p.Order, t.ID)
		if r.trials[t.ID] == nil {
			r.trials[t.ID] = &told{}
		}
		if c, moved := r.trials[t.ID].since(t.ID, t.History); moved {
			p.Trials = append(p.Trials, c)
		}
	}
	return p
}

// isSessionFile says whether r begins as a session file of any form does.
func isSessionFile(r io.Reader) bool {
	b := make([]byte, len(sessionMagic))
	_, err := io.ReadFull(r, b)
	return err == nil && strings.HasPrefix(string(b), sessionMagic)
}
