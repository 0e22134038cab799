package engine

import (
	"context"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"dwindle/engine/report"
)

// checked judges the answer in a file for 494_bus with b of ones.
func checked(t *testing.T, dir, x string) report.CheckDocument {
	t.Helper()
	text, err := os.ReadFile(x)
	if err != nil {
		t.Fatal(err)
	}
	printed := regexp.MustCompile(`# printed (\S+)`).FindSubmatch(text)
	if printed == nil {
		t.Fatalf("%s does not tell what was printed", x)
	}
	d, err := Check(context.Background(), filepath.Join(dir, "494_bus.mtx"), Options{RHS: "ones", Tol: 1e-6},
		Checked{X: x, Said: string(printed[1])})
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// unlooked tests what must be said of an answer that minres stopped at by
// ‖r‖/(‖A‖‖x‖): it is not solved, and its number is that one.
func unlooked(t *testing.T, d report.CheckDocument, iterations int) {
	t.Helper()
	a := d.Answer
	if rhs, _ := a.Definition("rhs"); a.Solved || rhs.Value < 0.5 {
		t.Errorf("%s", a.Verdict)
	}
	if a.Said == nil || len(a.Said.Fitting) != 1 || a.Said.Fitting[0].Definition.Name != "running" {
		t.Fatalf("its number: %+v", a.Said)
	}
	f := a.Said.Fitting[0]
	if f.First > iterations || f.Last < iterations || f.Last-f.First > iterations/5 {
		t.Errorf("the norm of A after %d to %d steps, it made %d", f.First, f.Last, iterations)
	}
	if !strings.Contains(a.Said.Claim, "does not look at b") || !f.Definition.Holds {
		t.Errorf("%s", a.Said.Claim)
	}
}

// SciPy 1.10.1's minres stops on 494_bus after 66 iterations with a true
// residual of 0.91; the answer and the number it printed were recorded.
func TestCheckOfARecordedAnswer(t *testing.T) {
	d := checked(t, open(t), filepath.Join("testdata", "minres_494_bus.txt"))
	unlooked(t, d, 66)
	if rhs, _ := d.Answer.Definition("rhs"); rhs.Value < 0.9 || rhs.Value > 0.92 {
		t.Errorf("true residual %g, recorded with 0.91", rhs.Value)
	}
}

// The same with SciPy as it is installed, run now.
func TestCheckOfSciPysAnswer(t *testing.T) {
	dir, python := open(t), os.Getenv("DWINDLE_PYTHON")
	if python == "" {
		t.Skip("the comparison with SciPy is left out: set DWINDLE_PYTHON to a Python that has it")
	}
	out, err := exec.Command(python, filepath.Join("testdata", "minres_answer.py"), filepath.Join(dir, "494_bus.mtx"), "1e-6").Output()
	if err != nil {
		t.Fatal(err)
	}
	x := filepath.Join(t.TempDir(), "x.txt")
	if err := os.WriteFile(x, out, 0o600); err != nil {
		t.Fatal(err)
	}
	iterations := 0
	if m := regexp.MustCompile(`# iterations (\d+)`).FindSubmatch(out); m != nil {
		for _, c := range m[1] {
			iterations = 10*iterations + int(c-'0')
		}
	}
	unlooked(t, checked(t, dir, x), iterations)
}
