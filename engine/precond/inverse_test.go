package precond

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// M⁻¹ is the inverse of the block diagonal, by gonum; a last block may be
// short.
func TestBlockJacobi(t *testing.T) {
	a := unsymmetric(31)
	for _, size := range []int{1, 4, 7, 31, 100} {
		m, _ := made(t, a, "block-jacobi:"+formatted(float64(size)))
		d := dense(a)
		for i := 0; i < 31; i++ {
			for j := 0; j < 31; j++ {
				if i/size != j/size {
					d.Set(i, j, 0)
				}
			}
		}
		var p mat.Dense
		p.Mul(inverse(m, 31), d)
		for i := 0; i < 31; i++ {
			p.Set(i, i, p.At(i, i)-1)
		}
		near(t, "‖M⁻¹ blocks − I‖", mat.Norm(&p, 2), 0, 1e-13)
	}
	// Blocks without diagonal are no obstacle; singular ones are named.
	m, notes := made(t, fromRows([][]float64{{0, 2}, {2, 0}}), "block-jacobi:2")
	y := make([]float64, 2)
	m.Apply(y, []float64{2, 4})
	if y[0] != 2 || y[1] != 1 || notes.Definite || !notes.Symmetric {
		t.Errorf("y %v, notes %+v", y, notes)
	}
	_, _, err := tryMake(t, fromRows([][]float64{{1, 0, 0, 0}, {0, 1, 0, 0}, {0, 0, 1, 1}, {0, 0, 1, 1}}), "block-jacobi:2")
	broke(t, err, 3)
	if _, notes := made(t, plate(10), "block-jacobi:10"); !notes.Definite || notes.MinPivot <= 0 {
		t.Errorf("notes %+v", notes)
	}
}

// diag(G A Gᵀ) = 1, and G A is zero on the pattern left of the diagonal
// (Kolotilina and Yeremin 1993, theorem 2.1). Larger patterns make a better M;
// the full one is exact.
func TestFSAI(t *testing.T) {
	a := plate(8)
	last := math.Inf(1)
	for _, written := range []string{"fsai:1", "fsai:2", "fsai:3", "fsai:6"} {
		m, _ := made(t, a, written)
		f := m.(*fsai)
		g := dense(f.g)
		var ga, gag mat.Dense
		ga.Mul(g, dense(a))
		gag.Mul(&ga, g.T())
		for i := 0; i < 64; i++ {
			near(t, "diagonal of GAGᵀ", gag.At(i, i), 1, 1e-13)
			cols, _ := f.g.Row(i)
			for _, c := range cols[:len(cols)-1] {
				near(t, "entry of GA", ga.At(i, int(c)), 0, 1e-13)
			}
		}
		k := condition(t, m, a)
		if !(k < last) {
			t.Errorf("%s: condition %g, a smaller pattern gives %g", written, k, last)
		}
		last = k
	}
	m, _ := made(t, line(6, -1, 2, -1), "fsai:5")
	nearIdentity(t, "fsai of the full pattern", m, line(6, -1, 2, -1), 1e-13)
	_, _, err := tryMake(t, fromRows([][]float64{{1, 2}, {2, 1}}), "fsai")
	broke(t, err, 1)
}

// Each row of M⁻¹ solves its least squares problem: the residual is normal to
// the rows of A it may use. M⁻¹A is nearer to I than without.
func TestSPAI(t *testing.T) {
	for _, a := range []*linear.CSR{plate(7), unsymmetric(50), kershaw()} {
		m, _ := made(t, a, "spai")
		n := a.NRows
		var e, normal mat.Dense
		e.Mul(inverse(m, n), dense(a))
		for i := 0; i < n; i++ {
			e.Set(i, i, e.At(i, i)-1)
		}
		normal.Mul(&e, dense(a).T())
		for i := 0; i < n; i++ {
			cols, _ := a.Row(i)
			for _, c := range cols {
				near(t, "normal equation", normal.At(i, int(c)), 0, 1e-12)
			}
		}
		if got := mat.Norm(&e, 2); !(got < math.Sqrt(float64(n))) {
			t.Errorf("‖M⁻¹A − I‖ is %g", got)
		}
	}
	m, _ := made(t, fromRows([][]float64{{0, 2}, {4, 0}}), "spai")
	nearIdentity(t, "spai of a permutation", m, fromRows([][]float64{{0, 2}, {4, 0}}), 1e-15)
	_, _, err := tryMake(t, fromRows([][]float64{{0, 2}, {0, 1}}), "spai")
	broke(t, err, 0)
}

// 1 − λ p(λ) is the Chebyshev polynomial T((c−λ)/e)/T(c/e) of degree+1: on a
// diagonal matrix its values are those of M⁻¹A, here with the interval that
// the documented bounds give.
func TestPoly(t *testing.T) {
	n := 24
	a := line(n, -1, 2, -1)
	for _, degree := range []int{1, 2, 5, 9} {
		m, notes := made(t, a, "poly:"+formatted(float64(degree))+",30")
		var p mat.Dense
		p.Mul(inverse(m, n), dense(a))
		var e mat.EigenSym // D is a multiple of I: M⁻¹A is symmetric
		if !e.Factorize(symmetrised(&p), false) {
			t.Fatal("no eigenvalues")
		}
		top, low := 2.0, 2.0/30
		cheb := func(x float64) float64 {
			if math.Abs(x) <= 1 {
				return math.Cos(float64(degree+1) * math.Acos(x))
			}
			return math.Copysign(1, x) * math.Cosh(float64(degree+1)*math.Acosh(math.Abs(x))) // x < −1 does not occur
		}
		c, half := (top+low)/2, (top-low)/2
		sum, want := 0.0, 0.0
		for k := 1; k <= n; k++ {
			s := math.Sin(float64(k) * math.Pi / float64(2*(n+1)))
			lambda := 2 * s * s // of D⁻¹A
			want += 1 - cheb((c-lambda)/half)/cheb(c/half)
			sum += e.Values(nil)[k-1]
		}
		near(t, "trace of M⁻¹A", sum, want, 1e-11)
		for _, v := range e.Values(nil) {
			if !(v > 0 && v < 1+1/cheb(c/half)+1e-12) {
				t.Errorf("degree %d: eigenvalue %g of M⁻¹A", degree, v)
			}
		}
		if !notes.Definite {
			t.Errorf("notes %+v", notes)
		}
	}
}
