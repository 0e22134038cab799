package krylov_test

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// contraction returns the spectral radius of I − M⁻¹A for a written
// preconditioner, by gonum's eigenvalues of the dense matrix.
func contraction(t *testing.T, a *linear.CSR, precond string) float64 {
	t.Helper()
	n := a.NRows
	m := built(t, a, precond)
	d, x, y, z := mat.NewDense(n, n, nil), make([]float64, n), make([]float64, n), make([]float64, n)
	for j := range n {
		x[j] = 1
		a.Apply(y, x)
		m.Apply(z, y)
		for i, v := range z {
			d.Set(i, j, x[i]-v)
		}
		x[j] = 0
	}
	var eig mat.Eigen
	if !eig.Factorize(d, mat.EigenNone) {
		t.Fatal("no eigenvalues")
	}
	rho := 0.0
	for _, v := range eig.Values(nil) {
		rho = math.Max(rho, math.Hypot(real(v), imag(v)))
	}
	return rho
}

// On the plate the residual ends up falling by the spectral radius a step
// (Young, Trans. AMS 76 (1954) 92–111; Varga, Matrix Iterative Analysis, 1962):
// cos πh for Jacobi, cos² πh for Gauss–Seidel, (κ−1)/(κ+1) for the step
// 2/(λmin+λmax) without preconditioner. On the plate λmin + λmax = 8, so that
// Jacobi is that iteration.
func TestStationaryFactors(t *testing.T) {
	for n, rho := range map[int]float64{8: 0.939692620785908, 16: 0.982973099683902} {
		h := 1 / float64(n+1)
		kappa := 1 / math.Pow(math.Tan(math.Pi*h/2), 2)
		near(t, "cos πh", rho, math.Cos(math.Pi*h), 1e-14)
		for pairing, want := range map[string]float64{
			"richardson+jacobi":    rho,
			"richardson:0.25+none": (kappa - 1) / (kappa + 1),
			"richardson+gs":        rho * rho,
		} {
			b := make([]float64, n*n)
			linear.Uniform(b, 3)
			r := begun(t, plate(n), b, nil, pairing)
			near(t, pairing, factor(r, 500, 20), want, 2e-6)
		}
	}
}

// Over-relaxation with ω = 2/(1 + sin πh) has spectral radius ω − 1 (Young
// 1954). Its eigenvalues of that size are defective, so that the dense ones are
// good to about the root of the rounding unit only, and the residual falls as
// k (ω−1)^k: the steps to 1e-10 lie a little beyond those of the radius.
func TestOverRelaxation(t *testing.T) {
	for n, rho := range map[int]float64{8: 0.490290596565702, 16: 0.689546622742459} {
		omega := 2 / (1 + math.Sin(math.Pi/float64(n+1)))
		near(t, "ω − 1", omega-1, rho, 1e-14)
		sor := fmt.Sprintf("sor:%.17g", omega)
		near(t, sor, contraction(t, plate(n), sor), rho, 1e-3)
		r := begun(t, plate(n), ones(n*n), nil, "richardson+"+sor)
		got, least := r.until(1e-10, 1000), math.Log(1e-10)/math.Log(rho)
		if float64(got) < least-2 || float64(got) > 1.5*least {
			t.Errorf("%d steps with %s, %.0f by the radius alone", got, sor, least)
		}
	}
}

// factor returns the geometric mean of the falls of the residual over the last
// steps of a number of them.
func factor(r *trial, steps, last int) float64 {
	for r.steps < steps-last {
		r.step()
	}
	before := r.last.Residual
	for r.steps < steps {
		r.step()
	}
	return math.Pow(r.last.Residual/before, 1/float64(last))
}

// Twice the step is too long: the residual grows by |1 − ωλ|max = 2·1.9397 − 1
// a step on the 8 x 8 plate.
func TestRichardsonDiverges(t *testing.T) {
	b := make([]float64, 64)
	linear.Uniform(b, 3)
	r := begun(t, plate(8), b, nil, "richardson:2+jacobi")
	near(t, "growth", factor(r, 400, 20), 2*1.939692620785908-1, 1e-9)
	if !r.entry.NoGuarantee {
		t.Error("a divergent iteration must be allowed to be judged so")
	}
}

// With an exact M one step solves. The tridiagonal matrix of a line has the
// incomplete factorisation without fill as its exact one.
func TestRichardsonDirect(t *testing.T) {
	for _, m := range []string{"ic:0", "ilu:0", "cholesky", "ldl", "lu"} {
		r := begun(t, line(50), ones(50), nil, "richardson+"+m)
		r.step()
		near(t, m+": true residual after one step", r.truth(), 0, 1e-12)
	}
}

// ω M⁻¹ is all that counts: half the ω with twice the M⁻¹ gives the same bits.
func TestRichardsonScales(t *testing.T) {
	a, b := plate(5), ones(25)
	for _, omega := range []float64{0.125, 0.25} {
		x := begunWith(t, a, halving{}, b, nil, solverPart(t, fmt.Sprintf("richardson:%g", 2*omega)))
		y := begun(t, a, b, nil, fmt.Sprintf("richardson:%g", omega))
		for range 30 {
			x.step()
			y.step()
		}
		sameVector(t, x.x(), y.x())
	}
}
