package engine

import (
	"encoding/gob"
	"errors"
	"fmt"
	"io"
	"os"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/load"
	"dwindle/engine/trace"
)

// replay is what a session file tells.
type replay struct {
	about   *about
	facts   *inspect.Facts
	elapsed time.Duration
	trials  []Trial
	closed  bool // the session came to its end
}

// replayFile reads a session file; everything wrong with it is a *load.Error
// that names it.
func replayFile(path string) (r *replay, err error) {
	f, err := os.Open(path)
	if err == nil {
		defer f.Close()
		r, err = replayed(f)
	}
	if err != nil {
		return nil, &load.Error{File: path, Text: reasonOf(err).Error()}
	}
	return r, nil
}

// replayed reads a session.
func replayed(in io.Reader) (r *replay, err error) {
	defer func() {
		if p := recover(); p != nil {
			r, err = nil, fmt.Errorf("is damaged: %v", p)
		}
	}()
	f, err := newFrames(in)
	if err != nil {
		return nil, err
	}
	r = &replay{}
	histories := map[int]trace.History{}
	var order []int
	for d := gob.NewDecoder(f); ; {
		var p part
		if err := d.Decode(&p); err == io.EOF {
			break
		} else if err != nil {
			return nil, fmt.Errorf("is damaged: frame %d: %w", f.n, err)
		}
		if err := r.add(p, histories); err != nil {
			return nil, err
		}
		order = p.Order
	}
	if r.about == nil || r.facts == nil {
		return nil, errors.New("ends before anything was known of its system")
	}
	for _, id := range order {
		h, ok := histories[id]
		if !ok {
			return nil, fmt.Errorf("is damaged: trial %d is missing", id)
		}
		r.trials = append(r.trials, Trial{ID: id, History: ends(h)})
	}
	return r, nil
}

// add takes in one part.
func (r *replay) add(p part, histories map[int]trace.History) error {
	if p.About != nil {
		r.about = p.About
	}
	if p.Facts != nil {
		r.facts = p.Facts
	}
	r.elapsed, r.closed = p.Elapsed, p.Closed
	for _, c := range p.Trials {
		h, err := c.after(histories[c.ID])
		if err != nil {
			return err
		}
		histories[c.ID] = h
	}
	return nil
}
