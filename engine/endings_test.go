package engine

import (
	"context"
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
	"dwindle/engine/run"
	"dwindle/engine/trace"
)

var update = flag.Bool("update", false, "write the table of endings anew")

// endingsOf are the small samples every pairing is run on.
var endingsOf = []string{"plate:12", "frame:n=4", "seepage:8", "duct:10", "acoustics:12", "drains:6", "strut:8", "feeder:60",
	"strakos:24", "shift:12", "kershaw", "line:20"}

const (
	endingsTol        = 1e-10
	endingsIterations = 3000
)

// Every pairing ends on every sample as the table in testdata says: one line a
// sample and solver, preconditioners grouped by ending. What is called
// converged is so against a dense solution too, as far as the condition number
// lets the residual say.
func TestEveryPairingEndsAsTheTableSays(t *testing.T) {
	var table strings.Builder
	for _, spec := range endingsOf {
		endings(t, &table, spec)
	}
	path := filepath.Join("testdata", "endings.txt")
	if *update {
		if err := os.WriteFile(path, []byte(table.String()), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	got, lines := strings.Split(table.String(), "\n"), strings.Split(string(want), "\n")
	for i := 0; i < max(len(got), len(lines)); i++ {
		g, w := line(got, i), line(lines, i)
		if g != w {
			t.Errorf("line %d of the table: got\n  %s\nwant\n  %s", i+1, g, w)
		}
	}
}

func line(lines []string, i int) string {
	if i < len(lines) {
		return lines[i]
	}
	return ""
}

// endings runs every pairing that can run on the sample and adds its lines.
func endings(t *testing.T, table *strings.Builder, spec string) {
	t.Helper()
	s, err := read(context.Background(), "sample:"+spec, nil, 0, nil)
	if err != nil {
		t.Fatal(err)
	}
	if err := complete(&s, Options{}); err != nil {
		t.Fatal(err)
	}
	b := run.NewBench(s, run.Limits{Target: run.Target{Rule: run.StopRHS, Tol: endingsTol}, Iterations: endingsIterations}, 0, nil)
	ctx, cancel := context.WithTimeout(context.Background(), 2*time.Minute)
	defer cancel()
	cands := candidates(b.Have(), 0)
	for _, c := range cands {
		m, err := run.Parse(c.Pairing)
		if err != nil {
			t.Fatal(err)
		}
		if c.Refused == "" {
			b.Add(m)
		}
	}
	go b.Run(ctx)
	b.WaitEnded(ctx)
	if ctx.Err() != nil {
		t.Fatalf("%s: the trials did not end in time", spec)
	}
	checkAgainstDense(t, spec, s, b.Trials())
	write(table, spec, b.Trials())
}

// write adds a line for each solver: its preconditioners, grouped by ending.
func write(table *strings.Builder, spec string, trials []*run.Trial) {
	order := []trace.Stop{trace.Converged, trace.LeastSquares, trace.FalselyConverged, trace.IterationLimit,
		trace.BrokeDown, trace.Diverged, trace.Stagnated, trace.Refused, trace.Failed}
	var solvers []string
	by := map[string]map[trace.Stop][]string{}
	for _, u := range trials {
		m := u.Method()
		if by[m.Solver.Name] == nil {
			by[m.Solver.Name] = map[trace.Stop][]string{}
			solvers = append(solvers, m.Solver.Name)
		}
		stop := u.History().Stop
		by[m.Solver.Name][stop] = append(by[m.Solver.Name][stop], m.Precond.Name)
	}
	for _, name := range solvers {
		fmt.Fprintf(table, "%s %s", spec, name)
		for _, stop := range order {
			if list := by[name][stop]; len(list) > 0 {
				fmt.Fprintf(table, " | %s: %s", stop, strings.Join(list, " "))
			}
		}
		table.WriteByte('\n')
	}
}

// checkAgainstDense holds every converged answer against gonum's dense
// solution: the relative error is at most κ₂ times the relative residual.
// Singular samples are held by their residual alone.
func checkAgainstDense(t *testing.T, spec string, s linear.System, trials []*run.Trial) {
	t.Helper()
	a := s.Matrix()
	n := a.NRows
	dense := mat.NewDense(n, n, nil)
	for i := 0; i < n; i++ {
		cols, vals := a.Row(i)
		for k, c := range cols {
			dense.Set(i, int(c), vals[k])
		}
	}
	cond := mat.Cond(dense, 2)
	var x mat.VecDense
	known := cond < 1e14 && x.SolveVec(dense, mat.NewVecDense(n, s.B)) == nil
	r, d := make([]float64, n), make([]float64, n)
	for _, u := range trials {
		h := u.History()
		if h.Stop == trace.Failed {
			t.Errorf("%s %s failed: %s", spec, h.Pairing, h.Reason)
		}
		if h.Stop != trace.Converged {
			continue
		}
		if res := linear.Residual(r, a, u.Answer(), s.B) / linear.Norm2(s.B); !(res <= endingsTol*1.001) {
			t.Errorf("%s %s is called converged at %g", spec, h.Pairing, res)
		}
		if !known {
			continue
		}
		want := x.RawVector().Data
		linear.Lin(d, 1, u.Answer(), -1, want)
		if e := linear.Norm2(d) / linear.Norm2(want); e > cond*(1.01*endingsTol+1e-15*float64(n)) {
			t.Errorf("%s %s: error %g against the dense solution, condition %g", spec, h.Pairing, e, cond)
		}
	}
}
