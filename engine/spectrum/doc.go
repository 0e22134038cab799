// Package spectrum tells what is known of eigenvalues. Of an operator: both
// ends with error bounds, all values of a small one, the density, the condition
// in the 1-norm, the departure from normality. Of a running iteration: the
// extremes of the Lanczos matrix that it builds on its way, what its Ritz values
// tell of its past and its future, and directions of negative curvature.
package spectrum
