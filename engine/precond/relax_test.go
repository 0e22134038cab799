package precond

import (
	"math"
	"math/cmplx"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// radius returns the spectral radius of the iteration matrix I − M⁻¹A.
func radius(t *testing.T, m linear.Applier, a *linear.CSR) float64 {
	t.Helper()
	n := a.NRows
	var g mat.Dense
	g.Mul(inverse(m, n), dense(a))
	for i := 0; i < n; i++ {
		for j := 0; j < n; j++ {
			g.Set(i, j, -g.At(i, j))
		}
		g.Set(i, i, 1+g.At(i, i))
	}
	var e mat.Eigen
	if !e.Factorize(&g, mat.EigenNone) {
		t.Fatal("no eigenvalues")
	}
	r := 0.0
	for _, z := range e.Values(nil) {
		r = max(r, cmplx.Abs(z))
	}
	return r
}

// On the 5-point operator of n x n points, h = 1/(n+1): ρ_J = cos πh,
// ρ_GS = cos² πh, and at ω = 2/(1 + sin πh) ρ_SOR = ω − 1 (Young 1954). At the
// best ω the largest eigenvalues are defective, so that rounding moves them by
// the square root of the precision.
func TestSpectralRadii(t *testing.T) {
	for _, n := range []int{8, 12} {
		a, angle := plate(n), math.Pi/float64(n+1)
		omega := 2 / (1 + math.Sin(angle))
		for _, c := range []struct {
			written   string
			want, tol float64
		}{
			{"jacobi", math.Cos(angle), 1e-12},
			{"gs", math.Cos(angle) * math.Cos(angle), 1e-12},
			{"sor:1", math.Cos(angle) * math.Cos(angle), 1e-12},
			{"sor:" + formatted(omega), omega - 1, 1e-6},
		} {
			m, _ := made(t, a, c.written)
			near(t, c.written+" radius", radius(t, m, a), c.want, c.tol)
		}
	}
}

// One symmetric Gauss-Seidel sweep is ssor without relaxation, bit for bit.
func TestSGS(t *testing.T) {
	a := unsymmetric(80)
	m, _ := made(t, a, "sgs")
	s, _ := made(t, a, "ssor:1")
	if !mat.Equal(inverse(m, 80), inverse(s, 80)) {
		t.Error("sgs differs from ssor:1")
	}
}

func TestRelaxationsNameTheRow(t *testing.T) {
	for _, name := range []string{"gs", "sor", "sgs"} {
		_, _, err := tryMake(t, fromRows([][]float64{{2, 1}, {1, 0}}), name)
		broke(t, err, 1)
	}
}
