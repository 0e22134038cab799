package main

import (
	"fmt"
	"math"
	"os"
	"path/filepath"
	"slices"

	"dwindle/engine/choose"
	"dwindle/engine/trace"
)

// everything runs each admissible pairing once that is not in the file yet.
func everything(source, b string) error {
	runs, err := found(source, b)
	if err != nil {
		return err
	}
	out, err := os.OpenFile(*file, os.O_APPEND|os.O_CREATE|os.O_WRONLY, 0o644)
	if err != nil {
		return err
	}
	defer out.Close()
	s, err := session(source, b, true)
	if err != nil {
		return err
	}
	defer s.Close()
	facts := s.Snapshot().Facts
	least := atMost.Seconds() / cut
	done := map[string]bool{}
	for _, r := range runs {
		done[r.pairing] = true
		if r.solved {
			least = math.Min(least, r.seconds)
		}
	}
	for _, c := range quickFirst(s.Candidates()) {
		if c.Refused != "" || choose.Against(facts, c) != "" || done[c.Pairing] {
			continue
		}
		h := once(s, c.Pairing, cut*least)
		if h.Stop == trace.Converged && h.UnsolvedRows == 0 || h.Stop == trace.LeastSquares {
			least = math.Min(least, spent(h))
		}
		if _, err := fmt.Fprintf(out, "%s\t%s\t%s\t%s\t%d\t%.6f\n", filepath.Base(source), b, c.Pairing, h.Stop, h.UnsolvedRows, spent(h)); err != nil {
			return err
		}
	}
	return nil
}

// quickFirst puts the solvers that usually converge before the others, so that
// the cut bites early.
func quickFirst(list []choose.Candidate) []choose.Candidate {
	place := func(c choose.Candidate) int {
		switch c.Solver {
		case "cg", "bicgstab":
			return 0
		case "richardson", "sd", "chebyshev":
			if !c.Direct {
				return 2
			}
		}
		return 1
	}
	slices.SortStableFunc(list, func(a, b choose.Candidate) int { return place(a) - place(b) })
	return list
}
