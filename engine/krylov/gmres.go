package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var gmresEntry = Entry{
	Name: "gmres", Title: "generalised minimal residual, restarted",
	Source: "Saad and Schultz, SIAM J. Sci. Stat. Comput. 7 (1986) 856–869",
	Params: []linear.Param{{Name: "m", Kind: linear.Int, Default: 30, Min: 1, Max: 500,
		Meaning: "restart length: inner vectors in a cycle"}},
	Assumes:   linear.AssumesFixedM,
	Norm:      trace.TwoNorm,
	Products:  "1 inner vector",
	Restarted: true,
	Monotone:  true,
	Memory: func(n int, v linear.Values) int64 {
		m := cycle(n, v)
		return vectors(m+4, n) + hessenbergBytes(m)
	},
	New: func(v linear.Values) Solver { return &gmres{values: v} },
}

// cycle returns the restart length, which never exceeds n.
func cycle(n int, v linear.Values) int { return max(1, min(n, v.Int("m"))) }

// gmres is GMRES(m), preconditioned from the right, so that it minimises
// ‖b − Ax‖₂ over x₀ + M⁻¹K_k(AM⁻¹, r₀). One step is one inner vector:
//
//	w = A M⁻¹v_k,  h_i = v_iᵀw,  w −= h_i v_i  (modified Gram–Schmidt)
//
// A second pass over the v_i is made when the first cancels: when ‖w‖ falls
// below 0.1/√2 of what it was. ‖w‖ within rounding of zero is the happy
// breakdown: the space is exhausted and holds the solution, unless R is
// singular; then its last column is dropped. The restart happens at the start
// of the step after a full or exhausted cycle and measures b − Ax again. An
// exhausted cycle that did not halve the residual so measured is the end: the
// floor, or, if R was singular, a breakdown.
type gmres struct {
	core
	values  linear.Values
	length  int         // of a cycle
	v       [][]float64 // length+1 orthonormal vectors of length n
	z, u    []float64   // M⁻¹v and scratch, length n; nil without a preconditioner
	h       hessenberg
	spent   bool    // the cycle exhausted its space
	lost    float64 // then R's last diagonal entry over size, if R is singular; else 1
	opening float64 // ‖r‖ at the start of the cycle
	size    float64 // largest ‖A M⁻¹v‖ of the cycle: the scale of H
}

func (s *gmres) Begin(p Problem) (trace.Reading, error) {
	*s = gmres{values: s.values}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	s.length = cycle(s.n, s.values)
	slab := make([]float64, (s.length+1)*s.n)
	s.v = make([][]float64, s.length+1)
	for i := range s.v {
		s.v[i] = slab[i*s.n : (i+1)*s.n : (i+1)*s.n]
	}
	if !s.plain {
		s.z, s.u = make([]float64, s.n), make([]float64, s.n)
	}
	s.h = newHessenberg(s.length)
	res := s.residual(s.v[0], p.X)
	s.open(res)
	return s.start(res), nil
}

// open starts a cycle: v₀ holds the residual of norm res.
func (s *gmres) open(res float64) {
	s.opening, s.size, s.spent, s.lost = res, 0, false, 1
	s.h.start(res)
	if res > 0 {
		linear.Scale(s.v[0], 1/res, s.v[0])
	}
}

func (s *gmres) Step() (trace.Reading, error) {
	s.next()
	if (s.h.k == s.length || s.spent) && s.restart() {
		return s.ended()
	}
	k := s.h.k
	w, from := s.v[k+1], s.v[k]
	if !s.plain {
		s.m1(from)
		from = s.z
	}
	s.a.Apply(w, from) // the product
	before, after := s.orthogonalise(w)
	if !finite(before) || !finite(after) {
		return s.overflow("|A inv(M) v|", before)
	}
	s.size = max(s.size, before)
	zero := 8 * float64(k+1) * unit // rounding left by k+1 projections
	s.spent = after <= zero*before
	if d := s.h.rotate(); s.spent && d <= zero*s.size {
		s.lost = cosine(d, s.size, 1)
		if k == 0 {
			return s.broken("R(k,k)", s.lost)
		}
		return s.reading(math.NaN(), math.NaN(), false), nil
	}
	s.last = s.h.accept()
	if !s.spent {
		linear.Scale(w, 1/after, w)
	}
	return s.reading(math.NaN(), math.NaN(), false), nil
}

// m1 computes z = M⁻¹ x.
func (s *gmres) m1(x []float64) { s.m.Apply(s.z, x) }

// orthogonalise removes the span of v_0..v_k from w and fills the column of H.
// It returns ‖w‖ before and after.
func (s *gmres) orthogonalise(w []float64) (before, after float64) {
	col := s.h.column()
	clear(col)
	after = s.project(w, col)
	before = after
	for _, h := range col[:s.h.k+1] {
		before = math.Hypot(before, h)
	}
	if after < 0.1*math.Sqrt2/2*before {
		after = s.project(w, col)
	}
	col[s.h.k+1] = after
	return before, after
}

// project makes one pass of modified Gram–Schmidt, adds the coefficients to
// col and returns ‖w‖. Each subtraction shares its pass over w with the next
// dot product.
func (s *gmres) project(w, col []float64) float64 {
	k := s.h.k
	d := linear.Dot(s.v[0], w)
	for i := 0; i < k; i++ {
		col[i] += d
		d = linear.AxpyDot(-d, s.v[i], w, s.v[i+1])
	}
	col[k] += d
	return root(linear.AxpyDot(-d, s.v[k], w, w), w)
}

// restart takes the cycle's correction into x, measures the residual afresh
// and opens the next cycle. It says whether that is the end.
func (s *gmres) restart() (end bool) {
	s.correct(s.x)
	res := linear.Residual(s.v[0], s.a, s.x, s.b) // one more product
	if !finite(res) {
		s.event(trace.NonFinite, "|b-Ax|", res)
	}
	factor := res / s.opening
	s.event(trace.Restart, "cycle factor", factor)
	floor := s.spent && factor > 0.5
	if floor && s.lost < 1 {
		s.event(trace.Breakdown, "R(k,k)", s.lost)
	}
	end = floor || res == 0 || !finite(res)
	s.last = res
	s.open(res)
	return end
}

// correct adds M⁻¹ V y to x, where y minimises the residual over the cycle's
// space.
func (s *gmres) correct(x []float64) {
	y := s.h.solve()
	if len(y) == 0 {
		return
	}
	sum := x
	if !s.plain {
		clear(s.u)
		sum = s.u
	}
	for j, yj := range y {
		linear.Axpy(yj, s.v[j], sum)
	}
	if !s.plain {
		s.m1(s.u)
		linear.Axpy(1, s.z, x)
	}
}

// Solution writes the iterate of the present inner vector.
func (s *gmres) Solution(dst []float64) {
	copy(dst, s.x)
	s.correct(dst)
}
