package spectrum

import (
	"cmp"
	"math"
	"math/cmplx"
	"slices"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// DenseSymmetric returns all eigenvalues of a symmetric matrix, rising, by
// reduction to tridiagonal form: 4n³/3 operations, 8n² bytes. Entries above
// the diagonal are read. Nil where the iteration fails. Entries whose squares
// are no numbers are scaled by a power of two first.
func DenseSymmetric(a *linear.CSR) []float64 {
	n, power := a.NRows, 0
	if most := linear.NormInf(a.Val); most > 0 && (most < 1e-100 || most > 1e100) {
		_, power = math.Frexp(most)
	}
	s := mat.NewSymDense(n, nil)
	for i := range n {
		cols, vals := a.Row(i)
		for k, j := range cols {
			if int(j) >= i {
				s.SetSym(i, int(j), math.Ldexp(vals[k], -power))
			}
		}
	}
	var e mat.EigenSym
	if !e.Factorize(s, false) {
		return nil
	}
	values := e.Values(nil)
	for k, v := range values {
		values[k] = math.Ldexp(v, power)
	}
	return values
}

// DenseSingular returns all singular values of a square matrix, falling:
// 8n³/3 operations, 8n² bytes. Nil where the iteration fails.
func DenseSingular(a *linear.CSR) []float64 {
	var s mat.SVD
	if !s.Factorize(full(a), mat.SVDNone) {
		return nil
	}
	return s.Values(nil)
}

// DenseNull returns the singular vectors of a square matrix whose singular
// values are at most the limit times the largest one, the smallest first, each
// of unit length: a maps right[k] to a multiple of left[k]. Nil where there are
// none, or the iteration fails.
func DenseNull(a *linear.CSR, limit float64) (left, right [][]float64) {
	var s mat.SVD
	if !s.Factorize(full(a), mat.SVDFull) {
		return nil, nil
	}
	values := s.Values(nil)
	var u, v mat.Dense
	s.UTo(&u)
	s.VTo(&v)
	for k := len(values) - 1; k >= 0 && values[k] <= limit*values[0]; k-- {
		left, right = append(left, mat.Col(nil, k, &u)), append(right, mat.Col(nil, k, &v))
	}
	return left, right
}

// DenseEigenvalues returns all eigenvalues of a square matrix by rising real
// part, then imaginary part: about 10n³ operations, 8n² bytes. Nil where the
// iteration fails.
func DenseEigenvalues(a *linear.CSR) []complex128 {
	var e mat.Eigen
	if !e.Factorize(full(a), mat.EigenNone) {
		return nil
	}
	values := e.Values(nil)
	slices.SortFunc(values, func(x, y complex128) int {
		return cmp.Or(cmp.Compare(real(x), real(y)), cmp.Compare(imag(x), imag(y)))
	})
	return values
}

// full returns the matrix with all its zeros.
func full(a *linear.CSR) *mat.Dense {
	d := mat.NewDense(a.NRows, a.NCols, nil)
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, j := range cols {
			d.Set(i, int(j), vals[k])
		}
	}
	return d
}

// Henrici returns the departure from normality √(1 − Σ|λ|²/‖A‖_F²) of a matrix
// with these eigenvalues and Frobenius norm (Henrici, Numer. Math. 4, 1962): 0
// for a normal matrix, near 1 where eigenvalues tell next to nothing.
func Henrici(values []complex128, frobenius float64) float64 {
	if !(frobenius > 0) {
		return 0
	}
	sum := 0.0
	for _, v := range values {
		r := cmplx.Abs(v) / frobenius
		sum += r * r
	}
	return math.Sqrt(max(0, 1-sum))
}
