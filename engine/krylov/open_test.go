package krylov_test

import (
	"context"
	"math"
	"os"
	"path/filepath"
	"testing"

	"dwindle/engine/linear"
	"dwindle/engine/load"
)

// opened loads one of the open matrices, or skips.
func opened(t *testing.T, name string) *linear.CSR {
	t.Helper()
	dir := os.Getenv("DWINDLE_OPEN")
	if dir == "" {
		t.Skip("DWINDLE_OPEN is not set: the open matrices are left out")
	}
	s, err := load.File(context.Background(), filepath.Join(dir, name), nil)
	if err != nil {
		t.Fatal(err)
	}
	return s.Matrix()
}

// Iterations to a recursive ‖r‖₂/‖b‖₂ ≤ 1e-6 with b = 1, as found with a plain
// NumPy implementation; 494_bus moves most with the order of summation.
func TestIterationsOnOpenMatrices(t *testing.T) {
	for _, c := range []struct {
		file, pairing string
		want          int
		slack         float64
	}{
		{"bcsstk01.rsa", "cg", 136, 0.02},
		{"bcsstk01.rsa", "cg+jacobi", 47, 0.02},
		{"494_bus.mtx", "cg", 1186, 0.05},
		{"494_bus.mtx", "cg+jacobi", 407, 0.02},
		{"bcsstk16.mtx.gz", "cg", 463, 0.02},
		{"bcsstk16.mtx.gz", "cg+jacobi", 172, 0.02},
		{"LFAT5.mtx", "cg", 25, 0.02},
		{"LFAT5.mtx", "cg+jacobi", 10, 0.02},
		{"pts5ldd03.mtx", "cg", 29, 0.02},
		{"pts5ldd03.mtx", "cg+jacobi", 29, 0.02},
		{"bcsstk13.mtx.gz", "cg+jacobi", 1447, 0.02},
		{"pts5ldd03.mtx", "gmres:30", 29, 0.02},
		{"LFAT5.mtx", "gmres:30", 12, 0.02},
	} {
		t.Run(c.file+" "+c.pairing, func(t *testing.T) {
			a := opened(t, c.file)
			r := begun(t, a, ones(a.NRows), nil, c.pairing)
			got := r.until(1e-6, 4*c.want)
			if off := math.Abs(float64(got - c.want)); off > math.Max(2, c.slack*float64(c.want)) {
				t.Errorf("%d iterations, want %d", got, c.want)
			}
			t.Logf("%d iterations (%d), true residual %.2e", got, c.want, r.truth()/linear.Norm2(r.b))
			if len(r.seen) != 0 {
				t.Errorf("events %+v", r.seen)
			}
		})
	}
}
