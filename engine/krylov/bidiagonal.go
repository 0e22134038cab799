package krylov

import "dwindle/engine/linear"

// bidiagonal is the process of Golub and Kahan (SIAM J. Numer. Anal. 2 (1965)
// 205–224) for C = A M⁻¹, started from β₁u₁ = r₀:
//
//	α_k v_k = Cᵀu_k − β_k v_{k−1},  β_{k+1} u_{k+1} = C v_k − α_k u_k
//
// A zero α or β ends it; the vector is then left as it is, not normalised.
type bidiagonal struct {
	normal
	u, v, q, z  []float64 // length n; q and z are scratch
	alpha, beta float64
}

// open makes the vectors and returns ‖r₀‖ = β₁.
func (s *bidiagonal) open(c *core, p Problem) (res float64, err error) {
	if s.normal, err = newNormal(p, c.n); err != nil {
		return 0, err
	}
	for _, v := range []*[]float64{&s.u, &s.v, &s.q, &s.z} {
		*v = linear.Bulk[float64](c.n)
	}
	s.beta = c.residual(s.u, p.X)
	if finite(s.beta) && s.beta > 0 {
		linear.Scale(s.u, 1/s.beta, s.u)
	}
	return s.beta, nil
}

// left makes the next α and v by a product with the transpose.
func (s *bidiagonal) left() {
	s.backward(s.z, s.u, s.q)
	s.alpha = root(linear.LinDot(s.v, 1, s.z, -s.beta, s.v), s.v)
	if finite(s.alpha) && s.alpha > 0 {
		linear.Scale(s.v, 1/s.alpha, s.v)
	}
}

// right makes the next β and u by a product. It returns M⁻¹v, which is
// overwritten by the next call.
func (s *bidiagonal) right() (half []float64) {
	half = s.forward(s.q, s.v)
	s.beta = root(linear.LinDot(s.u, 1, s.q, -s.alpha, s.u), s.u)
	if finite(s.beta) && s.beta > 0 {
		linear.Scale(s.u, 1/s.beta, s.u)
	}
	return half
}
