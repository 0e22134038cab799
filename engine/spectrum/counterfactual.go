package spectrum

import "math"

// Steps runs conjugate gradients on diag(values) with b = √weights until the
// residual norm is at most target, and returns how many steps it takes, or
// limit+1 where that is not enough. ‖b‖² is the sum of the weights.
//
// On the clusters of a run it does what the run did, rounding and its delay
// included (Greenbaum and Strakoš 1992); on changed clusters it tells what a
// changed spectrum would need. No operator is used, the cost is len(values) a
// step.
func Steps(c []Cluster, target float64, limit int) int {
	n := len(c)
	r, p := make([]float64, n), make([]float64, n)
	rho := 0.0
	for i, k := range c {
		r[i] = math.Sqrt(k.Weight)
		p[i] = r[i]
		rho += k.Weight
	}
	for step := 0; step <= limit; step++ {
		if math.Sqrt(rho) <= target {
			return step
		}
		curve := 0.0
		for i, k := range c {
			curve += p[i] * k.Value * p[i]
		}
		alpha, next := rho/curve, 0.0
		for i, k := range c {
			r[i] -= alpha * k.Value * p[i]
			next += r[i] * r[i]
		}
		beta := next / rho
		for i := range p {
			p[i] = r[i] + beta*p[i]
		}
		rho = next
	}
	return limit + 1
}

// Without returns the clusters that drop does not name, and the weight of
// those it does.
func Without(c []Cluster, drop func(i int, c Cluster) bool) (rest []Cluster, weight float64) {
	for i, k := range c {
		if drop(i, k) {
			weight += k.Weight
		} else {
			rest = append(rest, k)
		}
	}
	return rest, weight
}

// Ghosts returns how many steps of a run went into copies of eigenvalues it
// had found before: the number of Ritz values less that of clusters. It is the
// loss of rank of the computed Krylov space, and by as much rounding delays
// convergence (Gergelits and Strakoš, Numer. Algorithms 65, 2014).
func (q Quadrature) Ghosts(c []Cluster) int { return len(q.Nodes) - len(c) }
