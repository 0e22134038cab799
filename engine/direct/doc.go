// Package direct factorises: orderings, a blocked Cholesky factorisation on a
// skyline, and the verified judgement whether a matrix is positive definite.
package direct
