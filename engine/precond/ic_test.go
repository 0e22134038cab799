package precond

import (
	"context"
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// Kershaw, J. Comput. Phys. 26 (1978): the pivots are 3, 5/3, 0.6, −5.
func TestKershawPivots(t *testing.T) {
	w := newICWork(kershaw())
	row, err := w.factor(context.Background(), 0, nil)
	if err != nil || row != 3 {
		t.Fatalf("breaks in row %d (%v), want 3", row, err)
	}
	for i, want := range []float64{3, 5.0 / 3, 0.6, -5} {
		near(t, "pivot", w.pivots[i], want, 1e-12)
	}
	// A + 0.1 diag A leaves the last pivot −0.802, A + 0.3 diag A gives
	// 1.2797 (NumPy, dense, on the same pattern).
	for alpha, want := range map[float64]float64{0.1: -0.802, 0.3: 1.2797} {
		if _, err := w.factor(context.Background(), alpha, nil); err != nil {
			t.Fatal(err)
		}
		near(t, "last pivot", w.pivots[3], want, 5e-4)
	}
}

// The shift found works, the smallest failing one tried is less than 16 %
// below, and every failed attempt is noted.
func TestKershawShift(t *testing.T) {
	m, notes := made(t, kershaw(), "ic:0")
	if p := notes.Broke[0]; p.Row != 3 || p.Shift != 0 || math.Abs(p.Value+5) > 1e-12 {
		t.Errorf("first attempt noted as %+v", p)
	}
	failed := 0.0
	w := newICWork(kershaw())
	for _, p := range notes.Broke {
		if row, _ := w.factor(context.Background(), p.Shift, nil); row != p.Row {
			t.Errorf("shift %g breaks in row %d, noted %d", p.Shift, row, p.Row)
		}
		failed = max(failed, p.Shift)
	}
	if row, _ := w.factor(context.Background(), notes.Shift, nil); row >= 0 {
		t.Errorf("shift %g does not work", notes.Shift)
	}
	if notes.Shift <= failed || notes.Shift > 1.17*failed {
		t.Errorf("shift %g, largest that failed %g", notes.Shift, failed)
	}
	if len(notes.Broke) > 11 {
		t.Errorf("%d failed attempts", len(notes.Broke))
	}
	var e mat.EigenSym
	if !e.Factorize(symmetrised(inverse(m, 4)), false) || e.Values(nil)[0] <= 0 {
		t.Errorf("M⁻¹ is not positive definite: %v", e.Values(nil))
	}
}

// By definition L D Lᵀ equals A on A's pattern.
func TestICReproducesPattern(t *testing.T) {
	for _, a := range []*linear.CSR{plate(9), line(30, -1, 2, -1)} {
		m, notes := made(t, a, "ic:0")
		if len(notes.Broke) != 0 || notes.Shift != 0 {
			t.Errorf("an M-matrix needed a shift: %+v", notes)
		}
		onPattern(t, m.(*factors), a, 1e-13)
	}
}

// onPattern multiplies L D R out and compares with a on its pattern.
func onPattern(t *testing.T, f *factors, a *linear.CSR, tol float64) {
	t.Helper()
	n := a.NRows
	l, r := dense(f.lower), dense(f.upper)
	for i := 0; i < n; i++ {
		l.Set(i, i, 1)
		for j := i; j < n; j++ {
			r.Set(i, j, r.At(i, j)/f.inverse[i])
		}
		r.Set(i, i, 1/f.inverse[i])
	}
	var p mat.Dense
	p.Mul(l, r)
	for i := 0; i < n; i++ {
		cols, vals := a.Row(i)
		for k, c := range cols {
			near(t, "entry of LDR", p.At(i, int(c)), vals[k], tol)
		}
	}
}

// Condition numbers of M⁻¹A for the 5-point operator, recomputed with NumPy
// in double precision.
func TestConditionOfPreconditioned(t *testing.T) {
	grids := []int{8, 16, 32}
	if testing.Short() {
		grids = grids[:2]
	}
	optimal := func(n int) string {
		return "ssor:" + formatted(2/(1+math.Sin(math.Pi/float64(n+1))))
	}
	want := map[int][3]float64{8: {3.6837, 4.8541, 2.6384}, 16: {11.1445, 15.4069, 4.6062}, 32: {39.8108, 55.9468, 8.5520}}
	for _, n := range grids {
		a := plate(n)
		for k, written := range []string{"ic:0", "ssor:1", optimal(n)} {
			m, _ := made(t, a, written)
			near(t, written+" condition", condition(t, m, a), want[n][k], 1e-4/want[n][k])
		}
	}
}

// condition returns λmax/λmin of M⁻¹A from the similar matrix CᵀAC, where
// M⁻¹ = C Cᵀ.
func condition(t *testing.T, m linear.Applier, a *linear.CSR) float64 {
	t.Helper()
	var ch mat.Cholesky
	if !ch.Factorize(symmetrised(inverse(m, a.NRows))) {
		t.Fatal("M⁻¹ is not positive definite")
	}
	var c mat.TriDense
	ch.LTo(&c)
	var ac, cac mat.Dense
	ac.Mul(dense(a), &c)
	cac.Mul(c.T(), &ac)
	var e mat.EigenSym
	if !e.Factorize(symmetrised(&cac), false) {
		t.Fatal("no eigenvalues")
	}
	v := e.Values(nil)
	return v[len(v)-1] / v[0]
}

// symmetrised returns the mean of d and dᵀ.
func symmetrised(d *mat.Dense) *mat.SymDense {
	n, _ := d.Dims()
	s := mat.NewSymDense(n, nil)
	for i := 0; i < n; i++ {
		for j := i; j < n; j++ {
			s.SetSym(i, j, (d.At(i, j)+d.At(j, i))/2)
		}
	}
	return s
}

// On the 5-point operator the pivots tend to 2+√2 (fixed point of
// d = 4 − 2/d).
func TestICPivotLimit(t *testing.T) {
	_, notes := made(t, plate(60), "ic:0")
	near(t, "smallest pivot", notes.MinPivot, 2+math.Sqrt2, 1e-9)
}

func TestICRefusesDiagonal(t *testing.T) {
	_, _, err := tryMake(t, fromRows([][]float64{{1, 0}, {0, -1}}), "ic:0")
	broke(t, err, 1)
	_, _, err = tryMake(t, fromRows([][]float64{{0, 1}, {1, 1}}), "ic:0")
	broke(t, err, 0)
}

// A zero row sum makes the last pivot rounding noise (the matrix is singular):
// it is not taken for a pivot.
func TestICOnSingular(t *testing.T) {
	a := line(50, -1, 2, -1)
	a.Val[0], a.Val[len(a.Val)-1] = 1, 1
	_, notes := made(t, a, "ic:0")
	if len(notes.Broke) == 0 || notes.Broke[0].Row != 49 || notes.Shift == 0 {
		t.Errorf("notes %+v", notes)
	}
}
