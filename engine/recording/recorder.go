package recording

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

// Source is a session that is recorded. Its methods are called on the
// recorder's own goroutine and read what anyone may read, so that no trial
// ever waits for a disk.
type Source interface {
	State() State    // as it stands; shares the append-only records
	Answer() *Answer // asked for once, at the end; nil where none is to be kept
	Failed(error)    // why the recording ended before its time
}

// Recorder writes a session to a file as it goes: at least each second, and
// whenever a trial begins or ends.
type Recorder struct {
	Path string

	from Source
	file io.WriteCloser
	buf  bytes.Buffer
	gob  *gob.Encoder

	facts  *inspect.Facts
	about  int // 0 before it is written; grows with what is in it
	trials map[int]*told
	over   int       // trials that had ended when the last frame was written
	at     time.Time // of the last frame
	last   part      // what it held
	stop   chan struct{}
	done   chan struct{}
}

const (
	every    = time.Second
	lookEach = 200 * time.Millisecond
)

// Create makes the file that a session can be recorded to. A file that exists
// is never written over: a slip must not cost a session, let alone a matrix.
func Create(path string) (io.WriteCloser, error) {
	file, err := os.OpenFile(path, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o600)
	if errors.Is(err, os.ErrExist) {
		return nil, &Error{path, errors.New("exists already; name another, or remove it first")}
	}
	if err == nil {
		_, err = io.WriteString(file, magicLine())
	}
	if err != nil {
		return nil, &Error{path, Reason(err)}
	}
	return file, nil
}

// Start writes a session to a file that Create made: what there is, then what
// comes, until Finish.
func Start(path string, file io.WriteCloser, from Source) *Recorder {
	r := begin(path, file, from)
	go r.run()
	return r
}

// begin is a recorder that has written nothing yet.
func begin(path string, file io.WriteCloser, from Source) *Recorder {
	r := &Recorder{Path: path, from: from, file: file, trials: map[int]*told{}, stop: make(chan struct{}), done: make(chan struct{})}
	r.gob = gob.NewEncoder(&r.buf)
	return r
}

// Finish writes the last frame and closes the file.
func (r *Recorder) Finish() {
	if r != nil {
		close(r.stop)
		<-r.done
	}
}

// run writes until it is stopped, or until writing fails, which ends the
// recording and nothing else.
func (r *Recorder) run() {
	defer close(r.done)
	defer r.file.Close()
	tick := time.NewTicker(lookEach)
	defer tick.Stop()
	for {
		closing := false
		select {
		case <-r.stop:
			closing = true
		case <-tick.C:
		}
		if err := r.look(closing); err != nil {
			r.from.Failed(&Error{r.Path, Reason(err)})
			return
		}
		if closing {
			return
		}
	}
}

// look writes a frame where one is due.
func (r *Recorder) look(closing bool) error {
	now := r.from.State()
	moved := len(now.Trials) != len(r.last.Order) || ended(now.Trials) != r.over
	if !closing && !moved && time.Since(r.at) < every {
		return nil
	}
	r.over, r.at = ended(now.Trials), time.Now()
	p := r.part(now)
	if closing {
		p.Answer = r.from.Answer()
	} else if p.empty() && slices.Equal(p.Order, r.last.Order) {
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

// ended counts the trials that are over.
func ended(trials []Trial) (n int) {
	for i := range trials {
		if trials[i].History.Stop.Ended() {
			n++
		}
	}
	return n
}

// part is what has changed since the last frame.
func (r *Recorder) part(now State) part {
	p := part{Elapsed: now.Elapsed}
	if now.Facts != r.facts {
		p.Facts, r.facts = now.Facts, now.Facts
	}
	if n := 1 + len(now.About.System.Fingerprint) + len(now.About.Ruled); n != r.about {
		p.About, r.about = now.About, n
	}
	for _, t := range now.Trials {
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

// Begins says whether r begins as a session file of any form does.
func Begins(r io.Reader) bool {
	b := make([]byte, len(magic))
	_, err := io.ReadFull(r, b)
	return err == nil && strings.HasPrefix(string(b), magic)
}

// Error says why a session file could not be written.
type Error struct {
	Path string
	Err  error
}

// Error names the file and the cause.
func (e *Error) Error() string { return e.Path + ": the session file: " + e.Err.Error() }

// Unwrap returns the cause.
func (e *Error) Unwrap() error { return e.Err }

// Reason is the cause alone, without the path that the message names.
func Reason(err error) error {
	var p *os.PathError
	if errors.As(err, &p) {
		return p.Err
	}
	return err
}
