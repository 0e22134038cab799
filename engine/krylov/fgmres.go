package krylov

import (
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var fgmresEntry = Entry{
	Name: "fgmres", Title: "flexible GMRES, restarted",
	Source: "Saad, SIAM J. Sci. Comput. 14 (1993) 461–469",
	Params: []linear.Param{{Name: "m", Kind: linear.Int, Default: 30, Min: 1, Max: 500,
		Meaning: "restart length: inner vectors in a cycle"}},
	Norm:      trace.TwoNorm,
	Products:  "1 inner vector",
	Restarted: true,
	Monotone:  true,
	Memory: func(n int, v linear.Values) int64 {
		m := cycle(n, v)
		return arnoldiBytes(m, n) + vectors(m, n) + 24*int64(m)
	},
	New: func(v linear.Values) Solver { return &fgmres{values: v} },
}

// fgmres is flexible GMRES(m): it keeps each z_k = M_k⁻¹v_k beside v_k, so
// that M may change from one step to the next, and minimises ‖b − Ax‖₂ over
// x₀ + span(z). With a fixed M it is GMRES(m) at twice the memory, and x needs
// no further use of M.
type fgmres struct {
	arnoldi
	values linear.Values
	z      [][]float64 // length vectors of length n; v itself without a preconditioner
}

func (s *fgmres) Begin(p Problem) (trace.Reading, error) {
	*s = fgmres{values: s.values}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	s.prepare(cycle(s.n, s.values))
	if s.z = s.v; !s.plain {
		s.z = rows(s.length, s.n)
	}
	res := s.residual(s.v[0], p.X)
	s.open(res)
	return s.start(res), nil
}

func (s *fgmres) Step() (trace.Reading, error) {
	s.next()
	if s.full() && s.restart() {
		return s.ended()
	}
	k := s.h.k
	if !s.plain {
		s.m.Apply(s.z[k], s.v[k])
	}
	s.a.Apply(s.v[k+1], s.z[k]) // the product
	return s.extend()
}

// restart takes the cycle's correction into x, measures the residual afresh
// and opens the next cycle. It says whether that is the end.
func (s *fgmres) restart() (end bool) {
	s.correct(s.x)
	return s.close(linear.Residual(s.v[0], s.a, s.x, s.b)) // one more product
}

// correct adds Z y to x, where y minimises the residual over the cycle's
// space.
func (s *fgmres) correct(x []float64) {
	for j, yj := range s.h.solve() {
		linear.Axpy(yj, s.z[j], x)
	}
}

// Solution writes the iterate of the present inner vector.
func (s *fgmres) Solution(dst []float64) {
	copy(dst, s.x)
	s.correct(dst)
}
