package engine

import (
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// A truss that nothing holds, turned by two opposite forces: they sum to zero,
// and no x answers the part along the rotation, which has the closed form
// moment/(√Σ r² ‖b‖). Trials end at it as the least that can be, and no reader
// is told that b is consistent.
func TestACoupleOnAFreeTruss(t *testing.T) {
	const n = 8
	a, xy := truss(n)
	b := make([]string, 2*n*n)
	for i := range b {
		b[i] = "0"
	}
	b[1], b[2*(n-1)+1] = "-1", "1"
	rhs := filepath.Join(t.TempDir(), "b.txt")
	if err := os.WriteFile(rhs, []byte(strings.Join(b, "\n")), 0o600); err != nil {
		t.Fatal(err)
	}
	turn := 0.0
	for k := range xy[0] {
		x, y := xy[0][k]-3.5, xy[1][k]-3.5
		turn += x*x + y*y
	}
	want := (n - 1) / math.Sqrt(turn) / math.Sqrt2
	v := ended(t, written(t, a, 0), Options{RHS: rhs, Iterations: 2000,
		Pairs: []string{"project/cg+ic:0", "project/minres+none", "minres+none", "cg+none"}})
	if u := v.Facts.Unreachable; u.Answer != inspect.Yes || math.Abs(u.Value-want) > 1e-12 {
		t.Fatalf("unreachable: %+v, want %g", u, want)
	}
	for _, p := range []string{"project/cg+ic:0", "project/minres+none", "minres+none"} {
		if h := trial(t, v, p); h.Stop != trace.LeastSquares || math.Abs(h.TrueResidual-want) > 1e-6*want {
			t.Errorf("%s ends %s (%s) at %g, want least-squares at %g", p, h.Stop, h.Reason, h.TrueResidual, want)
		}
	}
	if h := trial(t, v, "cg+none"); h.Stop == trace.LeastSquares || h.Stop == trace.Converged {
		t.Errorf("cg as b stands ends %s", h.Stop)
	}
	mustSay(t, v, "mechanism", diagnose.OnSystem, diagnose.Blocker, inspect.Measured, "3 zero-energy motions of the whole: nothing holds it in place", "no x can answer that")
	silent(t, v, "up-to-a-constant", "unreachable-rhs", "false-convergence")
}
