package krylov

import "math"

// givens turns a symmetric tridiagonal matrix into an upper triangular one,
// one column and one reflection a step, as MINRES needs it. The new column of
// R is (eps, delta, gamma), from two above the diagonal to the diagonal.
type givens struct {
	c, s              float64 // the last reflection
	dbar, epsNext     float64 // what it left of the next two entries of the row
	eps, delta, gamma float64
	rest              float64 // the norm of the residual
}

// newGivens starts with the norm of the first residual.
func newGivens(norm float64) givens { return givens{c: -1, rest: norm} }

// turn takes α_k and β_{k+1} in and returns the step along w_k; rest falls by
// the sine. Where gamma is zero it returns 0 and rest keeps its size.
func (g *givens) turn(alpha, beta float64) float64 {
	g.eps = g.epsNext
	g.delta = g.c*g.dbar + g.s*alpha
	gbar := g.s*g.dbar - g.c*alpha
	g.epsNext, g.dbar = g.s*beta, -g.c*beta
	g.gamma = math.Hypot(gbar, beta)
	if g.gamma == 0 {
		return 0
	}
	g.c, g.s = gbar/g.gamma, beta/g.gamma
	step := g.c * g.rest
	g.rest *= g.s
	return step
}
