package report

import (
	"context"
	"strings"
	"testing"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
)

// loosePath is the Laplacian of a path of 5 nodes, and c times 3E(0) − E(−1) −
// E(1) of order 4 beside it.
func loosePath(c float64) linear.System {
	var out []linear.Entry
	add := func(i, j int, v float64) {
		out = append(out, linear.Entry{I: i, J: j, V: v}, linear.Entry{I: j, J: i, V: v})
	}
	for i := range 4 {
		add(i, i, 0.5)
		add(i+1, i+1, 0.5)
		add(i, i+1, -1)
		add(5+i, 5+i, 1.5*c)
		if i > 0 {
			add(5+i, 4+i, -c)
		}
	}
	a := linear.FromEntries(9, 9, out)
	return linear.System{Name: "path", A: a, B: []float64{1, -1, 0, 0, 0, 1, 1, 1, 1}, Digits: 17}
}

// Beside the zero of the constants the path has 4 sin²(π/10) = 0.382 next, and
// the other part the eigenvalues c (3 − 2cos(kπ/5)), from 1.38 c on. Where c is
// below all rounding these are lost, and 0.382 is not next.
func TestWhatIsLostIsNotSkipped(t *testing.T) {
	for c, want := range map[float64]string{1: "of A: 0 (proved), next 0.382, to 4.62", 0.01: "of A: 0 (proved), next 0.0138, to 3.62", 1e-18: "of A: 0 (proved) to 3.62"} {
		s := loosePath(c)
		f, err := inspect.Inspect(context.Background(), s, nil)
		if err == nil {
			f, err = inspect.Examine(context.Background(), s, f, inspect.Quick, nil)
		}
		if err != nil {
			t.Fatal(err)
		}
		got := spectrumText(*f.Study.Raw, f)
		if !strings.HasPrefix(got, want) || strings.Contains(got, "beside the zero") != (c > 1e-10) {
			t.Errorf("c = %g: %s, want %s", c, got, want)
		}
	}
}
