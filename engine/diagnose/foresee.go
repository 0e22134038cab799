package diagnose

import (
	"dwindle/engine/inspect"
	"dwindle/engine/spectrum"
)

// foreseeSteps bounds the steps that are foreseen, in unknowns.
const foreseeSteps = 8

// foresee tells how many steps cg takes to reduce the residual by tol where
// all eigenvalues of a symmetric positive definite operator are known and the
// right-hand side holds every eigenvector alike; ok is false where they are
// not known, or the steps too many. The steps are made on the eigenvalues,
// rounding included.
func foresee(s *inspect.Spectrum, tol float64) (its int, ok bool) {
	if s == nil || !s.Exact || len(s.Values) == 0 {
		return 0, false
	}
	n := len(s.Values)
	c := make([]spectrum.Cluster, n)
	for i, z := range s.Values {
		if !(real(z) > 0) || imag(z) != 0 {
			return 0, false
		}
		c[i] = spectrum.Cluster{Value: real(z), Weight: 1 / float64(n)}
	}
	its = spectrum.Steps(c, tol, foreseeSteps*n)
	return its, its <= foreseeSteps*n
}
