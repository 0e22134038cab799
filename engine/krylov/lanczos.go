package krylov

import (
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// lanczos is the Lanczos process for M⁻¹A in the inner product of M, with
// vectors v_k = z_k/β_k, z_k = M⁻¹ r_k and β_k = √(r_kᵀz_k):
//
//	α_k = v_kᵀA v_k
//	r_{k+1} = A v_k − (α_k/β_k) r_k − (β_k/β_{k−1}) r_{k−1}
type lanczos struct {
	r, rOld, q    []float64 // r_k, r_{k−1} and the product; length n
	z             []float64 // M⁻¹ r_k; it is r without a preconditioner
	beta, betaOld float64   // β_k, and β_{k−1}, which is 0 in the first step
}

// open makes the vectors and r₁ = b − A x₀, and returns β₁. Where M is not
// positive there it returns ok false and how the trial ends.
func (s *lanczos) open(c *core, guess []float64) (end trace.Reading, ok bool) {
	for _, v := range []*[]float64{&s.r, &s.rOld, &s.q} {
		*v = linear.Bulk[float64](c.n)
	}
	s.beta = c.residual(s.r, guess)
	s.z = s.r
	if c.plain || !finite(s.beta) || s.beta == 0 {
		return end, true
	}
	s.z = linear.Bulk[float64](c.n)
	rz := c.precondition(s.z, s.r)
	if !(rz > 0) || !finite(rz) {
		c.last = s.beta
		end, _ = c.refuse("r'inv(M)r", rz, s.r, s.z)
		return end, false
	}
	s.beta = root(rz, s.r)
	return end, true
}

// extend makes the product and returns α_k, β_{k+1} and z = M⁻¹ r_{k+1};
// advance must follow. Where that cannot be it returns ok false and how the
// trial ends.
func (s *lanczos) extend(c *core) (alpha, beta float64, z []float64, end trace.Reading, ok bool) {
	c.a.Apply(s.q, s.z) // the product: A z_k = β_k A v_k
	alpha, rr := s.orthogonalise()
	if !finite(alpha) || !finite(rr) {
		end, _ = c.overflow("v'Av", alpha)
		return alpha, 0, nil, end, false
	}
	z = s.q
	if !c.plain {
		z = s.rOld // r_{k−1} has had its last use
		rz := c.precondition(z, s.q)
		if !finite(rz) || rz < 0 || (rz == 0 && rr > 0) {
			end, _ = c.refuse("r'inv(M)r", rz, s.q, z)
			return alpha, 0, nil, end, false
		}
		rr = rz
	}
	return alpha, root(rr, s.q), z, end, true
}

// orthogonalise turns q = A z_k into r_{k+1}; it returns α_k and
// r_{k+1}ᵀr_{k+1}. The old vector is subtracted before α is taken (Paige, J.
// Inst. Math. Appl. 18 (1976) 341–349, finds this order the stable one).
func (s *lanczos) orthogonalise() (alpha, rr float64) {
	var zq float64
	if s.betaOld == 0 {
		zq = linear.Dot(s.z, s.q)
	} else {
		zq = linear.AxpyDot(-s.beta*(s.beta/s.betaOld), s.rOld, s.q, s.z)
	}
	alpha = zq / s.beta / s.beta
	return alpha, linear.LinDot(s.q, 1/s.beta, s.q, -alpha/s.beta, s.r)
}

// advance hands the buffers on: r_{k+1} lies in q and M⁻¹ r_{k+1} in z.
func (s *lanczos) advance(z []float64, beta float64, plain bool) {
	free := s.z
	if plain {
		free = s.rOld
	}
	s.rOld, s.r, s.q, s.z = s.r, s.q, free, z
	s.betaOld, s.beta = s.beta, beta
}
