package direct

import (
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

func factoredLU(t *testing.T, a *linear.CSR, how Ordering) *LU {
	t.Helper()
	f, err := FactorLU(context.Background(), a, PlanLU(a, how), nil)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// unsymmetric is a random sparse matrix; with diagonal, none of whose diagonal
// entries is missing.
func unsymmetric(rng *rand.Rand, n int, diagonal bool) *linear.CSR {
	var e []linear.Entry
	p := rng.Perm(n)
	for i := range n {
		if diagonal {
			p[i] = i
		}
		e = append(e, linear.Entry{I: i, J: p[i], V: 1 + rng.Float64()})
		for range 3 {
			e = append(e, linear.Entry{I: i, J: rng.IntN(n), V: 2 * rng.NormFloat64()})
		}
	}
	return linear.FromEntries(n, n, e)
}

// product multiplies the factors out: Dr⁻¹ Pᵀ L U Qᵀ Dc⁻¹.
func (f *LU) product() *mat.Dense {
	n := f.n
	l, u := mat.NewDense(n, n, nil), mat.NewDense(n, n, nil)
	for k := range n {
		l.Set(k, k, 1)
		u.Set(k, k, f.diag[k])
		for p := f.l.ptr[k]; p < f.l.ptr[k+1]; p++ {
			l.Set(int(f.l.row[p]), k, f.l.val[p])
		}
		for p := f.u.ptr[k]; p < f.u.ptr[k+1]; p++ {
			u.Set(int(f.u.row[p]), k, f.u.val[p])
		}
	}
	var lu mat.Dense
	lu.Mul(l, u)
	a := mat.NewDense(n, n, nil)
	for k, i := range f.rows {
		for q, j := range f.cols {
			a.Set(int(i), int(j), lu.At(k, q)/f.left[i]/f.right[j])
		}
	}
	return a
}

// The factors multiply out to A, no multiplier exceeds 1/τ, entries are as
// planned or fewer, and both solves agree with gonum's dense LU.
func TestLUFactors(t *testing.T) {
	rng := rand.New(rand.NewPCG(2, 2))
	cases := []*linear.CSR{grid(9), box(4)}
	for n := range 40 {
		cases = append(cases, unsymmetric(rng, 1+rng.IntN(90), n%2 == 0))
	}
	for n, a := range cases {
		for _, how := range Orderings {
			plan := PlanLU(a, Ordering(how))
			f := factoredLU(t, a, Ordering(how))
			want := denseOf(a)
			var d mat.Dense
			d.Sub(f.product(), want)
			if err := mat.Norm(&d, 1) / mat.Norm(want, 1); !(err < 1e-13) {
				t.Errorf("case %d, %s: residual of the factors %g", n, how, err)
			}
			if m := linear.NormInf(f.l.val); m > 1/pivotShare {
				t.Errorf("case %d, %s: multiplier %g", n, how, m)
			}
			if (!plan.Diagonal || f.OffDiagonal == 0) && f.Entries() > plan.Entries {
				t.Errorf("case %d, %s: %d entries, predicted at most %d", n, how, f.Entries(), plan.Entries)
			}
			againstDense(t, a, f)
		}
	}
}

func againstDense(t *testing.T, a *linear.CSR, f *LU) {
	t.Helper()
	n := a.NRows
	b, x, y := make([]float64, n), make([]float64, n), make([]float64, n)
	linear.Uniform(b, 3)
	f.Solve(x, b)
	f.SolveT(y, b)
	if err := componentwise(a, x, b); !(err < 1e-11) {
		t.Errorf("componentwise error %g", err)
	}
	if err := componentwise(a.Transpose(), y, b); !(err < 1e-11) {
		t.Errorf("componentwise error %g of the transpose", err)
	}
	var lu mat.LU
	lu.Factorize(denseOf(a))
	var z mat.VecDense
	if err := lu.SolveVecTo(&z, false, mat.NewVecDense(n, b)); err != nil {
		return // gonum calls it ill-conditioned; the backward error above decides
	}
	for i := range x {
		if math.Abs(z.AtVec(i)-x[i]) > 1e-14*lu.Cond()*linear.NormInf(x) {
			t.Errorf("x_%d is %g, dense %g", i, x[i], z.AtVec(i))
			return
		}
	}
}

// Every open matrix of unsymmetric kind, and some symmetric: componentwise
// errors after one step of refinement.
func TestOpenLU(t *testing.T) {
	for _, c := range []struct {
		name string
		tol  float64
	}{{"west0067.rua", 1e-14}, {"west0479.mtx", 1e-14}, {"arc130.rua", 1e-14}, {"fs_183_1.mtx", 1e-14}, {"olm1000.mtx", 1e-14},
		{"cryg2500.mtx", 1e-14}, {"watt_2.mtx", 1e-14}, {"bfwa62.mtx", 1e-14}, {"rajat19.mtx", 1e-14},
		{"bcsstk13.mtx.gz", 1e-14}, {"reorientation_1.mtx", 1e-14}} {
		a := openMatrix(t, c.name)
		plan := PlanLU(a, AMD)
		f := factoredLU(t, a, AMD)
		plain, fine := solvedWith(t, a, f), solvedWith(t, a, Refine(a, f, a.NRows, 2))
		t.Logf("%s: diagonal %v, %d of %d entries, %d pivots off the diagonal, componentwise error %.2g, refined %.2g",
			c.name, plan.Diagonal, f.Entries(), plan.Entries, f.OffDiagonal, plain, fine)
		if !(fine < c.tol) {
			t.Errorf("%s: componentwise error %g", c.name, fine)
		}
	}
}

func TestLUBreaksDown(t *testing.T) {
	ring := linear.FromEntries(3, 3, []linear.Entry{{I: 0, J: 0, V: 1}, {I: 0, J: 1, V: -1}, {I: 1, J: 1, V: 1}, {I: 1, J: 2, V: -1},
		{I: 2, J: 2, V: 1}, {I: 2, J: 0, V: -1}})
	empty := linear.FromEntries(3, 3, []linear.Entry{{I: 0, J: 0, V: 1}, {I: 2, J: 2, V: 1}})
	for name, a := range map[string]*linear.CSR{"ring": ring, "empty column": empty} {
		_, err := FactorLU(context.Background(), a, PlanLU(a, AMD), nil)
		var p *PivotError
		if !errors.As(err, &p) || p.Pivot > 1e-15 {
			t.Errorf("%s: %v", name, err)
		}
	}
	big := grid(30)
	small := PlanLU(big, Unmoved)
	small.Entries = 100
	if _, err := FactorLU(context.Background(), big, small, nil); !errors.Is(err, ErrTooLarge) {
		t.Errorf("outgrown: %v", err)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := FactorLU(ctx, big, PlanLU(big, AMD), nil); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
}
