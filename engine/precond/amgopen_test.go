package precond

import (
	"context"
	"errors"
	"os"
	"path/filepath"
	"testing"

	"dwindle/engine/load"
)

// On definite matrices from practice the hierarchy exists and conjugate
// gradients converge; where the constants are the smooth vectors, in fewer
// steps than the 103 that ic:0 takes on 494_bus. On the 0/1 matrix jagmesh7,
// which is indefinite, aggregation meets a negative diagonal entry.
func TestAMGOpenMatrices(t *testing.T) {
	dir := os.Getenv("DWINDLE_OPEN")
	if dir == "" {
		t.Skip("DWINDLE_OPEN is not set: the folder with the open matrices")
	}
	for _, c := range []struct {
		file string
		most int
	}{
		{"494_bus.mtx", 60}, {"pts5ldd03.mtx", 2}, {"bcsstk16.mtx.gz", 90},
	} {
		s, err := load.File(context.Background(), filepath.Join(dir, c.file), nil)
		if err != nil {
			t.Fatal(err)
		}
		a := s.Matrix()
		checkEstimate(t, c.file, a)
		for _, kind := range kinds[:2] {
			m, _ := made(t, a, kind)
			if k := steps(m, a, constants(a.NRows), 1e-8); k > c.most {
				t.Errorf("%s on %s: %d iterations, want at most %d", kind, c.file, k, c.most)
			}
		}
	}
	s, err := load.File(context.Background(), filepath.Join(dir, "jagmesh7.mtx"), nil)
	if err != nil {
		t.Fatal(err)
	}
	var b *Breakdown
	if _, _, err := tryMake(t, s.A, "amg"); !errors.As(err, &b) || !(b.Pivot < 0) {
		t.Errorf("jagmesh7: %v", err)
	}
}
