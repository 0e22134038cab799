package main

import (
	"bufio"
	"cmp"
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"

	"dwindle/engine/trace"
)

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
