// Command racing holds the race against an exhaustive run, in two stages. The
// first runs every pairing that nothing speaks against once, with its default
// parameters, cut at ten times the best so far, and appends a line for each to
// a file; what stands there is not run again, so that it can be interrupted.
// The second runs the race, alternating with reruns of the pairing it chose and
// of all that came near the best in the first stage, and prints a table.
//
//	go run ./.ci/peers/racing -stage all  -file FILE [-rhs ones,made] SYSTEM...
//	go run ./.ci/peers/racing -stage race -file FILE [-rounds 5] [-rhs ones,made] SYSTEM...
//
// SYSTEM is a sample, or a file; without one, the cases are four samples in
// two sizes, four systems from the folder -assembled, which assemble.py fills,
// and four open matrices from the folder -open. Times are own times:
// set-up, first residual and iterations; those of a race and of all are the
// sums over their trials. The first stage takes the processor's time, so that it
// may share the machine; the table tells how much longer its trials took than
// the same ones when they are run again, and the share of the race allows for it.
package main

import (
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"time"
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
	built   = flag.String("assembled", os.Getenv("DWINDLE_ASSEMBLED"), "folder of assembled systems")
	threads = flag.Int("threads", 1, "threads")
	tol     = flag.Float64("tol", 1e-8, "tolerance")
)

// samplesOf, assembledOf and openOf are the cases of the table. The best pairings
// of the samples and of the assembled systems take 0.2 s and more. No open matrix
// within reach has such a one; these four take the longest of those that can be
// solved.
var (
	samplesOf = []string{"sample:duct:450", "sample:plate:500", "sample:acoustics:340", "sample:drains:280",
		"sample:duct:500", "sample:plate:560", "sample:acoustics:380", "sample:drains:320"}
	assembledOf = []string{"pipe.mtx", "creep.mtx", "rod.mtx", "porous.mtx"}
	openOf      = []string{"bcsstk16.mtx.gz", "bcsstk13.mtx.gz", "bcsstk24.rsa", "hangGlider_2.mtx"}
)

func main() {
	flag.Parse()
	sources := flag.Args()
	if len(sources) == 0 {
		for _, name := range openOf {
			sources = append(sources, filepath.Join(*dir, name))
		}
		for _, name := range assembledOf {
			sources = append(sources, filepath.Join(*built, name))
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
