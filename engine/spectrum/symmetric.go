package spectrum

import (
	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/blas/blas64"
	"gonum.org/v1/gonum/lapack"
	"gonum.org/v1/gonum/lapack/lapack64"
)

// Symmetric finds the eigenvalues of a small dense symmetric matrix in rising
// order, and its orthonormal eigenvectors, without allocating. a is the matrix
// by rows, n x n with n = len(values); only its upper triangle is read, and the
// vectors take its place: a[i*n+j] is entry i of the one of values[j]. work has
// at least 3n entries. It returns false where an entry is not finite or the
// iteration fails; a is then of no use.
func Symmetric(a, values, work []float64) bool {
	n := len(values)
	for i := range n {
		for _, v := range a[i*n+i : (i+1)*n] {
			if v-v != 0 {
				return false
			}
		}
	}
	m := blas64.Symmetric{N: n, Stride: n, Data: a[:n*n], Uplo: blas.Upper}
	return lapack64.Syev(lapack.EVCompute, m, values, work, len(work))
}
