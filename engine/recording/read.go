package recording

import (
	"encoding/gob"
	"errors"
	"fmt"
	"io"
	"os"

	"dwindle/engine/trace"
)

// Open reads the session that a file tells.
func Open(path string) (*State, error) {
	f, err := os.Open(path)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	return Read(f)
}

// Read reads a session up to its last whole frame. What is no session file, or
// not one any more, is an error, never a panic.
func Read(in io.Reader) (s *State, err error) {
	defer func() {
		if p := recover(); p != nil {
			s, err = nil, fmt.Errorf("is damaged: %v", p)
		}
	}()
	f, err := newFrames(in)
	if err != nil {
		return nil, err
	}
	s = &State{}
	histories := map[int]trace.History{}
	var order []int
	for d := gob.NewDecoder(f); ; {
		var p part
		if err := d.Decode(&p); err == io.EOF {
			break
		} else if err != nil {
			return nil, fmt.Errorf("is damaged: frame %d: %w", f.n, err)
		}
		if err := s.add(p, histories); err != nil {
			return nil, err
		}
		order = p.Order
	}
	if s.About == nil || s.Facts == nil {
		return nil, errors.New("ends before anything was known of its system")
	}
	for _, id := range order {
		h, ok := histories[id]
		if !ok {
			return nil, fmt.Errorf("is damaged: trial %d is missing", id)
		}
		s.Trials = append(s.Trials, Trial{ID: id, History: ends(h)})
	}
	return s, nil
}

// add takes in one part.
func (s *State) add(p part, histories map[int]trace.History) error {
	if p.About != nil {
		s.About = p.About
	}
	if p.Facts != nil {
		s.Facts = p.Facts
	}
	if p.Answer != nil {
		s.Answer = p.Answer
	}
	s.Elapsed = p.Elapsed
	for _, c := range p.Trials {
		h, err := c.after(histories[c.ID])
		if err != nil {
			return err
		}
		histories[c.ID] = h
	}
	return nil
}

// leftGoing is the reason of a trial whose end no one wrote down.
const leftGoing = "still going when the recording ended"

// ends gives every live history the ending that its recording had.
func ends(h trace.History) trace.History {
	if !h.Stop.Ended() {
		h.Stop, h.Reason = trace.Cancelled, leftGoing
	}
	return h
}
