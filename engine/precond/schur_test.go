package precond

import (
	"context"
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
	"dwindle/samples"
)

// preconditioned builds schur:FORM,exact of the sample of drains and returns the
// eigenvalues of M⁻¹A in rising order of their real parts (dense gonum).
func preconditioned(t *testing.T, s linear.System, form string) []complex128 {
	t.Helper()
	v, err := linear.Resolve("schur", schurEntry.Params, []linear.Arg{{Text: form}, {Text: "exact"}})
	if err != nil {
		t.Fatal(err)
	}
	m, _, err := schurEntry.Build(context.Background(), s, v, nil)
	if err != nil {
		t.Fatal(err)
	}
	n := s.N()
	dense := mat.NewDense(n, n, nil)
	e, ae, x := make([]float64, n), make([]float64, n), make([]float64, n)
	for j := range n {
		clear(e)
		e[j] = 1
		s.A.Apply(ae, e)
		m.Apply(x, ae)
		dense.SetCol(j, x)
	}
	var eig mat.Eigen
	if !eig.Factorize(dense, mat.EigenNone) {
		t.Fatal("no eigenvalues")
	}
	values := eig.Values(nil)
	slices.SortFunc(values, func(a, b complex128) int {
		if real(a) < real(b) {
			return -1
		}
		return 1
	})
	return values
}

// A saddle system whose first block is diagonal, preconditioned by its exact
// blocks, has the eigenvalues 1 and (1 ± √5)/2 alone, and 1 alone with the
// coupling (Murphy, Golub and Wathen, SIAM J. Sci. Comput. 21 (2000) 1969–1972;
// the signs of our second form are those of A).
func TestSchurEigenvalues(t *testing.T) {
	s, err := samples.Build("drains:4")
	if err != nil {
		t.Fatal(err)
	}
	pipes, joints := 24, 15
	low, high := (1-math.Sqrt(5))/2, (1+math.Sqrt(5))/2
	for k, v := range preconditioned(t, s, "diagonal") {
		want := 1.0
		switch {
		case k < joints:
			want = low
		case k >= pipes:
			want = high
		}
		if d := math.Hypot(real(v)-want, imag(v)); d > 1e-8 {
			t.Errorf("form diagonal: eigenvalue %d is %v, want %g", k, v, want)
		}
	}
	for k, v := range preconditioned(t, s, "full") {
		if d := math.Hypot(real(v)-1, imag(v)); d > 1e-7 {
			t.Errorf("form full: eigenvalue %d is %v, want 1", k, v)
		}
	}
}

// Told which unknowns are the second block, schur builds the same M as from the
// zeros of the diagonal; with none of either kind it refuses.
func TestSchurSplit(t *testing.T) {
	s, err := samples.Build("drains:4")
	if err != nil {
		t.Fatal(err)
	}
	v, err := linear.Resolve("schur", schurEntry.Params, []linear.Arg{{Text: "full"}})
	if err != nil {
		t.Fatal(err)
	}
	n := s.N()
	x, y, z := make([]float64, n), make([]float64, n), make([]float64, n)
	linear.Uniform(x, 3)
	for _, dst := range [][]float64{y, z} {
		m, notes, err := schurEntry.Build(context.Background(), s, v, nil)
		if err != nil {
			t.Fatal(err)
		}
		m.Apply(dst, x)
		if notes.Entries == 0 || notes.Bytes == 0 || len(notes.Remarks) != 1 {
			t.Errorf("notes %+v", notes)
		}
		s.Second = make([]bool, n)
		for i := 24; i < n; i++ {
			s.Second[i] = true
		}
	}
	if !slices.Equal(y, z) {
		t.Error("told and found blocks give different results")
	}
	s.Second = make([]bool, n)
	if _, _, err := schurEntry.Build(context.Background(), s, v, nil); err == nil {
		t.Error("an empty block is taken")
	}
}
