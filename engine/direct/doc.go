// Package direct factorises sparse matrices: elimination orders of low fill,
// the prediction of fill, work and memory from the pattern, Cholesky, LDLᵀ with
// the count of eigenvalues by sign, LU, and the verified judgement whether a
// matrix is positive definite.
package direct
