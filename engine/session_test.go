package engine

import (
	"context"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// open is the folder of open matrices; the test is skipped without one.
func open(t *testing.T) string {
	t.Helper()
	dir := os.Getenv("DWINDLE_OPEN")
	if dir == "" {
		t.Skip("open matrices are left out: set DWINDLE_OPEN to a folder that .ci/open filled")
	}
	return dir
}

// ended runs a session to its end and returns what there is to see.
func ended(t *testing.T, source string, opt Options) Snapshot {
	t.Helper()
	if opt.Threads == 0 {
		opt.Threads = 1
	}
	s := Open(context.Background(), source, opt)
	defer s.Close()
	ctx, cancel := context.WithTimeout(context.Background(), 2*time.Minute)
	defer cancel()
	if err := s.Wait(ctx); err != nil {
		t.Fatalf("%s: %v", source, err)
	}
	return s.Snapshot()
}

func openFile(t *testing.T, name string) string { return filepath.Join(open(t), name) }

// written saves a matrix to a file with the given number of significant
// digits (0: enough to read back the same), and returns its path.
func written(t *testing.T, a *linear.CSR, digits int) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), "a.mtx")
	f, err := os.Create(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	if digits == 0 {
		err = linear.WriteMatrixMarket(f, a, true, nil)
	} else {
		err = writeRounded(f, a, digits)
	}
	if err != nil {
		t.Fatal(err)
	}
	return path
}

// finding returns the first finding of a rule on a subject ("" is any).
func finding(v Snapshot, rule, subject string) (diagnose.Finding, bool) {
	for _, f := range v.Findings {
		if f.Rule == rule && (subject == "" || f.Subject == subject) {
			return f, true
		}
	}
	return diagnose.Finding{}, false
}

// rules names what was found, for messages.
func rules(v Snapshot) string {
	var b strings.Builder
	for _, f := range v.Findings {
		b.WriteString("\n  " + string(f.Weight) + " " + string(f.Certainty) + " " + f.Rule + " [" + f.Subject + "]: " + f.Claim)
	}
	return b.String()
}

func only(t *testing.T, v Snapshot) trace.History {
	t.Helper()
	if len(v.Trials) != 1 {
		t.Fatalf("%d trials, want 1", len(v.Trials))
	}
	return v.Trials[0].History
}

// Iteration counts at b = ones, tol 1e-6, from the check values of the
// project, computed with NumPy and SciPy (float64) from the same files.
func TestIterationCountsOnOpenMatrices(t *testing.T) {
	for _, c := range []struct {
		file, pairing string
		want          float64
		share         float64 // allowed deviation; at least two iterations
	}{
		{"bcsstk01.rsa", "cg+none", 136, 0.02},
		{"494_bus.mtx", "cg+none", 1186, 0.05},
		{"bcsstk16.mtx.gz", "cg+none", 463, 0.02},
		{"LFAT5.mtx", "cg+none", 25.5, 0.02},
		{"pts5ldd03.mtx", "cg+none", 29, 0.02},
		{"bcsstk01.rsa", "cg+jacobi", 47, 0.02},
		{"494_bus.mtx", "cg+jacobi", 407, 0.02},
		{"bcsstk16.mtx.gz", "cg+jacobi", 172, 0.02},
		{"LFAT5.mtx", "cg+jacobi", 10, 0.02},
		{"pts5ldd03.mtx", "cg+jacobi", 29, 0.02},
		{"pts5ldd03.mtx", "gmres:30+none", 29, 0.02},
		{"LFAT5.mtx", "gmres:30+none", 12, 0.02},
		{"bcsstk13.mtx.gz", "cg+jacobi", 1447, 0.02},
	} {
		v := ended(t, openFile(t, c.file), Options{Pairs: []string{c.pairing}, Tol: 1e-6, RHS: "ones"})
		h := only(t, v)
		t.Logf("%-16s %-14s %s in %d (%g)", c.file, c.pairing, h.Stop, h.Iterations, c.want)
		if h.Stop != trace.Converged {
			t.Errorf("%s %s: %s (%s)", c.file, c.pairing, h.Stop, h.Reason)
		}
		if d := math.Abs(float64(h.Iterations) - c.want); d > math.Max(2.5, c.share*c.want) {
			t.Errorf("%s %s: %d iterations, want %g", c.file, c.pairing, h.Iterations, c.want)
		}
		for _, rule := range []string{"restart-stagnation", "divergence", "accuracy-floor"} {
			if f, ok := finding(v, rule, ""); ok {
				t.Errorf("%s %s: false alarm %s: %s", c.file, c.pairing, rule, f.Claim)
			}
		}
	}
}

// Condition of the Jacobi-scaled matrix, dense eigenvalues in float64 (check
// values of the project): the live estimate is close and never above.
func TestConditionEstimatesOnOpenMatrices(t *testing.T) {
	for _, c := range []struct {
		file string
		want float64
	}{
		{"bcsstk01.rsa", 1360.707}, {"bcsstk13.mtx.gz", 5.63637e5}, {"bcsstk16.mtx.gz", 802.049},
		{"494_bus.mtx", 78952.6}, {"LFAT5.mtx", 151.3146},
	} {
		v := ended(t, openFile(t, c.file), Options{Pairs: []string{"cg+jacobi"}, Tol: 1e-6, RHS: "ones"})
		got := only(t, v).Condition
		t.Logf("%-16s estimate %.6g of %.6g", c.file, got.Estimate, c.want)
		if got.Of != "M⁻¹A" || !(got.Estimate >= 0.98*c.want) || got.Estimate > c.want*(1+1e-5) {
			t.Errorf("%s: condition estimate %g of %q, want within 2 %% below %g", c.file, got.Estimate, got.Of, c.want)
		}
	}
}

// Condition of the incomplete Cholesky-preconditioned 5-point matrix, dense
// eigenvalues in float64 (check values of the project): the live estimate at
// tol 1e-12 is within half a per cent and never above.
func TestLiveConditionOfIncompleteCholesky(t *testing.T) {
	for spec, want := range map[string]float64{"sample:plate:8": 3.6837, "sample:plate:16": 11.1445, "sample:plate:32": 39.8108} {
		for _, rhs := range []string{"ones", "made"} {
			got := only(t, ended(t, spec, Options{Pairs: []string{"cg+ic:0"}, Tol: 1e-12, RHS: rhs})).Condition.Estimate
			t.Logf("%s %s: %.6g of %g", spec, rhs, got, want)
			if !(got >= 0.995*want) || got > want*(1+2e-5) {
				t.Errorf("%s, b %s: condition estimate %g, want within 0.5 %% below %g", spec, rhs, got, want)
			}
		}
	}
}

// hangGlider_2 is a saddle system; most of its diagonal is zero.
func TestHangGliderIsToldIndefinite(t *testing.T) {
	v := ended(t, openFile(t, "hangGlider_2.mtx"), Options{Pairs: []string{"cg+none"}, Tol: 1e-6, Iterations: 2000})
	for _, f := range v.Findings {
		if f.Weight == diagnose.Blocker && f.Certainty == inspect.Proved && strings.Contains(f.Claim, "definite") {
			return
		}
	}
	t.Errorf("no proved blocker about definiteness:%s", rules(v))
}

// bcsstk13 with Jacobi goes 1062 of 1447 iterations without a new best; it is
// neither stagnation nor divergence, and a note says that the error falls.
func TestGrowthIsNoFinding(t *testing.T) {
	v := ended(t, openFile(t, "bcsstk13.mtx.gz"), Options{Pairs: []string{"cg+jacobi"}, Tol: 1e-6, RHS: "ones"})
	if f, ok := finding(v, "residual-rises", "cg+jacobi"); !ok || !strings.Contains(f.Claim, "no divergence") {
		t.Errorf("nothing explains the growth: %s", f.Claim)
	}
	for _, f := range v.Findings {
		if f.Subject != diagnose.OnSystem && f.Weight != diagnose.Note {
			t.Errorf("false alarm: %s: %s", f.Rule, f.Claim)
		}
	}
}

// The graph Laplacian of an open pattern matrix is exactly semi-definite: run
// to its floor, nothing negative may be called proved.
func TestLaplaciansGiveNoNegativeEigenvalue(t *testing.T) {
	for _, file := range []string{"can_24.psa", "jagmesh7.mtx", "bcsstk01.rsa", "494_bus.mtx", "west0479.mtx"} {
		a := laplacian(t, openFile(t, file))
		for _, p := range []string{"cg+none", "cg+jacobi", "minres+none", "sd+none"} {
			v := ended(t, written(t, a, 0), Options{Pairs: []string{p}, RHS: "made", Tol: 1e-17, Iterations: 4 * a.NRows})
			checkNothingNegative(t, file+" Laplacian "+p, v)
		}
	}
	for _, p := range []string{"cg+none", "cg+ic:0", "minres+none"} {
		v := ended(t, "sample:seepage", Options{Pairs: []string{p}, RHS: "made", Tol: 1e-17, Iterations: 3000})
		checkNothingNegative(t, "seepage "+p, v)
	}
}

func checkNothingNegative(t *testing.T, what string, v Snapshot) {
	t.Helper()
	for _, f := range v.Findings {
		if f.Rule == "negative-curvature" || f.Rule == "not-definite" || f.Rule == "outside-assumptions" {
			t.Errorf("%s: false alarm %s: %s", what, f.Rule, f.Claim)
		}
	}
	for _, u := range v.Trials {
		if u.History.Stop == trace.Converged && !(u.History.TrueResidual <= v.Settings.Tol) {
			t.Errorf("%s: called converged at %g", what, u.History.TrueResidual)
		}
	}
}

// laplacian is D − |pattern| of a matrix, made symmetric: integer entries,
// rows that sum to zero exactly.
func laplacian(t *testing.T, path string) *linear.CSR {
	t.Helper()
	s, err := read(context.Background(), path, nil, 0, nil)
	if err != nil {
		t.Fatal(err)
	}
	m := s.Matrix()
	edge := map[[2]int]bool{}
	for i := 0; i < m.NRows; i++ {
		cols, _ := m.Row(i)
		for _, c := range cols {
			if int(c) != i {
				edge[[2]int{min(i, int(c)), max(i, int(c))}] = true
			}
		}
	}
	var e []linear.Entry
	for k := range edge {
		e = append(e, linear.Entry{I: k[0], J: k[1], V: -1}, linear.Entry{I: k[1], J: k[0], V: -1},
			linear.Entry{I: k[0], J: k[0], V: 1}, linear.Entry{I: k[1], J: k[1], V: 1})
	}
	return linear.FromEntries(m.NRows, m.NRows, e)
}

// An uneven cantilever of 50 elements. With 6 digits the smallest eigenvalue
// of what is in the file is negative, by less than the digits leave open.
func TestDigitsDecideWhatIsProved(t *testing.T) {
	a := cantilever(50)
	full := ended(t, written(t, a, 0), Options{Pairs: []string{"cg+jacobi"}})
	if w := full.Facts.PositiveDefinite; w.Answer != inspect.Yes || w.Certainty != inspect.Proved {
		t.Errorf("17 digits: definite %s, %s: %s", w.Answer, w.Certainty, w.Why)
	}
	short := ended(t, written(t, a, 6), Options{Pairs: []string{"cg+jacobi"}})
	if short.Facts.Digits != 6 {
		t.Errorf("the file has %d digits, want 6", short.Facts.Digits)
	}
	w := short.Facts.PositiveDefinite
	if w.Answer != inspect.No || w.Certainty != inspect.Measured || !strings.Contains(w.Why, "digits") {
		t.Errorf("6 digits: definite %s, %s: %s", w.Answer, w.Certainty, w.Why)
	}
	said := false
	for _, f := range short.Findings {
		if f.Certainty == inspect.Proved && (f.Rule == "negative-curvature" || f.Rule == "not-definite" || f.Rule == "outside-assumptions") {
			t.Errorf("6 digits: %s is called proved: %s", f.Rule, f.Claim)
		}
		said = said || strings.Contains(f.Advice, "17 digits")
	}
	if !said {
		t.Errorf("no advice to write 17 digits:%s", rules(short))
	}
}
