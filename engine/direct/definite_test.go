package direct

import (
	"context"
	"math"
	"math/rand/v2"
	"testing"
	"time"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

func verify(t *testing.T, a *linear.CSR, delta float64) Definiteness {
	t.Helper()
	r, err := VerifiedDefinite(context.Background(), a, delta)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// symmetricOf builds a sparse matrix from the dense lower triangle f.
func symmetricOf(n int, f func(i, j int) float64) *linear.CSR {
	var e []linear.Entry
	for i := range n {
		for j := range i + 1 {
			if v := f(i, j); v != 0 || i == j {
				e = append(e, linear.Entry{I: i, J: j, V: v})
				if i != j {
					e = append(e, linear.Entry{I: j, J: i, V: v})
				}
			}
		}
	}
	return linear.FromEntries(n, n, e)
}

// grid is the 5-point operator of Dirichlet type on k x k points.
func grid(k int) *linear.CSR {
	var e []linear.Entry
	for i := range k * k {
		e = append(e, linear.Entry{I: i, J: i, V: 4})
		if i%k > 0 {
			e = append(e, linear.Entry{I: i, J: i - 1, V: -1}, linear.Entry{I: i - 1, J: i, V: -1})
		}
		if i >= k {
			e = append(e, linear.Entry{I: i, J: i - k, V: -1}, linear.Entry{I: i - k, J: i, V: -1})
		}
	}
	return linear.FromEntries(k*k, k*k, e)
}

func TestGridIsDefinite(t *testing.T) {
	for _, k := range []int{1, 2, 3, 5, 20, 45, 250} {
		if r := verify(t, grid(k), 0); !r.Definite || !r.WithinDelta || r.Negative || r.Row != -1 {
			t.Errorf("grid %d: %+v", k, r)
		}
	}
}

// One spring of stiffness -2.3 between neighbours of a 20 x 20 grid keeps every
// diagonal entry and every 2 x 2 minor positive; the smallest eigenvalue is
// then -0.384 (dense eigenvalues, gonum, below).
func TestHiddenNegativeSpring(t *testing.T) {
	a := grid(20)
	i, j := 210, 211
	for _, e := range []struct {
		i, j int
		v    float64
	}{{i, i, -2.3}, {j, j, -2.3}, {i, j, 2.3}, {j, i, 2.3}} {
		cols, vals := a.Row(e.i)
		for k, c := range cols {
			if int(c) == e.j {
				vals[k] += e.v
			}
		}
	}
	r := verify(t, a, 0)
	if !r.Negative || r.Definite {
		t.Fatalf("%+v", r)
	}
	low := eigenvalues(a)[0]
	if r.Rayleigh < low*(1+1e-10) || r.Rayleigh > 0.8*low {
		t.Errorf("Rayleigh quotient %g, smallest eigenvalue %g", r.Rayleigh, low)
	}
	if math.Abs(low+0.384) > 5e-4 {
		t.Errorf("smallest eigenvalue %g", low)
	}
	if len(r.Rows) < 2 || r.Rows[0]+r.Rows[1] != i+j || r.Rows[0] != i && r.Rows[0] != j {
		t.Errorf("rows %v", r.Rows)
	}
}

func eigenvalues(a *linear.CSR) []float64 {
	n := a.NRows
	s := mat.NewSymDense(n, nil)
	for i := range n {
		cols, vals := a.Row(i)
		for k, j := range cols {
			s.SetSym(i, int(j), vals[k])
		}
	}
	var e mat.EigenSym
	if !e.Factorize(s, false) {
		panic("eigenvalues did not converge")
	}
	return e.Values(nil)
}

// Larger random symmetric matrices shifted to a known distance from
// singularity: where dense eigenvalues are clear of their own error, the
// verdict must agree, and must not be missing.
func TestAgreesWithEigenvalues(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	for range 30 {
		n := 20 + rng.IntN(60)
		g := symmetricOf(n, func(i, j int) float64 {
			if i == j || rng.IntN(6) == 0 {
				return rng.NormFloat64()
			}
			return 0
		})
		shift := -eigenvalues(g)[0] + math.Pow(10, -1-8*rng.Float64())*float64(1-2*rng.IntN(2))
		a := symmetricOf(n, func(i, j int) float64 {
			if i == j {
				return g.At(i, i) + shift
			}
			return g.At(i, j)
		})
		low := eigenvalues(a)[0]
		if r := verify(t, a, 0); r.Definite != (low > 0) || r.Negative != (low < 0) {
			t.Errorf("n=%d, smallest eigenvalue %g: %+v", n, low, r)
		}
	}
}

// An eigenvalue smaller than delta·‖|A|‖ leaves the digits in doubt; a larger
// one does not.
func TestDelta(t *testing.T) {
	near := symmetricOf(2, func(i, j int) float64 {
		if i == j {
			return 1
		}
		return 1 - 1e-7
	})
	if r := verify(t, near, 5e-6); !r.Definite || r.WithinDelta {
		t.Errorf("eigenvalue 1e-7 against digits 5e-6: %+v", r)
	}
	if r := verify(t, near, 5e-9); !r.Definite || !r.WithinDelta {
		t.Errorf("eigenvalue 1e-7 against digits 5e-9: %+v", r)
	}
	past := symmetricOf(2, func(i, j int) float64 {
		if i == j {
			return 1
		}
		return 1 + 1e-7
	})
	if r := verify(t, past, 5e-6); !r.Negative || r.WithinDelta {
		t.Errorf("eigenvalue -1e-7 against digits 5e-6: %+v", r)
	}
	if r := verify(t, past, 5e-9); !r.Negative || !r.WithinDelta {
		t.Errorf("eigenvalue -1e-7 against digits 5e-9: %+v", r)
	}
}

func TestWrongDiagonal(t *testing.T) {
	a := linear.FromEntries(2, 2, []linear.Entry{{I: 0, J: 0, V: 1}, {I: 1, J: 1, V: -1e-9}})
	if r := verify(t, a, 0.1); !r.Negative || !r.WithinDelta || r.Row != 1 || r.Rayleigh != -1e-9 {
		t.Errorf("%+v", r)
	}
	a.Val[1] = 0
	if r := verify(t, a, 0); r.Negative || r.Definite {
		t.Errorf("zero diagonal: %+v", r)
	}
}

func TestExtremeUnits(t *testing.T) {
	a := symmetricOf(3, func(i, j int) float64 {
		u := []float64{1e-140, 1, 1e140}
		if i == j {
			return 2 * u[i] * u[j]
		}
		return u[i] * u[j]
	})
	if r := verify(t, a, 0); !r.Definite {
		t.Errorf("%+v", r)
	}
}

func TestTooLargeAndCancelled(t *testing.T) {
	a := grid(60)
	sym := Predict(a, Best)
	fits := Limits{Work: sym.Work, Bytes: sym.Bytes() + sym.Stack, Rows: 3600}
	if r, err := VerifiedDefiniteWithin(context.Background(), a, 0, fits); err != nil || !r.Definite {
		t.Errorf("%+v, error %v within the exact limits", r, err)
	}
	for _, l := range []Limits{{fits.Work - 1, fits.Bytes, 3600}, {fits.Work, fits.Bytes - 1, 3600}, {fits.Work, fits.Bytes, 3599}} {
		if _, err := VerifiedDefiniteWithin(context.Background(), a, 0, l); err != ErrTooLarge {
			t.Errorf("%+v: err = %v", l, err)
		}
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := VerifiedDefinite(ctx, grid(10), 0); err == nil || err == ErrTooLarge {
		t.Errorf("err = %v after cancellation", err)
	}
}

func TestDenseSpeed(t *testing.T) {
	if testing.Short() {
		t.Skip("long")
	}
	n := 2000
	rng := rand.New(rand.NewPCG(7, 8))
	a := symmetricOf(n, func(i, j int) float64 {
		if i == j {
			return float64(n)
		}
		return rng.Float64() - 0.5
	})
	begun := time.Now()
	r := verify(t, a, 0)
	t.Logf("dense order %d: %v, c = %g", n, time.Since(begun), r.Shift)
	if !r.Definite {
		t.Errorf("%+v", r)
	}
}

// Stiffness and admittance matrices are proved definite (smallest eigenvalues
// by NumPy: 3417, 1.00, 0.0124, 284).
func TestOpenDefinite(t *testing.T) {
	for _, name := range []string{"bcsstk01.rsa", "bcsstk16.mtx.gz", "494_bus.mtx", "bcsstk13.mtx.gz"} {
		begun := time.Now()
		r := verify(t, openMatrix(t, name), 0)
		t.Logf("%s: %v, c = %.3g", name, time.Since(begun), r.Shift)
		if !r.Definite {
			t.Errorf("%s: %+v", name, r)
		}
	}
}
