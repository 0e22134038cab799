// Command race holds the race against an exhaustive run, in two stages. The
// first runs every pairing that nothing speaks against once, with its default
// parameters, cut at ten times the best so far, and appends a line for each to
// a file; what stands there is not run again, so that it can be interrupted.
// The second runs the race, alternating with reruns of the pairing it chose and
// of all that came near the best in the first stage, and prints a table.
//
//	go run .ci/peers/race.go -stage all  -file FILE [-rhs ones,made] SYSTEM...
//	go run .ci/peers/race.go -stage race -file FILE [-rounds 5] [-rhs ones,made] SYSTEM...
//
// SYSTEM is a sample, or a file; without one, the cases are four samples in
// two sizes and four open matrices from the folder -open. Times are own times:
// set-up, first residual and iterations; those of a race and of all are the
// sums over their trials. The first stage takes the processor's time, so that it
// may share the machine; the table tells how much longer its trials took than
// the same ones by themselves.
package main

import (
	"bufio"
	"cmp"
	"context"
	"errors"
	"flag"
	"fmt"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"time"

	"dwindle/engine"
	"dwindle/engine/choose"
	"dwindle/engine/trace"
)

const (
	cut       = 10               // times the best so far
	atMost    = 20 * time.Second // where nothing has converged yet
	raceTime  = 600              // seconds a race may take
	near      = 2                // times the best of the first stage: run again
	finalists = 8                // that are run again at most
)

var (
	stage   = flag.String("stage", "race", "all: run everything once; race: hold the race against it")
	file    = flag.String("file", "race.tsv", "what the first stage found")
	rounds  = flag.Int("rounds", 5, "races of each case")
	rhs     = flag.String("rhs", "ones,made", "right-hand sides")
	dir     = flag.String("open", os.Getenv("DWINDLE_OPEN"), "folder of open matrices")
	threads = flag.Int("threads", 1, "threads")
	tol     = flag.Float64("tol", 1e-8, "tolerance")
)

// samplesOf and openOf are the cases of the table, whose best pairings take from
// milliseconds to a tenth of a second: ten times as much takes hours. No open
// matrix has a best pairing of 0.2 s; these four take the longest of those that
// can be solved.
var (
	samplesOf = []string{"sample:plate:150", "sample:seepage:150", "sample:duct:120", "sample:acoustics:120",
		"sample:plate:300", "sample:seepage:250", "sample:duct:220", "sample:acoustics:200"}
	openOf = []string{"bcsstk16.mtx.gz", "bcsstk13.mtx.gz", "hangGlider_2.mtx", "reorientation_1.mtx"}
)

func main() {
	flag.Parse()
	sources := flag.Args()
	if len(sources) == 0 {
		for _, name := range openOf {
			sources = append(sources, filepath.Join(*dir, name))
		}
		sources = append(sources, samplesOf...)
	}
	do := everything
	if *stage == "race" {
		do = measure
		fmt.Printf("Race against an exhaustive run, %s, %d threads, tolerance %g, medians of %d.\n\n", time.Now().Format(time.DateOnly), *threads, *tol, *rounds)
		fmt.Println("| system | b | best of all | its time | chosen | its time | ratio | race | all | share | slower |")
		fmt.Println("| --- | --- | --- | --: | --- | --: | --: | --: | --: | --: | --: |")
	}
	for _, s := range sources {
		for _, b := range strings.Split(*rhs, ",") {
			if err := do(s, b); err != nil {
				fmt.Fprintln(os.Stderr, s, b, err)
			}
		}
	}
}

// run is one line of the first stage.
type run struct {
	pairing string
	solved  bool // converged and left no row unsolved, or found the least squares
	seconds float64
}

// found reads the runs of a case.
func found(source, b string) (runs []run, err error) {
	f, err := os.Open(*file)
	if errors.Is(err, fs.ErrNotExist) {
		return nil, nil
	}
	if err != nil {
		return nil, err
	}
	defer f.Close()
	lines := bufio.NewScanner(f)
	for lines.Scan() {
		c := strings.Split(lines.Text(), "\t")
		if len(c) != 6 || c[0] != filepath.Base(source) || c[1] != b {
			continue
		}
		t, err := strconv.ParseFloat(c[5], 64)
		if err != nil {
			return nil, err
		}
		runs = append(runs, run{c[2], c[3] == trace.Converged.String() && c[4] == "0" || c[3] == trace.LeastSquares.String(), t})
	}
	return runs, lines.Err()
}

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

// measure prints the row of one case.
func measure(source, b string) error {
	runs, err := found(source, b)
	if err != nil {
		return err
	}
	all := 0.0
	for _, r := range runs {
		all += r.seconds
	}
	leaders := leading(runs)
	if len(leaders) == 0 {
		return errors.New("nothing converges")
	}
	rerun, err := session(source, b, true)
	if err != nil {
		return err
	}
	defer rerun.Close()
	times := make([][]float64, len(leaders))
	var chosens, races []float64
	count := map[string]int{}
	for range *rounds {
		chosen, spent, err := race(source, b)
		if err != nil {
			return err
		}
		count[chosen]++
		races = append(races, spent)
		again(rerun, leaders[0].pairing) // warms up what the race has left cold
		mine := math.NaN()
		for k, l := range leaders {
			t := again(rerun, l.pairing)
			times[k] = append(times[k], t)
			if l.pairing == chosen {
				mine = t
			}
		}
		if math.IsNaN(mine) {
			mine = again(rerun, chosen)
		}
		chosens = append(chosens, mine)
	}
	best, slower := 0, make([]float64, len(leaders))
	for k := range times {
		slower[k] = leaders[k].seconds / median(times[k])
		if median(times[k]) < median(times[best]) {
			best = k
		}
	}
	fmt.Printf("| %s | %s | %s | %.4f s | %s | %.4f s | %.2f | %.1f s | %.1f s | %.0f %% | %.2f |\n", filepath.Base(source), b, leaders[best].pairing, median(times[best]),
		often(count), median(chosens), median(chosens)/median(times[best]), median(races), all, 100*median(races)/all, median(slower))
	return nil
}

// leading are the quickest of the first stage.
func leading(runs []run) []run {
	runs = slices.DeleteFunc(slices.Clone(runs), func(r run) bool { return !r.solved })
	slices.SortFunc(runs, func(a, b run) int { return cmp.Compare(a.seconds, b.seconds) })
	n := 0
	for n < len(runs) && n < finalists && runs[n].seconds <= near*runs[0].seconds {
		n++
	}
	return runs[:n]
}

// spent is the processor's part of a trial's own time.
func spent(h trace.History) float64 {
	t := h.OwnTime.Seconds()
	if h.CPUShare > 0 {
		t *= h.CPUShare
	}
	return t
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
