package prepare_test

import (
	"context"
	"math"
	"os"
	"path/filepath"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
	"dwindle/engine/load"
	"dwindle/engine/prepare"
)

// condition is the 2-norm condition number by a dense singular value
// decomposition.
func condition(a *linear.CSR) float64 {
	d := mat.NewDense(a.NRows, a.NCols, nil)
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, j := range cols {
			d.Set(i, int(j), vals[k])
		}
	}
	var s mat.SVD
	s.Factorize(d, mat.SVDNone)
	return s.Cond()
}

// The raw condition numbers, and those after equilibration in the maximum norm
// (22.96 for arc130, 1.75e6 for west0479, about 2e6 for reorientation_1; the
// Jacobi-scaled 78952.6 for 494_bus and 1360.707 for bcsstk01, whose largest
// entries lie on the diagonal), were computed once with NumPy from the same
// files. The raw value of reorientation_1 is beyond double precision.
func TestConditionAfterScaling(t *testing.T) {
	dir := os.Getenv("DWINDLE_OPEN")
	if dir == "" {
		t.Skip("DWINDLE_OPEN does not name the folder of open matrices")
	}
	for _, c := range []struct {
		file                      string
		rawLow, rawHigh, low, top float64
	}{
		{"arc130.rua", 6.05421e10, 6.05422e10, 22.8, 23.2},
		{"west0479.mtx", 3.252e11, 3.253e11, 1.74e6, 1.76e6},
		{"reorientation_1.mtx", 1e16, 1e30, 1.5e6, 2.5e6},
		{"494_bus.mtx", 2.4154e6, 2.4155e6, 78900, 79000},
		{"bcsstk01.rsa", 8.8233e5, 8.8234e5, 1360.6, 1360.8},
	} {
		s, err := load.File(context.Background(), filepath.Join(dir, c.file), nil)
		if err != nil {
			t.Fatal(err)
		}
		s.B = make([]float64, s.N())
		e, _ := prepare.Lookup("scale")
		p, _, err := e.Apply(context.Background(), s, linear.Values{})
		if err != nil {
			t.Fatal(err)
		}
		raw, scaled := condition(s.Matrix()), condition(p.Matrix())
		t.Logf("%s: %.4g raw, %.4g scaled", c.file, raw, scaled)
		if raw < c.rawLow || raw > c.rawHigh || scaled < c.low || scaled > c.top {
			t.Errorf("%s: condition %.4g raw, %.4g scaled", c.file, raw, scaled)
		}
	}
}

// west0479 has 471 zeros on its diagonal; matched, none, and every other entry
// is at most 1 (Duff and Koster 2001).
func TestMatchOnOpenMatrices(t *testing.T) {
	dir := os.Getenv("DWINDLE_OPEN")
	if dir == "" {
		t.Skip("DWINDLE_OPEN does not name the folder of open matrices")
	}
	for _, file := range []string{"west0479.mtx", "west0067.rua", "arc130.rua", "fs_183_1.mtx", "rajat19.mtx", "reorientation_1.mtx"} {
		s, err := load.File(context.Background(), filepath.Join(dir, file), nil)
		if err != nil {
			t.Fatal(err)
		}
		s.B = make([]float64, s.N())
		e, _ := prepare.Lookup("match")
		p, _, err := e.Apply(context.Background(), s, linear.Values{})
		if err != nil {
			t.Fatal(err)
		}
		m := p.Matrix()
		if file == "west0479.mtx" || file == "arc130.rua" {
			t.Logf("%s: condition %.4g raw, %.4g matched", file, condition(s.Matrix()), condition(m))
		}
		for i := range m.NRows {
			if d := math.Abs(m.At(i, i)); math.Abs(d-1) > 1e-11 {
				t.Fatalf("%s: diagonal entry %d has magnitude %.15g", file, i+1, d)
			}
			if _, vals := m.Row(i); linear.NormInf(vals) > 1+1e-11 {
				t.Fatalf("%s: row %d has an entry of magnitude %.15g", file, i+1, linear.NormInf(vals))
			}
		}
	}
}
