package spectrum

import (
	"math"

	"gonum.org/v1/gonum/blas"
	lapackimpl "gonum.org/v1/gonum/lapack/gonum"
)

// Quadrature is the Lanczos matrix of conjugate gradients taken apart: the
// Gauss rule of the measure that the first residual r₀ puts on the spectrum
// (Golub and Welsch, Math. Comp. 23, 1969). All slices have the length k of
// the matrix.
type Quadrature struct {
	Nodes   []float64 // Ritz values, rising
	Weights []float64 // share of r₀ᵀM⁻¹r₀ at each, of sum 1
	Bounds  []float64 // an eigenvalue lies within this distance
}

// Gauss takes the Lanczos matrix of the first k steps of conjugate gradients
// apart, with α_j and β_{j+1} as Hestenes and Stiefel name them, j < k. It
// returns false where the coefficients are not those of a definite A and M.
// The cost is some 60 k² nanoseconds.
//
// T = B Bᵀ with B lower bidiagonal, B_jj = 1/√α_j and B_{j+1,j} = √(β_{j+1}/α_j):
// its singular values give the nodes, small ones to full relative accuracy
// (Demmel and Kahan, SIAM J. Sci. Stat. Comput. 11, 1990), the first and last
// components of its left singular vectors the weights and bounds.
func Gauss(alphas, betas []float64) (Quadrature, bool) {
	k := min(len(alphas), len(betas))
	if k == 0 || !definiteSteps(alphas[:k], betas[:k-1]) {
		return Quadrature{}, false
	}
	d, e := make([]float64, k), make([]float64, k-1)
	for j := range d {
		d[j] = 1 / math.Sqrt(alphas[j])
		if j < k-1 {
			e[j] = math.Sqrt(betas[j] / alphas[j])
		}
	}
	ends := make([]float64, 2*k) // first and last row of the vectors
	ends[0], ends[2*k-1] = 1, 1
	if !(lapackimpl.Implementation{}).Dbdsqr(blas.Lower, k, 0, 2, 0, d, e, nil, 1, ends, k, nil, 1, make([]float64, 4*k)) {
		return Quadrature{}, false
	}
	out := 0.0
	if b := betas[k-1]; b > 0 && finite(b) {
		out = math.Sqrt(b) / alphas[k-1]
	}
	q := Quadrature{make([]float64, k), make([]float64, k), make([]float64, k)}
	for j := range d { // falling on the way in
		i := k - 1 - j
		q.Nodes[i], q.Weights[i] = d[j]*d[j], ends[j]*ends[j]
		q.Bounds[i] = out * math.Abs(ends[k+j])
	}
	return q, true
}

// definiteSteps says whether all α and all β are positive and finite.
func definiteSteps(alphas, betas []float64) bool {
	for _, list := range [][]float64{alphas, betas} {
		for _, v := range list {
			if !(v > 0) || !finite(v) || !finite(1/v) {
				return false
			}
		}
	}
	return true
}
