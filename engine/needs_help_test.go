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
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// The symptoms of slow and failing solves, one test each. Numbers marked [V]
// were computed with NumPy 1.24 and SciPy 1.10 in double precision from the
// same data; all others come from the closed form or the paper named beside
// them.

// mustSay returns the finding of a rule on a subject ("" is any), which must have
// this weight and certainty and whose claim must hold every one of words.
func mustSay(t *testing.T, v Snapshot, rule, subject string, w diagnose.Weight, c inspect.Certainty, words ...string) diagnose.Finding {
	t.Helper()
	f, ok := finding(v, rule, subject)
	if !ok {
		t.Fatalf("no finding %s on %q:%s", rule, subject, rules(v))
	}
	if f.Weight != w || f.Certainty != c {
		t.Errorf("%s is a %s, %s; want a %s, %s: %s", rule, f.Weight, f.Certainty, w, c, f.Claim)
	}
	for _, word := range words {
		if !strings.Contains(f.Claim, word) {
			t.Errorf("%s does not say %q: %s", rule, word, f.Claim)
		}
	}
	if len(f.Evidence) == 0 {
		t.Errorf("%s has no evidence", rule)
	}
	t.Logf("%s %s %s [%s]: %s | %s | try %v", f.Weight, f.Certainty, f.Rule, f.Subject, f.Claim, f.Advice, f.Try)
	return f
}

// silent fails for each of the rules that has spoken.
func silent(t *testing.T, v Snapshot, names ...string) {
	t.Helper()
	for _, name := range names {
		if f, ok := finding(v, name, ""); ok {
			t.Errorf("false alarm %s [%s]: %s", f.Rule, f.Subject, f.Claim)
		}
	}
}

// evidence returns the first number of a finding whose quantity holds a word.
func evidence(t *testing.T, f diagnose.Finding, word string) diagnose.Evidence {
	t.Helper()
	for _, e := range f.Evidence {
		if strings.Contains(e.Quantity, word) {
			return e
		}
	}
	t.Fatalf("%s has no evidence on %q: %v", f.Rule, word, f.Evidence)
	return diagnose.Evidence{}
}

// within fails unless got is within a share of want.
func within(t *testing.T, what string, got, want, share float64) {
	t.Helper()
	if !(math.Abs(got-want) <= share*math.Abs(want)) {
		t.Errorf("%s is %g, want %g within %.2g of it", what, got, want, share)
	}
}

// trial returns the history of a pairing.
func trial(t *testing.T, v Snapshot, pairing string) trace.History {
	t.Helper()
	for _, u := range v.Trials {
		if u.History.Pairing == pairing {
			return u.History
		}
	}
	t.Fatalf("no trial %s", pairing)
	return trace.History{}
}

// vector writes numbers to a file, one a line, and returns its path.
func vector(t *testing.T, x ...float64) string {
	t.Helper()
	var b strings.Builder
	for _, v := range x {
		fmt.Fprintf(&b, "%.17g\n", v)
	}
	path := filepath.Join(t.TempDir(), "x.txt")
	if err := os.WriteFile(path, []byte(b.String()), 0o644); err != nil {
		t.Fatal(err)
	}
	return path
}

// dense writes a small matrix given by rows, and returns its path.
func dense(t *testing.T, rows ...[]float64) string {
	t.Helper()
	var e []linear.Entry
	for i, row := range rows {
		for j, v := range row {
			if v != 0 {
				e = append(e, linear.Entry{I: i, J: j, V: v})
			}
		}
	}
	return saved(t, "a.mtx", linear.FromEntries(len(rows), len(rows), e))
}

// diagonalFile writes a diagonal matrix and returns its path.
func diagonalFile(t *testing.T, d ...float64) string {
	t.Helper()
	e := make([]linear.Entry, len(d))
	for i, v := range d {
		e[i] = linear.Entry{I: i, J: i, V: v}
	}
	return saved(t, "d.mtx", linear.FromEntries(len(d), len(d), e))
}

// repeated is a vector of n equal numbers.
func repeated(n int, v float64) []float64 {
	x := make([]float64, n)
	for i := range x {
		x[i] = v
	}
	return x
}

// matrixOf reads the matrix of a source.
func matrixOf(t *testing.T, source string) *linear.CSR {
	t.Helper()
	s, err := read(t.Context(), source, nil, 0, nil)
	if err != nil {
		t.Fatal(err)
	}
	return s.Matrix()
}

// entriesOf lists the entries of a matrix.
func entriesOf(a *linear.CSR) (e []linear.Entry) {
	for i := 0; i < a.NRows; i++ {
		cols, vals := a.Row(i)
		for k, c := range cols {
			e = append(e, linear.Entry{I: i, J: int(c), V: vals[k]})
		}
	}
	return e
}

// fromEntries makes a square matrix of order n.
func fromEntries(n int, e []linear.Entry) *linear.CSR { return linear.FromEntries(n, n, e) }
