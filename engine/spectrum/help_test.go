package spectrum_test

import (
	"math"
	"testing"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
)

// plain is the identity.
type plain struct{}

func (plain) Apply(dst, x []float64) { copy(dst, x) }

// course is what a run of cg left behind.
type course struct {
	alphas, betas []float64
	steps         int
}

// conjugate runs cg on A x = b until the own residual fell by tol, at most
// limit steps, and calls see with the iterate after each.
func conjugate(t *testing.T, a linear.Operator, m linear.Applier, b []float64, tol float64, limit int, see func(x []float64)) course {
	t.Helper()
	e, _ := krylov.Lookup("cg")
	s := e.New(linear.Values{})
	first, err := s.Begin(krylov.Problem{A: a, M: m, B: b})
	if err != nil {
		t.Fatal(err)
	}
	var c course
	x := make([]float64, len(b))
	for c.steps < limit {
		r, err := s.Step()
		if err != nil {
			t.Fatal(err)
		}
		c.steps++
		c.alphas, c.betas = append(c.alphas, r.Alpha), append(c.betas, r.Beta)
		if see != nil {
			s.Solution(x)
			see(x)
		}
		if r.Done || r.Residual <= tol*first.Residual {
			break
		}
	}
	return c
}

// ones is the vector of n ones.
func ones(n int) []float64 {
	b := make([]float64, n)
	for i := range b {
		b[i] = 1
	}
	return b
}

// diagonalOf is diag(values).
func diagonalOf(values []float64) *linear.CSR {
	var e []linear.Entry
	for i, v := range values {
		e = append(e, linear.Entry{I: i, J: i, V: v})
	}
	return linear.FromEntries(len(values), len(values), e)
}

// strakos are the eigenvalues λ_1 + (i−1)/(n−1)(λ_n−λ_1)ρ^{n−i} (Strakoš,
// Linear Algebra Appl. 154–156, 1991).
func strakos(n int, low, high, rho float64) []float64 {
	out := make([]float64, n)
	for i := range out {
		out[i] = low + float64(i)/float64(n-1)*(high-low)*math.Pow(rho, float64(n-1-i))
	}
	return out
}

// plate is the five-point Laplacian on n x n points.
func plate(n int) *linear.CSR {
	var e []linear.Entry
	for i := range n {
		for j := range n {
			k := i*n + j
			e = append(e, linear.Entry{I: k, J: k, V: 4})
			if i > 0 {
				e = append(e, linear.Entry{I: k, J: k - n, V: -1}, linear.Entry{I: k - n, J: k, V: -1})
			}
			if j > 0 {
				e = append(e, linear.Entry{I: k, J: k - 1, V: -1}, linear.Entry{I: k - 1, J: k, V: -1})
			}
		}
	}
	return linear.FromEntries(n*n, n*n, e)
}

// outlying are n eigenvalues spread over [1,2], and more.
func outlying(n int, more ...float64) []float64 {
	for i := range n {
		more = append(more, 1+float64(i)/float64(n-1))
	}
	return more
}
