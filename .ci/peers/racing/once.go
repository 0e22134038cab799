package main

import (
	"context"
	"math"
	"time"

	"dwindle/engine"
	"dwindle/engine/trace"
)

// session opens a system: for a race, or without any trial.
func session(source, b string, bare bool) (*engine.Session, error) {
	opt := engine.Options{RHS: b, Tol: *tol, Threads: *threads, FactsOnly: bare}
	if !bare {
		opt.Seconds = raceTime
	}
	s := engine.Open(context.Background(), source, opt)
	return s, s.Wait(context.Background())
}

// once runs one pairing, at most so many seconds, and takes it off the list again.
func once(s *engine.Session, pairing string, most float64) trace.History {
	id, err := s.Add(pairing)
	if err != nil {
		panic(err)
	}
	defer s.Drop(id)
	ended := make(chan struct{})
	go func() {
		defer close(ended)
		s.Wait(context.Background())
	}()
	start := time.Now()
	tick := time.NewTicker(5 * time.Millisecond)
	defer tick.Stop()
	for {
		select {
		case <-ended:
			return history(s, id)
		case <-tick.C:
			if h := history(s, id); spent(h) > most || h.Stop == trace.SettingUp && time.Since(start).Seconds() > most {
				s.Cancel(id)
			}
		}
	}
}

// again is the time of one more run.
func again(s *engine.Session, pairing string) float64 {
	return once(s, pairing, math.Inf(1)).OwnTime.Seconds()
}

func history(s *engine.Session, id int) trace.History {
	for _, t := range s.Trials() {
		if t.ID == id {
			return t.History
		}
	}
	return trace.History{}
}

// spent is the processor's part of a trial's own time.
func spent(h trace.History) float64 {
	t := h.OwnTime.Seconds()
	if h.CPUShare > 0 {
		t *= h.CPUShare
	}
	return t
}
