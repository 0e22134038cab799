package precond

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// twoGrid returns the two-level cycle on tridiag(−1, 2, −1) of order 2m+1 with
// linear interpolation from every other unknown.
func twoGrid(t *testing.T, m int) *cycle {
	t.Helper()
	n := 2*m + 1
	var e []linear.Entry
	for j := 0; j < m; j++ {
		e = append(e, linear.Entry{I: 2 * j, J: j, V: 0.5}, linear.Entry{I: 2*j + 1, J: j, V: 1}, linear.Entry{I: 2*j + 2, J: j, V: 0.5})
	}
	l, _, err := newLevel(line(n, -1, 2, -1), 0)
	if err != nil {
		t.Fatal(err)
	}
	l.join(linear.FromEntries(n, m, e))
	coarse, _, err := newLevel(linear.Multiply(l.r, linear.Multiply(l.a, l.p)), 1)
	if err != nil {
		t.Fatal(err)
	}
	bottom, err := factorSemidefinite(coarse.a)
	if err != nil {
		t.Fatal(err)
	}
	return &cycle{levels: []*level{l, coarse}, bottom: bottom, sweeps: 1, visits: 1}
}

// Two-grid factors of damped Jacobi, ω = 2/3, before the Galerkin correction
// in one dimension: 1/3, 1/9 for one and two steps (Trottenberg, Oosterlee and
// Schüller, Multigrid (2001), from memory), .0786 for three (computed with
// dense algebra for order 63).
func TestTwoGridJacobi(t *testing.T) {
	const n = 63
	c := twoGrid(t, n/2)
	l := c.levels[0]
	zero, x, r := make([]float64, n), make([]float64, n), make([]float64, n)
	for steps, want := range map[int]float64{1: 1. / 3, 2: 1. / 9, 3: 0.0786} {
		e := mat.NewDense(n, n, nil)
		for j := 0; j < n; j++ {
			clear(x)
			x[j] = 1
			for k := 0; k < steps; k++ {
				l.relax.residual(r, x, zero)
				linear.Axpy(2./3/2, r, x)
			}
			l.relax.residual(l.t, x, zero)
			c.correct(0, x, zero)
			e.SetCol(j, x)
		}
		var eig mat.Eigen
		if !eig.Factorize(e, mat.EigenNone) {
			t.Fatal("no eigenvalues")
		}
		radius := 0.0
		for _, v := range eig.Values(nil) {
			radius = max(radius, cmplx.Abs(v))
		}
		near(t, "two-grid factor", radius, want, 1e-3)
	}
}

// In one dimension the Galerkin correction is exact at the coarse unknowns. A
// Gauss–Seidel sweep down from errors e at the fine ones alone then leaves, at
// the j-th of them, Σ_{2≤k≤j} e_k/4^(j−k+1): the average of two neighbours, row
// after row.
func TestTwoGridGaussSeidel(t *testing.T) {
	const n = 21
	c := twoGrid(t, n/2)
	zero, x, y := make([]float64, n), make([]float64, n), make([]float64, n)
	linear.Uniform(x, 5)
	c.levels[0].relax.residual(c.levels[0].t, x, zero)
	c.correct(0, x, zero)
	for i := 1; i < n; i += 2 {
		near(t, "error at a coarse unknown", x[i], 0, 1e-14)
	}
	c.levels[0].relax.down(y, x, zero)
	want := 0.0
	for i := 2; i < n; i += 2 {
		want = (want + x[i]) / 4
		near(t, "error after the sweep", y[i], want, 1e-14)
	}
}

// The symmetric smoother M⁻¹ = M₁⁻ᵀ(M₁ + M₁ᵀ − A)M₁⁻¹ has eigenvalues of M⁻¹A
// in (0, 1] for every positive definite A and every block length; without the
// added diagonal this strongly coupled one would diverge.
func TestRelaxationConverges(t *testing.T) {
	const n = 40
	r := rand.New(rand.NewPCG(3, 5))
	g := mat.NewDense(n, n/4, nil)
	for i := 0; i < n; i++ {
		for j := 0; j < n/4; j++ {
			g.Set(i, j, r.Float64())
		}
	}
	var full mat.Dense
	full.Mul(g, g.T())
	rows := make([][]float64, n)
	for i := range rows {
		full.Set(i, i, full.At(i, i)+0.1)
		rows[i] = mat.Row(nil, i, &full)
	}
	a := fromRows(rows)
	diag := make([]float64, n)
	a.Diagonal(diag)
	for _, block := range []int{1, 3, 7, n} {
		s := newRelaxation(a, diag, block)
		m := linear.Func{N: n, Do: func(dst, x []float64) {
			u, res := make([]float64, n), make([]float64, n)
			s.first(u, res, x)
			s.residual(dst, u, x)
			for i := range dst {
				near(t, "residual of the first sweep", res[i], dst[i], 1e-12)
			}
			s.up(dst, u, x)
		}}
		low, high := pencil(t, inverse(m, n), dense(a))
		if !(low > 0 && high <= 1+1e-12) {
			t.Errorf("blocks of %d: eigenvalues from %g to %.15g", block, low, high)
		}
	}
}

// With several near-null vectors the tentative prolongation is orthonormal
// and reproduces them from the coarse level: T B_c = B. A vector that is zero
// on an aggregate, or depends on another, is left out there.
func TestTentative(t *testing.T) {
	const n, k = 60, 3
	b := make([]float64, n*k)
	for i := 0; i < n; i++ {
		b[i*k], b[i*k+1] = 1, float64(i)
		if i >= 15 {
			b[i*k+2] = float64(i * i)
		}
	}
	of := make([]int32, n)
	for i := range of {
		of[i] = int32(i / 5)
	}
	of[10], of[11], of[12], of[13] = alone, alone, alone, alone
	g := &aggregation{null: append([]float64(nil), b...), k: k}
	q := g.tentative(of, n/5)
	p := linear.ByRows(n, q.cols(), func(w *linear.RowWork, i int) { q.add(w, i, 1) })
	if want := 2 + 2 + 1 + 9*3; p.NCols != want || len(g.null) != want*k {
		t.Fatalf("%d coarse unknowns, want %d", p.NCols, want)
	}
	product := linear.Multiply(p.Transpose(), p)
	for i := 0; i < p.NCols; i++ {
		for j := 0; j < p.NCols; j++ {
			want := 0.0
			if i == j {
				want = 1
			}
			near(t, "TᵀT", product.At(i, j), want, 1e-13)
		}
	}
	coarse, fine := make([]float64, p.NCols), make([]float64, n)
	for c := 0; c < k; c++ {
		for i := range coarse {
			coarse[i] = g.null[i*k+c]
		}
		p.Apply(fine, coarse)
		for i, v := range fine {
			if of[i] != alone {
				near(t, "T B_c", v, b[i*k+c], 1e-12)
			}
		}
	}
}

// The aggregates cover every coupled row, hold together, and have two rows at
// least.
func TestAggregate(t *testing.T) {
	a := plate(30)
	diag := make([]float64, a.NRows)
	a.Diagonal(diag)
	of, count := (&strength{a: a, square: 0.0064, diag: diag}).aggregate()
	size := make([]int, count)
	for i, j := range of {
		if j < 0 {
			t.Fatalf("row %d is in no aggregate", i)
		}
		size[j]++
		held := false
		cols, _ := a.Row(i)
		for _, c := range cols {
			held = held || int(c) != i && of[c] == j
		}
		if !held {
			t.Errorf("row %d touches no row of its aggregate", i)
		}
	}
	for j, s := range size {
		if s < 2 {
			t.Errorf("aggregate %d has %d rows", j, s)
		}
	}
}

// The factor of a singular matrix is a generalised inverse: A M⁻¹ A = A.
func TestSemidefinite(t *testing.T) {
	a, _ := sampled(t, "sample:seepage:8")
	f, err := factorSemidefinite(a)
	if err != nil || f.replaced != 1 {
		t.Fatalf("%d pivots replaced, error %v", f.replaced, err)
	}
	var back mat.Dense
	d := dense(a)
	back.Product(d, inverse(f, a.NRows), d)
	back.Sub(&back, d)
	if e := mat.Norm(&back, 2); !(e <= 1e-12*mat.Norm(d, 2)) {
		t.Errorf("‖A M⁻¹ A − A‖ = %g", e)
	}
}

// The interpolation of a constant is the constant wherever the row sums of A
// vanish, also when rows are cut; every fine row has a coarse one to take
// from.
func TestClassicalKeepsConstants(t *testing.T) {
	a, _ := sampled(t, "sample:seepage:30")
	diag := make([]float64, a.NRows)
	a.Diagonal(diag)
	p := (&classical{theta: 0.25}).prolongation(a, diag)
	one := make([]float64, a.NRows)
	p.Apply(one, constants(p.NCols))
	for i, v := range one {
		near(t, "row sum of P", v, 1, 1e-12)
		if cols, _ := p.Row(i); len(cols) > interpolants {
			t.Errorf("row %d has %d entries", i, len(cols))
		}
	}
	if share := float64(p.NCols) / float64(a.NRows); math.Abs(share-0.37) > 0.1 {
		t.Errorf("%g of the unknowns are coarse", share)
	}
}
