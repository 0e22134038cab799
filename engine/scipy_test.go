package engine

import (
	"bufio"
	"bytes"
	"context"
	"fmt"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"testing"

	"dwindle/engine/trace"
)

// asMatrixMarket writes a symmetric matrix that SciPy's own reader does not
// know as Matrix Market.
func asMatrixMarket(t *testing.T, path string) string {
	t.Helper()
	s, err := read(context.Background(), path, nil, 0, nil)
	if err != nil {
		t.Fatal(err)
	}
	return written(t, s.Matrix(), 0)
}

// The counts of cg agree with SciPy's, run on the same files now.
func TestCountsAgreeWithSciPy(t *testing.T) {
	dir := open(t)
	python := os.Getenv("DWINDLE_PYTHON")
	if python == "" {
		t.Skip("the comparison with SciPy is left out: set DWINDLE_PYTHON to a Python that has it")
	}
	paths := []string{asMatrixMarket(t, filepath.Join(dir, "bcsstk01.rsa"))}
	for _, f := range []string{"494_bus.mtx", "bcsstk16.mtx.gz", "LFAT5.mtx", "pts5ldd03.mtx"} {
		paths = append(paths, filepath.Join(dir, f))
	}
	at := map[string]string{}
	for _, p := range paths {
		at[filepath.Base(p)] = p
	}
	var errs bytes.Buffer
	cmd := exec.Command(python, append([]string{filepath.Join("testdata", "cg_counts.py")}, paths...)...)
	cmd.Stderr = &errs
	out, err := cmd.Output()
	if err != nil {
		t.Fatalf("%v\n%s", err, errs.String())
	}
	runs := 0
	for s := bufio.NewScanner(bytes.NewReader(out)); s.Scan(); runs++ {
		var file, pairing string
		var want int
		if _, err := fmt.Sscan(s.Text(), &file, &pairing, &want); err != nil {
			t.Fatalf("%q: %v", s.Text(), err)
		}
		h := only(t, ended(t, at[file], Options{Pairs: []string{pairing}, Tol: 1e-6, RHS: "ones"}))
		share := 0.02
		if file == "494_bus.mtx" && pairing == "cg+none" {
			share = 0.05 // rounding moves this count by a few per cent
		}
		t.Logf("%-16s %-10s ours %d, SciPy %d", file, pairing, h.Iterations, want)
		if h.Stop != trace.Converged || math.Abs(float64(h.Iterations-want)) > math.Max(2, share*float64(want)) {
			t.Errorf("%s %s: %s in %d iterations, SciPy takes %d", file, pairing, h.Stop, h.Iterations, want)
		}
	}
	if runs != 2*len(paths) {
		t.Errorf("%d runs reported, want %d", runs, 2*len(paths))
	}
}
