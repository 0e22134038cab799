package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var symmlqEntry = Entry{
	Name: "symmlq", Title: "symmetric LQ",
	Source:      "Paige and Saunders, SIAM J. Numer. Anal. 12 (1975) 617–629",
	Assumes:     linear.AssumesSymmetric | linear.AssumesFixedM | linear.AssumesSymmetricM,
	Norm:        trace.PrecondNorm,
	Products:    "1",
	Tridiagonal: true,
	Memory:      func(n int, _ linear.Values) int64 { return vectors(6, n) },
	New:         func(linear.Values) Solver { return &symmlq{} },
}

// symmlq solves T y = β₁e₁ with the tridiagonal matrix T of the Lanczos
// process by T = L Q, for symmetric A, definite or not, and symmetric positive
// definite M. Its iterates x_k = Σ ζ_j w_j minimise the error ‖x − x_k‖ in the
// norm of M over M⁻¹A times the Krylov space; the residual is not monotone.
//
// The rotations turn column pairs of T: with γ̄_k left on the diagonal,
//
//	γ_k = √(γ̄_k² + β_{k+1}²),  c = γ̄_k/γ_k,  s = β_{k+1}/γ_k
//	δ_{k+1} = c δ̄_{k+1} + s α_{k+1},  γ̄_{k+1} = s δ̄_{k+1} − c α_{k+1}
//	ε_{k+2} = s β_{k+2},  δ̄_{k+2} = −c β_{k+2}
//	w_k = c w̄_k + s v_{k+1},  w̄_{k+1} = s w̄_k − c v_{k+1}
//	γ_k ζ_k = τ_k,  τ_{k+1} = −(δ_{k+1} ζ_k + ε_{k+1} ζ_{k−1})
//
// and ‖r_k‖ = √(τ_{k+1}² + (ε_{k+2} ζ_k)²) looks one product ahead, which
// Begin makes. Residual is that of x_k, not of the conjugate gradient point.
type symmlq struct {
	core
	lanczos
	w           []float64 // w̄, length n
	alpha       float64   // α_k; β_{k+1} is beta of lanczos
	gbar, dbar  float64   // γ̄_k and δ̄_{k+1}
	eps         float64   // ε_{k+1}
	tau, zetaUp float64   // τ_k and ζ_{k−1}
	size        float64   // largest |α| and β so far: the scale of T
}

func (s *symmlq) Begin(p Problem) (trace.Reading, error) {
	*s = symmlq{}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	s.w = linear.Bulk[float64](s.n)
	if end, ok := s.open(&s.core, p.X); !ok {
		return end, nil
	}
	rd := s.start(s.beta)
	if rd.Done {
		return rd, nil
	}
	linear.Scale(s.w, 1/s.beta, s.z)
	s.tau = s.beta
	alpha, beta, z, end, ok := s.extend(&s.core)
	if !ok {
		return end, nil
	}
	s.alpha, s.gbar, s.dbar = alpha, alpha, beta
	s.size = max(math.Abs(alpha), beta)
	s.advance(z, beta, s.plain)
	return rd, nil
}

func (s *symmlq) Step() (trace.Reading, error) {
	s.next()
	alpha, beta := s.alpha, s.beta
	if beta <= 16*unit*s.size {
		return s.exhausted(alpha, beta)
	}
	ahead, further, z, end, ok := s.extend(&s.core)
	if !ok {
		return end, nil
	}
	gamma := math.Hypot(s.gbar, beta)
	c, sn := s.gbar/gamma, beta/gamma
	zeta := s.tau / gamma
	linear.Axpy2(s.x, zeta*c, s.w, zeta*sn/beta, s.z)
	linear.Lin(s.w, sn, s.w, -c/beta, s.z)
	s.tau = -((c*s.dbar+sn*ahead)*zeta + s.eps*s.zetaUp)
	s.gbar, s.dbar = sn*s.dbar-c*ahead, -c*further
	s.eps, s.zetaUp = sn*further, zeta
	s.last = math.Hypot(s.tau, s.eps*zeta)
	s.alpha = ahead
	s.size = max(s.size, math.Abs(ahead), further)
	s.advance(z, further, s.plain)
	return s.reading(alpha, beta, s.last == 0), nil
}

// exhausted takes the last step, to the conjugate gradient point of a space
// that cannot grow. Where T is singular there, nothing more of b is in reach.
func (s *symmlq) exhausted(alpha, beta float64) (trace.Reading, error) {
	if math.Abs(s.gbar) > 16*unit*s.size {
		zeta := s.tau / s.gbar
		linear.Axpy(zeta, s.w, s.x)
		s.last = math.Abs(s.eps*s.zetaUp + s.dbar*zeta)
	}
	return s.reading(alpha, beta, true), nil
}

func (s *symmlq) Solution(dst []float64) { copy(dst, s.x) }
