package engine

import (
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// A frame without supports: three motions cost no energy, b pushes along them,
// and no sum of rows shows it. The part of b that x can reach is solved for;
// what is left is the part along the motions, which is found before any trial,
// and cg as b stands does not get there.
func TestProjectOntoWhatIsHeld(t *testing.T) {
	v := ended(t, "sample:frame:unsupported", Options{Pairs: []string{"project/cg+ic:0", "project,scale/cg+none", "cg+ic:0"}, Iterations: 2000})
	u := v.Facts.Unreachable
	if u.Answer != inspect.Yes || u.Certainty != inspect.Measured {
		t.Fatalf("unreachable: %+v", u)
	}
	for _, p := range []string{"project/cg+ic:0", "project,scale/cg+none"} {
		h := trial(t, v, p)
		t.Logf("%s: %s after %d, true %g, unreachable %g", p, h.Stop, h.Iterations, h.TrueResidual, u.Value)
		if h.Stop != trace.LeastSquares || math.Abs(h.TrueResidual-u.Value) > 1e-6*u.Value {
			t.Errorf("%s ends %s (%s) at %g, want least-squares at %g", p, h.Stop, h.Reason, h.TrueResidual, u.Value)
		}
	}
	if h := trial(t, v, "cg+ic:0"); h.Stop == trace.LeastSquares || h.Stop == trace.Converged {
		t.Errorf("cg as b stands ends %s", h.Stop)
	}
	f := mustSay(t, v, "mechanism", diagnose.OnSystem, diagnose.Blocker, inspect.Measured, "3 zero-energy motions", "no x can answer that")
	if len(f.Try) != 1 || f.Try[0] != "project/cg+ic:0" {
		t.Errorf("offers %v", f.Try)
	}
	if g, ok := finding(v, "unreachable-rhs", diagnose.OnSystem); ok {
		t.Errorf("told twice: %s", g.Claim)
	}
}

// An equation that repeats two others, and a right-hand side that does not: the
// second look finds which, tells them by their names, and project solves for
// what is in reach, whatever scales the system; no trial without it gets below.
func TestProjectOfRepeatedEquations(t *testing.T) {
	const n = 40
	var out strings.Builder
	entries := 0
	entry := func(i, j int, v float64) {
		if 0 <= j && j < n {
			fmt.Fprintf(&out, "%d %d %.17g\n", i+1, j+1, v)
			entries++
		}
	}
	row := func(at, of int, by float64) {
		entry(at, of, 3*by)
		entry(at, of-1, -2*by)
		entry(at, of+1, -0.9*by)
	}
	for i := range n {
		if i != 20 {
			row(i, i, 1)
		}
	}
	row(20, 5, 0.7)
	row(20, 31, 1.1)
	folder := t.TempDir()
	file := func(name, text string) string {
		path := filepath.Join(folder, name)
		if err := os.WriteFile(path, []byte(text), 0o600); err != nil {
			t.Fatal(err)
		}
		return path
	}
	source := file("a.mtx", fmt.Sprintf("%%%%MatrixMarket matrix coordinate real general\n%d %d %d\n%s", n, n, entries, out.String()))
	labels := file("labels.txt", strings.Repeat("joint\n", 20)+"hinge\n"+strings.Repeat("joint\n", n-21))
	pairs := []string{"project/gmres:60+none", "project,scale/gmres:60+none", "scale,project/gmres:60+none", "gmres:60+none"}
	v := ended(t, source, Options{Pairs: pairs, Labels: labels, RHS: "ones"})
	// y = (0.7, 1.1, -1) on the rows 6, 32 and 21, b = 1 (closed form).
	want := 0.8 / math.Sqrt(0.7*0.7+1.1*1.1+1) / math.Sqrt(n)
	u := v.Facts.Unreachable
	if u.Answer != inspect.Yes || math.Abs(u.Value-want) > 1e-12 {
		t.Fatalf("unreachable: %+v, want %g", u, want)
	}
	for _, p := range pairs {
		h := trial(t, v, p)
		t.Logf("%s: %s after %d, true %g", p, h.Stop, h.Iterations, h.TrueResidual)
		near := 1e-6
		if strings.HasPrefix(p, "scale") {
			near = 0.01 // the smallest residual is one in scaled units
		}
		if h.Stop == trace.Converged || near < 0.01 && h.Stop != trace.LeastSquares || math.Abs(h.TrueResidual-want) > near*want {
			t.Errorf("%s ends %s (%s) at %g, want least-squares at %g", p, h.Stop, h.Reason, h.TrueResidual, want)
		}
	}
	mustSay(t, v, "unreachable-rhs", diagnose.OnSystem, diagnose.Blocker, inspect.Measured, "21 = hinge", "depend on each other")
	mustSay(t, v, "near-null", diagnose.OnSystem, diagnose.Blocker, inspect.Measured, "singular to rounding", "21 = hinge")
}
