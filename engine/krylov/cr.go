package krylov

import (
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var crEntry = Entry{
	Name: "cr", Title: "conjugate residuals",
	Source:   "Stiefel, Comment. Math. Helv. 29 (1955) 157–179; Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. (2003), section 6.8",
	Assumes:  linear.AssumesSymmetric | linear.AssumesDefinite | linear.AssumesFixedM | linear.AssumesSymmetricM,
	Norm:     trace.PrecondNorm,
	Products: "1",
	Monotone: true,
	Energy:   true,
	Memory:   func(n int, _ linear.Values) int64 { return vectors(8, n) },
	New:      func(linear.Values) Solver { return &cr{} },
}

// cr minimises √(rᵀM⁻¹r) over the Krylov space of M⁻¹A, as minres does, by
// directions whose products are conjugate in M⁻¹:
//
//	β_k = z_kᵀA z_k / z_{k−1}ᵀA z_{k−1}        z = M⁻¹ r
//	p = z + β p,  q = A z + β q  (= A p),  u = M⁻¹ q
//	α_k = z_kᵀA z_k / qᵀu
//	x += α p,  r −= α q,  z −= α u
//
// On a positive definite A the energy norm of the error falls as well
// (Hestenes and Stiefel 1952, theorem 7:5). On an indefinite one zᵀA z can
// vanish; minres has no such denominator.
type cr struct {
	core
	curv    curvature
	r, z    []float64 // residual and M⁻¹r; length n; z is r without a preconditioner
	az      []float64 // A z
	p, q, u []float64 // direction, A p and M⁻¹q; u is q without a preconditioner
	bent    []float64 // the z of the last event of curvature
	rho     float64   // zᵀA z of the last step; 0 before the first
}

func (s *cr) Begin(p Problem) (trace.Reading, error) {
	*s = cr{}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	for _, v := range []*[]float64{&s.r, &s.az, &s.p, &s.q, &s.bent} {
		*v = linear.Bulk[float64](s.n)
	}
	s.z, s.u = s.r, s.q
	res := s.residual(s.r, p.X)
	if s.plain || !finite(res) || res == 0 {
		return s.start(res), nil
	}
	s.z, s.u = linear.Bulk[float64](s.n), linear.Bulk[float64](s.n)
	rz := s.precondition(s.z, s.r)
	if !(rz > 0) || !finite(rz) {
		s.last = res
		return s.refuse("r'inv(M)r", rz, s.r, s.z)
	}
	return s.start(root(rz, s.r)), nil
}

func (s *cr) Step() (trace.Reading, error) {
	s.next()
	rho := linear.ApplyDot(s.a, s.az, s.z) // the product
	if !finite(rho) {
		return s.overflow("z'Az", rho)
	}
	if s.curv.watch(&s.core, s.z, rho); s.nev > 0 {
		copy(s.bent, s.z)
	}
	if rho == 0 {
		return s.stuck()
	}
	beta := 0.0
	if s.rho != 0 {
		beta = rho / s.rho
	}
	linear.Xpby(s.z, beta, s.p)
	linear.Xpby(s.az, beta, s.q)
	mu := 0.0
	if s.plain {
		mu = linear.Dot(s.q, s.q)
	} else if mu = s.precondition(s.u, s.q); mu < 0 { // the preconditioner
		return s.refuse("q'inv(M)q", mu, s.q, s.u)
	}
	alpha := rho / mu
	if !finite(alpha) || !finite(beta) {
		return s.overflow("alpha", alpha)
	}
	return s.move(alpha, beta, rho)
}

// move takes the step α along p.
func (s *cr) move(alpha, beta, rho float64) (trace.Reading, error) {
	rz := linear.AxpyDot(-alpha, s.q, s.r, s.r)
	if !s.plain && rz > 0 {
		rz = linear.AxpyDot(-alpha, s.u, s.z, s.r)
		if rz <= 0 { // the recurrence of z has parted from r: take it afresh
			rz = s.precondition(s.z, s.r)
		}
		if rz < 0 {
			return s.refuse("r'inv(M)r", rz, s.r, s.z)
		}
	}
	res := root(rz, s.r)
	if !finite(res) {
		return s.overflow("|r|", res)
	}
	linear.Axpy(alpha, s.p, s.x)
	s.last, s.rho = res, rho
	return s.reading(alpha, beta, res == 0), nil
}

// stuck ends a trial whose zᵀA z is zero.
func (s *cr) stuck() (trace.Reading, error) {
	if s.last <= exact*s.first {
		return s.ended()
	}
	return s.broken("z'Az", 0)
}

func (s *cr) Solution(dst []float64) { copy(dst, s.x) }

// Curvature shows the direction z of the last event of curvature; its product
// is still there in the step of the event.
func (s *cr) Curvature() (p, q []float64) { return s.bent, s.az }
