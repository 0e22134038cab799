package krylov

import (
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var gmresEntry = Entry{
	Name: "gmres", Title: "generalised minimal residual, restarted",
	Source: "Saad and Schultz, SIAM J. Sci. Stat. Comput. 7 (1986) 856–869",
	Params: []linear.Param{{Name: "m", Kind: linear.Int, Default: 30, Min: 1, Max: 500,
		Meaning: "restart length: inner vectors in a cycle"},
		{Name: "side", Kind: linear.Choice, Choices: []string{"right", "left"}, Quiet: true,
			Meaning: "where M stands; left watches the length of M⁻¹r"}},
	Assumes:   linear.AssumesFixedM,
	Norm:      trace.TwoNorm,
	Products:  "1 inner vector",
	Restarted: true,
	Monotone:  true,
	NormOf: func(v linear.Values) trace.Norm {
		if v.Choice("side") == "left" {
			return trace.LeftNorm
		}
		return trace.TwoNorm
	},
	Memory: func(n int, v linear.Values) int64 { return arnoldiBytes(cycle(n, v), n) + vectors(2, n) },
	New:    func(v linear.Values) Solver { return &gmres{values: v} },
}

// cycle returns the restart length, which never exceeds n.
func cycle(n int, v linear.Values) int { return max(1, min(n, v.Int("m"))) }

// gmres is GMRES(m). Preconditioned from the right it minimises ‖b − Ax‖₂ over
// x₀ + M⁻¹K_k(AM⁻¹, r₀); from the left, ‖M⁻¹(b − Ax)‖₂ over
// x₀ + K_k(M⁻¹A, M⁻¹r₀), and that is the number it watches. One step is one
// inner vector, A M⁻¹v_k or M⁻¹A v_k. The restart happens at the start of the
// step after a full or exhausted cycle and measures b − Ax again.
type gmres struct {
	arnoldi
	values linear.Values
	left   bool      // M stands left; never without a preconditioner
	z, u   []float64 // M⁻¹v (left: A v) and scratch, length n; nil without a preconditioner
}

func (s *gmres) Begin(p Problem) (trace.Reading, error) {
	*s = gmres{values: s.values}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	s.prepare(cycle(s.n, s.values))
	if !s.plain {
		s.z, s.u = linear.Bulk[float64](s.n), linear.Bulk[float64](s.n)
	}
	s.left = !s.plain && s.values.Choice("side") == "left"
	res := s.residual(s.v[0], p.X)
	if s.left && res > 0 && finite(res) {
		res = s.seen()
	}
	s.open(res)
	return s.start(res), nil
}

// seen turns the residual in v₀ into M⁻¹ of it, and returns its norm.
func (s *gmres) seen() float64 {
	copy(s.z, s.v[0])
	s.m.Apply(s.v[0], s.z)
	return linear.Norm2(s.v[0])
}

func (s *gmres) Step() (trace.Reading, error) {
	s.next()
	if s.full() && s.restart() {
		return s.ended()
	}
	w, from := s.v[s.h.k+1], s.v[s.h.k]
	switch {
	case s.plain:
		s.a.Apply(w, from) // the product
	case s.left:
		s.a.Apply(s.z, from)
		s.m.Apply(w, s.z)
	default:
		s.m.Apply(s.z, from)
		s.a.Apply(w, s.z)
	}
	return s.extend()
}

// restart takes the cycle's correction into x, measures the residual afresh
// and opens the next cycle. It says whether that is the end.
func (s *gmres) restart() (end bool) {
	s.correct(s.x)
	res := linear.Residual(s.v[0], s.a, s.x, s.b) // one more product
	if s.left && finite(res) {
		res = s.seen()
	}
	return s.close(res)
}

// correct adds M⁻¹ V y (left: V y) to x, where y minimises the residual over
// the cycle's space.
func (s *gmres) correct(x []float64) {
	y := s.h.solve()
	if len(y) == 0 {
		return
	}
	direct := s.plain || s.left
	sum := x
	if !direct {
		clear(s.u)
		sum = s.u
	}
	for j, yj := range y {
		linear.Axpy(yj, s.v[j], sum)
	}
	if !direct {
		s.m.Apply(s.z, s.u)
		linear.Axpy(1, s.z, x)
	}
}

// Solution writes the iterate of the present inner vector.
func (s *gmres) Solution(dst []float64) {
	copy(dst, s.x)
	s.correct(dst)
}
