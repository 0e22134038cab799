// Command race holds the race against an exhaustive run: for each case, every
// pairing that nothing speaks against runs once with its default parameters,
// cut at ten times the best so far; then the race runs, alternating with
// reruns of the best pairing and of the one chosen. It prints a table.
//
//	go run .ci/peers/race.go [-rounds 5] [-rhs ones,made] [-open DIR] [SYSTEM...]
//
// SYSTEM is a sample, or a file; without one, four samples in two sizes and
// four open matrices from DIR. Times are own times: set-up, first residual and
// iterations; those of a race and of an exhaustive run are the sums over their
// trials.
package main

import (
	"context"
	"flag"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"time"

	"dwindle/engine"
	"dwindle/engine/choose"
	"dwindle/engine/trace"
)

const (
	cut      = 10               // times the best so far
	atMost   = 20 * time.Second // where nothing has converged yet
	raceTime = 600              // seconds a race may take
)

var (
	rounds  = flag.Int("rounds", 5, "races of each case")
	rhs     = flag.String("rhs", "ones,made", "right-hand sides")
	dir     = flag.String("open", os.Getenv("DWINDLE_OPEN"), "folder of open matrices")
	threads = flag.Int("threads", 1, "threads")
	tol     = flag.Float64("tol", 1e-8, "tolerance")
)

// samplesOf and openOf are the cases of the table. No open matrix has a best
// pairing of 0.2 s; these four take the longest of those that can be solved.
var (
	samplesOf = []string{"sample:plate:500", "sample:plate:1000", "sample:seepage:400", "sample:seepage:800",
		"sample:duct:300", "sample:duct:600", "sample:acoustics:150", "sample:acoustics:300"}
	openOf = []string{"bcsstk16.mtx.gz", "bcsstk13.mtx.gz", "hangGlider_2.mtx", "reorientation_1.mtx"}
)

func main() {
	flag.Parse()
	sources := flag.Args()
	if len(sources) == 0 {
		sources = samplesOf
		for _, name := range openOf {
			sources = append(sources, filepath.Join(*dir, name))
		}
	}
	fmt.Printf("Race against an exhaustive run, %s, %d threads, tolerance %g, medians of %d.\n\n", time.Now().Format(time.DateOnly), *threads, *tol, *rounds)
	fmt.Print("Times are own times; race and all are the sums over their trials, repetitions included. The best of all leaves no row unsolved.\n\n")
	fmt.Println("| system | b | best of all | its time | chosen | its time | ratio | race | all | share |")
	fmt.Println("| --- | --- | --- | --: | --- | --: | --: | --: | --: | --: |")
	for _, s := range sources {
		for _, b := range strings.Split(*rhs, ",") {
			if err := measure(s, b); err != nil {
				fmt.Fprintln(os.Stderr, s, b, err)
			}
		}
	}
}

// measure prints the row of one case.
func measure(source, b string) error {
	best, all, err := exhaustive(source, b)
	if err != nil {
		return err
	}
	rerun, err := session(source, b, true)
	if err != nil {
		return err
	}
	defer rerun.Close()
	var bests, chosens, races, ratios []float64
	count := map[string]int{}
	for range *rounds {
		chosen, spent, err := race(source, b)
		if err != nil {
			return err
		}
		tb, tc := again(rerun, best), again(rerun, chosen)
		count[chosen]++
		bests, chosens, races, ratios = append(bests, tb), append(chosens, tc), append(races, spent), append(ratios, tc/tb)
	}
	fmt.Printf("| %s | %s | %s | %.3f s | %s | %.3f s | %.2f | %.1f s | %.1f s | %.0f %% |\n", filepath.Base(source), b, best, median(bests),
		often(count), median(chosens), median(ratios), median(races), all, 100*median(races)/all)
	return nil
}

// session opens a system: for a race, or without any trial.
func session(source, b string, bare bool) (*engine.Session, error) {
	opt := engine.Options{RHS: b, Tol: *tol, Threads: *threads, FactsOnly: bare}
	if !bare {
		opt.Seconds = raceTime
	}
	s := engine.Open(context.Background(), source, opt)
	return s, s.Wait(context.Background())
}

// exhaustive runs every admissible pairing once; it returns the best, of those
// that leave no row unsolved, and the time of all.
func exhaustive(source, b string) (best string, all float64, err error) {
	s, err := session(source, b, true)
	if err != nil {
		return "", 0, err
	}
	defer s.Close()
	facts := s.Snapshot().Facts
	least := atMost / cut
	for _, c := range quickFirst(s.Candidates()) {
		if c.Refused != "" || choose.Against(facts, c) != "" {
			continue
		}
		h := once(s, c.Pairing, cut*least)
		all += h.OwnTime.Seconds()
		if h.Stop == trace.Converged && h.UnsolvedRows == 0 && (best == "" || h.OwnTime < least) {
			best, least = c.Pairing, h.OwnTime
		}
		fmt.Fprintf(os.Stderr, "%s %s %s: %s %.3f s\n", filepath.Base(source), b, c.Pairing, h.Stop, h.OwnTime.Seconds())
	}
	if best == "" {
		return "", 0, fmt.Errorf("nothing converges")
	}
	return best, all, nil
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

// once runs one pairing, at most so long, and takes it off the list again.
func once(s *engine.Session, pairing string, most time.Duration) trace.History {
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
			if h := history(s, id); h.OwnTime > most || h.Stop == trace.SettingUp && time.Since(start) > most {
				s.Cancel(id)
			}
		}
	}
}

// again is the time of one more run.
func again(s *engine.Session, pairing string) float64 {
	return once(s, pairing, time.Hour).OwnTime.Seconds()
}

func history(s *engine.Session, id int) trace.History {
	for _, t := range s.Trials() {
		if t.ID == id {
			return t.History
		}
	}
	return trace.History{}
}

// race runs a race and returns what was chosen and the time of all its trials.
func race(source, b string) (chosen string, spent float64, err error) {
	s, err := session(source, b, false)
	if err != nil {
		return "", 0, err
	}
	defer s.Close()
	v := s.Snapshot()
	for _, t := range v.Trials {
		spent += t.History.OwnTime.Seconds()
		for _, r := range t.History.Reruns {
			spent += r.Own.Seconds()
		}
	}
	if v.Choice.Pairing == "" {
		return "", 0, fmt.Errorf("the race chose nothing")
	}
	return v.Choice.Pairing, spent, nil
}

func median(x []float64) float64 {
	y := slices.Clone(x)
	slices.Sort(y)
	if len(y) == 0 {
		return math.NaN()
	}
	return y[len(y)/2]
}

// often is what was chosen most often, with how often where not always.
func often(count map[string]int) string {
	best, total := "", 0
	for p, n := range count {
		total += n
		if n > count[best] || n == count[best] && p < best {
			best = p
		}
	}
	if count[best] == total {
		return best
	}
	return fmt.Sprintf("%s (%d of %d)", best, count[best], total)
}
