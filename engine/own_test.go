package engine

import (
	"context"
	"os"
	"path/filepath"
	"testing"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// saved writes a matrix in general form and returns its path.
func saved(t *testing.T, name string, a *linear.CSR) string {
	t.Helper()
	path := filepath.Join(t.TempDir(), name)
	f, err := os.Create(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	if err := linear.WriteMatrixMarket(f, a, false, nil); err != nil {
		t.Fatal(err)
	}
	return path
}

// Matrices of the user's own do what the built ones do: M⁻¹ = D⁻¹ in a file is
// jacobi, the factors of a triangular matrix solve with it, and a
// preconditioner built from a copy of A is the one built from A.
func TestYourOwnPreconditioners(t *testing.T) {
	s, err := read(context.Background(), "sample:feeder", nil, 0, nil)
	if err != nil {
		t.Fatal(err)
	}
	a := s.Matrix()
	n := a.NRows
	d := make([]float64, n)
	a.Diagonal(d)
	var inverse, lower, upper []linear.Entry
	for i := range d {
		inverse = append(inverse, linear.Entry{I: i, J: i, V: 1 / d[i]})
		cols, vals := a.Row(i)
		for k, c := range cols { // M = (D+L) D⁻¹ (D+U), which is ssor with omega 1
			switch {
			case int(c) < i:
				lower = append(lower, linear.Entry{I: i, J: int(c), V: vals[k]})
			case int(c) > i:
				upper = append(upper, linear.Entry{I: i, J: int(c), V: vals[k] / d[i]})
			}
		}
		lower = append(lower, linear.Entry{I: i, J: i, V: d[i]})
		upper = append(upper, linear.Entry{I: i, J: i, V: 1})
	}
	for _, c := range []struct{ own, built string }{
		{"cg+given:" + saved(t, "inverse.mtx", linear.FromEntries(n, n, inverse)), "cg+jacobi"},
		{"cg+factors:" + saved(t, "l.mtx", linear.FromEntries(n, n, lower)) + "," + saved(t, "u.mtx", linear.FromEntries(n, n, upper)), "cg+ssor"},
		{"cg+from:" + saved(t, "a.mtx", a) + "/ic:0", "cg+ic:0"},
	} {
		v := ended(t, "sample:feeder", Options{Pairs: []string{c.own, c.built}})
		own, built := v.Trials[0].History, v.Trials[1].History
		if own.Stop != trace.Converged {
			t.Errorf("%s ends %s: %s", own.Pairing, own.Stop, own.Reason)
		}
		if d := own.Iterations - built.Iterations; d > built.Iterations/50 || -d > built.Iterations/50 {
			t.Errorf("%s takes %d iterations, %s %d", own.Pairing, own.Iterations, built.Pairing, built.Iterations)
		}
		if len(v.Findings) > 0 && v.Findings[0].Weight == "blocker" {
			t.Errorf("%s: %s", own.Pairing, v.Findings[0].Claim)
		}
	}
}

// M = D in a file, solved, is jacobi; M = A is a direct solve; M = D + L is gs.
func TestYourOwnMatrixSolved(t *testing.T) {
	s, err := read(context.Background(), "sample:plate:20", nil, 0, nil)
	if err != nil {
		t.Fatal(err)
	}
	a := s.Matrix()
	part := func(keep func(i, j int) bool) *linear.CSR {
		var e []linear.Entry
		for i := range a.NRows {
			cols, vals := a.Row(i)
			for k, c := range cols {
				if keep(i, int(c)) {
					e = append(e, linear.Entry{I: i, J: int(c), V: vals[k]})
				}
			}
		}
		return linear.FromEntries(a.NRows, a.NRows, e)
	}
	for _, c := range []struct{ own, built string }{
		{"cg+solve:" + saved(t, "m.mtx", part(func(i, j int) bool { return i == j })), "cg+jacobi"},
		{"richardson+solve:" + saved(t, "a.mtx", a), "richardson+cholesky"},
		{"gmres:30+solve:" + saved(t, "lower.mtx", part(func(i, j int) bool { return j <= i })), "gmres:30+gs"},
	} {
		v := ended(t, "sample:plate:20", Options{Pairs: []string{c.own, c.built}})
		own, built := v.Trials[0].History, v.Trials[1].History
		if own.Stop != trace.Converged || own.Iterations != built.Iterations {
			t.Errorf("%s ends %s after %d iterations, %s after %d", own.Pairing, own.Stop, own.Iterations, built.Pairing, built.Iterations)
		}
	}
}

func TestYourOwnPreconditionersCanBeWrong(t *testing.T) {
	wrong := saved(t, "small.mtx", linear.FromEntries(2, 2, []linear.Entry{{I: 0, J: 0, V: 1}, {I: 1, J: 1, V: 1}}))
	for pairing, want := range map[string]trace.Stop{
		"cg+given:" + wrong:                  trace.BrokeDown,
		"cg+given:no/such.mtx":               trace.BrokeDown,
		"cg+from:" + wrong + "/ic:0":         trace.BrokeDown,
		"cg+solve:" + wrong:                  trace.BrokeDown,
		"scale/cg+given:" + wrong:            trace.Refused,
		"cg+factors:" + wrong + "," + wrong:  trace.BrokeDown,
		"scale/cg+from:" + wrong + "/jacobi": trace.Refused,
	} {
		h := only(t, ended(t, "sample:plate:5", Options{Pairs: []string{pairing}}))
		if h.Stop != want || h.Reason == "" {
			t.Errorf("%s ends %s (%s), want %s", pairing, h.Stop, h.Reason, want)
		}
	}
}

// A preconditioner of the shifted system is the one built from A + σ diag A;
// the answer is that of A.
func TestShiftedPreconditioner(t *testing.T) {
	s, err := read(context.Background(), "sample:kershaw", nil, 0, nil)
	if err != nil {
		t.Fatal(err)
	}
	a := *s.Matrix()
	a.Val = append([]float64(nil), a.Val...)
	for i := range a.NRows {
		for k := a.Ptr[i]; k < a.Ptr[i+1]; k++ {
			if int(a.Col[k]) == i {
				a.Val[k] *= 1.3 // pivots stay positive (reference: Kershaw 1978, last pivot 1.2797 at 0.3)
			}
		}
	}
	v := ended(t, "sample:kershaw", Options{Pairs: []string{"shift:0.3/cg+ic:0", "cg+from:" + saved(t, "a.mtx", &a) + "/ic:0"}})
	own, built := v.Trials[0].History, v.Trials[1].History
	if own.Stop != trace.Converged || own.Iterations != built.Iterations || own.Notes.MinPivot != built.Notes.MinPivot || own.Notes.Shift != 0 {
		t.Errorf("%s ends %s after %d iterations, smallest pivot %g; %s after %d, %g", own.Pairing, own.Stop, own.Iterations,
			own.Notes.MinPivot, built.Pairing, built.Iterations, built.Notes.MinPivot)
	}
}
