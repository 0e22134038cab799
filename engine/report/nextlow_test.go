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

// A value of a subspace that is not proved to stand beside zeros is not called
// next to them: it need not have settled.
func TestNextIsNotTakenFromASubspace(t *testing.T) {
	f := &inspect.Facts{N: 1000, Singular: inspect.Fact{Answer: inspect.Yes}, Study: &inspect.Study{Nullity: 1}}
	x := inspect.Spectrum{Of: "A", How: "lanczos", Certainty: inspect.Estimated, Smallest: 1e-18, Largest: 4, Low: []float64{1e-18, 0.3}}
	if s := spectrumText(x, f); strings.Contains(s, "next") {
		t.Error(s)
	}
	x.Zeros = 1
	if s := spectrumText(x, f); !strings.Contains(s, "0 (proved), next 0.3,") {
		t.Error(s)
	}
	if f.Study.Nullity = 2; strings.Contains(spectrumText(x, f), "next") {
		t.Error(spectrumText(x, f))
	}
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
