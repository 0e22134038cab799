// Package spectrum tells what is known of eigenvalues: the extremes of the
// Lanczos matrix that conjugate gradients and MINRES build on their way, with
// their error bounds, and directions of negative curvature.
package spectrum
