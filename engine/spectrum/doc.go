// Package spectrum tells what is known of eigenvalues.
//
// Of an operator: both ends with error bounds, all of a small one, densities,
// condition numbers, how far from normal it is, and directions of negative
// curvature.
//
// Of an iteration, from its recurrence coefficients alone: the extremes of the
// Lanczos matrix that conjugate gradients and MINRES build on their way, which
// Ritz values have settled and when, the copies that lost orthogonality makes
// of them, bounds of the error in the energy norm, and how many steps a changed
// spectrum would take.
package spectrum
