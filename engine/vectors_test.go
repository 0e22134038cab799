package engine

import (
	"bytes"
	"context"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"dwindle/engine/linear"
	"dwindle/engine/load"
	"dwindle/engine/report"
	"dwindle/engine/run"
	"dwindle/samples"
)

// vectorsOf runs pairings on a sample and returns A as read back from its
// file, and each vector as read back from its own.
func vectorsOf(t *testing.T, sample string, pairs ...string) (a *linear.CSR, vectors map[string][]float64, comments map[string]string, d report.Document) {
	t.Helper()
	s := Open(context.Background(), samples.Prefix+sample, Options{Pairs: pairs, Vectors: true})
	defer s.Close()
	if err := s.Wait(context.Background()); err != nil {
		t.Fatal(err)
	}
	d = s.Document()
	dir := t.TempDir()
	file := func(name string, write func(*bytes.Buffer) error) string {
		var b bytes.Buffer
		if err := write(&b); err != nil {
			t.Fatal(err)
		}
		path := filepath.Join(dir, name)
		if err := os.WriteFile(path, b.Bytes(), 0o600); err != nil {
			t.Fatal(err)
		}
		return path
	}
	made, err := samples.Build(sample)
	if err != nil {
		t.Fatal(err)
	}
	sys, err := load.File(context.Background(), file("A.mtx", func(b *bytes.Buffer) error { return samples.Write(b, made) }), nil)
	if err != nil {
		t.Fatal(err)
	}
	vectors, comments = map[string][]float64{}, map[string]string{}
	for _, v := range d.Vectors {
		path := file(v.Name+".mtx", func(b *bytes.Buffer) error { return report.WriteVector(b, d, v) })
		back, _, err := load.VectorFile(path, sys.N())
		if err != nil {
			t.Fatal(err)
		}
		if vectors[v.Name] != nil {
			t.Errorf("two vectors named %s", v.Name)
		}
		vectors[v.Name], comments[v.Name] = back, v.Comment
	}
	return sys.Matrix(), vectors, comments, d
}

func product(a *linear.CSR, v []float64) []float64 {
	av := make([]float64, len(v))
	a.Apply(av, v)
	return av
}

// The direction that refutes definiteness does so by itself, multiplied by A
// as it stands in the file; the comment tells the same quotient.
func TestCurvatureVector(t *testing.T) {
	a, vectors, comments, _ := vectorsOf(t, "acoustics:30", "cg+none")
	p := vectors["curvature-cg-none"]
	if p == nil {
		t.Fatalf("only %v", comments)
	}
	if q := linear.Dot(p, product(a, p)) / linear.Dot(p, p); !(q < -1e-6) {
		t.Errorf("p'Ap/p'p = %g", q)
	}
}

// More water goes into the ground than out: the part of b that no pressure can
// carry away is the constant, the mean of b in every row.
func TestUnreachableVector(t *testing.T) {
	a, vectors, comments, d := vectorsOf(t, "seepage:16,b=leaky", "minres+none")
	u := vectors["unreachable"]
	if u == nil {
		t.Fatalf("only %v", comments)
	}
	for i, x := range u {
		if math.Abs(x-0.75/256) > 1e-15 { // 1 in, 0.25 out, over 256 cells
			t.Fatalf("row %d is %g", i+1, x)
		}
	}
	if r := linear.Norm2(product(a.Transpose(), u)); r > 1e-14*linear.Norm2(u) {
		t.Errorf("A'u = %g", r)
	}
	if !strings.Contains(comments["unreachable"], "no x can reach") || d.Facts.Unreachable.Value <= 0 {
		t.Errorf("%q", comments["unreachable"])
	}
}

// The residual that is written is b−Ax of the answer; the slowest direction of
// converged cg lies low in the spectrum. Smallest eigenvalue of the plate:
// 8 sin²(π/2(n+1)), closed form.
func TestLastVectors(t *testing.T) {
	a, vectors, comments, d := vectorsOf(t, "plate:30", "cg+none", "cg+ic:0")
	chosen := report.VectorName(run.ResidualVector, d.Choice.Pairing)
	r := vectors[chosen]
	if r == nil || len(vectors) < 2 {
		t.Fatalf("%v after choosing %s", comments, d.Choice.Pairing)
	}
	ax := product(a, d.Solution)
	for i := range ax {
		if math.Abs(1-ax[i]-r[i]) > 1e-12 { // b is ones
			t.Fatalf("row %d: residual %g, b-Ax %g", i+1, r[i], 1-ax[i])
		}
	}
	v := vectors[report.VectorName(run.SlowestVector, d.Choice.Pairing)]
	q := linear.Dot(v, product(a, v)) / linear.Dot(v, v)
	if least := 8 * math.Pow(math.Sin(math.Pi/62), 2); !(q >= least*(1-1e-9) && q < 100*least) {
		t.Errorf("Rayleigh quotient %g, smallest eigenvalue %g, largest near 8", q, least)
	}
}

// Nobody pays for vectors that were not asked for.
func TestNoVectorsUnasked(t *testing.T) {
	s := Open(context.Background(), samples.Prefix+"acoustics:10", Options{Pairs: []string{"cg+none"}})
	defer s.Close()
	s.Wait(context.Background())
	if d := s.Document(); d.Vectors != nil || d.Trials[0].Vectors != nil {
		t.Error("vectors were kept")
	}
}

// A frame without supports has three rigid motions (closed form): each vector
// written is mapped to zero but for rounding in the products, and so is the part of b that pushes along them.
func TestNullVectors(t *testing.T) {
	a, vectors, comments, _ := vectorsOf(t, "frame:unsupported", "minres+none")
	for _, name := range []string{"null-1", "null-2", "null-3", "unreachable"} {
		v := vectors[name]
		if v == nil {
			t.Fatalf("no %s in %v", name, comments)
		}
		size := 0.0
		for i := range v {
			cols, vals := a.Row(i)
			row := 0.0
			for k, c := range cols {
				row += math.Abs(vals[k] * v[c])
			}
			size = max(size, row)
		}
		if r := linear.NormInf(product(a, v)); !(r <= 1e-13*size) {
			t.Errorf("%s: Av has %g, |A||v| %g", name, r, size)
		}
	}
	if u := vectors["unreachable"]; linear.Norm2(u) < 0.1 {
		t.Errorf("the dead load pushes along no motion: %g", linear.Norm2(u))
	}
}
