package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var minresEntry = Entry{
	Name: "minres", Title: "minimal residual",
	Source:      "Paige and Saunders, SIAM J. Numer. Anal. 12 (1975) 617–629",
	Assumes:     linear.AssumesSymmetric | linear.AssumesFixedM | linear.AssumesSymmetricM,
	Norm:        trace.PrecondNorm,
	Products:    "1",
	Monotone:    true,
	Tridiagonal: true,
	Memory:      func(n int, _ linear.Values) int64 { return vectors(7, n) },
	New:         func(linear.Values) Solver { return &minres{} },
}

// minres minimises √(rᵀM⁻¹r) over the Krylov space of M⁻¹A, for symmetric A,
// definite or not, and symmetric positive definite M. The Lanczos vectors are
// v_k = z_k/β_k with z_k = M⁻¹ r_k and β_k = √(r_kᵀz_k):
//
//	α_k = v_kᵀA v_k
//	r_{k+1} = A v_k − (α_k/β_k) r_k − (β_k/β_{k−1}) r_{k−1}
//
// givens turns their tridiagonal matrix into R, and the directions follow from
// γ_k w_k = v_k − δ_k w_{k−1} − ε_k w_{k−2}. They are kept as β_k γ_k w_k, so
// that z_k enters unscaled.
type minres struct {
	core
	g             givens
	r, rOld, q    []float64 // r_k, r_{k−1} and the product; length n
	z             []float64 // M⁻¹ r_k; it is r without a preconditioner
	w, wOld       []float64 // β γ w of the last two steps, length n
	s, sOld       float64   // their β γ; 1 before there is one
	beta, betaOld float64   // β_k, and β_{k−1}, which is 0 in the first step
	size          float64   // largest |α| and β so far: the scale of T
}

func (s *minres) Begin(p Problem) (trace.Reading, error) {
	*s = minres{s: 1, sOld: 1}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	for _, v := range []*[]float64{&s.r, &s.rOld, &s.q, &s.w, &s.wOld} {
		*v = make([]float64, s.n)
	}
	res := s.residual(s.r, p.X)
	s.z = s.r
	if !s.plain && finite(res) && res > 0 {
		s.z = make([]float64, s.n)
		rz := s.precondition(s.z, s.r)
		if !(rz > 0) || !finite(rz) {
			s.last = res
			return s.refuse(rz, s.r, s.z)
		}
		res = root(rz, s.r)
	}
	s.beta = res
	s.g = newGivens(res)
	return s.start(res), nil
}

func (s *minres) Step() (trace.Reading, error) {
	s.next()
	s.a.Apply(s.q, s.z) // the product: A z_k = β_k A v_k
	alpha, rr := s.lanczos()
	if !finite(alpha) || !finite(rr) {
		return s.overflow("v'Av", alpha)
	}
	z := s.q
	if !s.plain {
		z = s.rOld // r_{k−1} has had its last use
		rz := s.precondition(z, s.q)
		if !finite(rz) || rz < 0 || (rz == 0 && rr > 0) {
			return s.refuse(rz, s.q, z)
		}
		rr = rz
	}
	beta := root(rr, s.q)
	s.size = max(s.size, math.Abs(alpha), beta)
	step := s.g.turn(alpha, beta)
	if s.g.gamma <= 16*unit*s.size { // T is singular: nothing more of b is in reach
		return s.reading(alpha, beta, true), nil
	}
	s.move(step)
	s.last = s.g.rest
	s.rotate(z, beta)
	end := beta <= 16*unit*s.size // the Krylov space is exhausted
	return s.reading(alpha, beta, end || s.last == 0), nil
}

// lanczos turns q = A z_k into r_{k+1}; it returns α_k and r_{k+1}ᵀr_{k+1}.
// The old vector is subtracted before α is taken (Paige, J. Inst. Math. Appl.
// 18 (1976) 341–349, finds this order the stable one).
func (s *minres) lanczos() (alpha, rr float64) {
	var zq float64
	if s.betaOld == 0 {
		zq = linear.Dot(s.z, s.q)
	} else {
		zq = linear.AxpyDot(-s.beta*(s.beta/s.betaOld), s.rOld, s.q, s.z)
	}
	alpha = zq / s.beta / s.beta
	return alpha, linear.LinDot(s.q, 1/s.beta, s.q, -alpha/s.beta, s.r)
}

// move makes w_k and takes the step along it.
func (s *minres) move(step float64) {
	scale := s.beta * s.g.gamma
	linear.Recur(s.wOld, s.z, -s.g.eps*s.beta/s.sOld, s.w, -s.g.delta*s.beta/s.s)
	linear.Axpy(step/scale, s.wOld, s.x)
	s.w, s.wOld = s.wOld, s.w
	s.s, s.sOld = scale, s.s
}

// rotate hands the buffers on: r_{k+1} lies in q and M⁻¹ r_{k+1} in z.
func (s *minres) rotate(z []float64, beta float64) {
	free := s.z
	if s.plain {
		free = s.rOld
	}
	s.rOld, s.r, s.q, s.z = s.r, s.q, free, z
	s.betaOld, s.beta = s.beta, beta
}

// refuse ends the trial because rᵀM⁻¹r is not positive.
func (s *minres) refuse(rz float64, r, z []float64) (trace.Reading, error) {
	if !finite(rz) {
		return s.overflow("r'inv(M)r", rz)
	}
	value := cosine(rz, linear.Norm2(r), linear.Norm2(z))
	if rz < 0 {
		s.event(trace.PrecondIndefinite, "r'inv(M)r", value)
	}
	return s.broken("r'inv(M)r", value)
}

func (s *minres) Solution(dst []float64) { copy(dst, s.x) }
