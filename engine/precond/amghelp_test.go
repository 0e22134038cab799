package precond

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
	"dwindle/samples"
)

// sampled returns a sample's matrix and right-hand side, ones where it has
// none.
func sampled(t *testing.T, spec string) (*linear.CSR, []float64) {
	t.Helper()
	s, err := samples.Build(spec)
	if err != nil {
		t.Fatal(err)
	}
	if s.B == nil {
		s.B = constants(s.N())
	}
	return s.Matrix(), s.B
}

// cube returns the 7-point operator on an n x n x n grid.
func cube(n int) *linear.CSR {
	var e []linear.Entry
	for i := 0; i < n*n*n; i++ {
		e = append(e, linear.Entry{I: i, J: i, V: 6})
		for step, at := 1, i; step < n*n*n; step, at = step*n, at/n {
			if at%n > 0 {
				e = append(e, linear.Entry{I: i, J: i - step, V: -1}, linear.Entry{I: i - step, J: i, V: -1})
			}
		}
	}
	return linear.FromEntries(n*n*n, n*n*n, e)
}

// steps returns how many iterations of preconditioned conjugate gradients cut
// ‖r‖₂ to tol·‖b‖₂, at most 200.
func steps(m linear.Applier, a *linear.CSR, b []float64, tol float64) int {
	n := len(b)
	r := append([]float64(nil), b...)
	z, p, q := make([]float64, n), make([]float64, n), make([]float64, n)
	goal, before := tol*linear.Norm2(b), math.Inf(1)
	for k := 0; ; k++ {
		if linear.Norm2(r) <= goal || k == 200 {
			return k
		}
		m.Apply(z, r)
		rho := linear.Dot(r, z)
		linear.Xpby(z, rho/before, p)
		before = rho
		a.Apply(q, p)
		linear.Axpy(-rho/linear.Dot(p, q), q, r)
	}
}

// pencil returns the ends of the spectrum of Lᵀ B L for A = L Lᵀ.
func pencil(t *testing.T, b, a *mat.Dense) (low, high float64) {
	t.Helper()
	n, _ := a.Dims()
	sym := mat.NewSymDense(n, nil)
	for i := 0; i < n; i++ {
		for j := i; j < n; j++ {
			sym.SetSym(i, j, a.At(i, j))
		}
	}
	var chol mat.Cholesky
	if !chol.Factorize(sym) {
		t.Fatal("the matrix is not positive definite")
	}
	var l mat.TriDense
	chol.LTo(&l)
	var p mat.Dense
	p.Product(l.T(), b, &l)
	for i := 0; i < n; i++ {
		for j := i; j < n; j++ {
			sym.SetSym(i, j, (p.At(i, j)+p.At(j, i))/2)
		}
	}
	var eig mat.EigenSym
	if !eig.Factorize(sym, false) {
		t.Fatal("no eigenvalues")
	}
	v := eig.Values(nil)
	return v[0], v[n-1]
}
