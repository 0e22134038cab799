package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/spectrum"
	"dwindle/engine/trace"
)

var gmresdrEntry = Entry{
	Name: "gmresdr", Title: "GMRES with deflated restarts",
	Source: "Morgan, SIAM J. Sci. Comput. 24 (2002) 20–37",
	Params: []linear.Param{
		{Name: "m", Kind: linear.Int, Default: 30, Min: 1, Max: 500, Meaning: "restart length: vectors in a cycle"},
		{Name: "k", Kind: linear.Int, Default: 8, Min: 1, Max: 200,
			Meaning: "harmonic Ritz vectors carried over a restart, at most m−1"}},
	Assumes:   linear.AssumesFixedM,
	Norm:      trace.TwoNorm,
	Products:  "1 inner vector",
	Restarted: true,
	Dense:     true,
	Monotone:  true,
	Memory: func(n int, v linear.Values) int64 {
		m, most := cycle(n, v), carried(n, v)+1
		return vectors(m+5, n) + 24*int64(2*m+1) + fitBytes(m, most) + spectrum.HarmonicBytes(m) + vectors(most+3, m+1)
	},
	New: func(v linear.Values) Solver { return &gmresdr{values: v} },
}

// carried returns how many vectors a restart carries over; a conjugate pair
// can make it one more.
func carried(n int, v linear.Values) int { return min(v.Int("k"), cycle(n, v)-1) }

// gmresdr is GMRES-DR(m,k), preconditioned from the right. A cycle ends with
// A M⁻¹V_m = V_{m+1}H̄ and the residual V_{m+1}ĉ. The next begins with the
// harmonic Ritz vectors of least value in place of nothing: with P_k an
// orthonormal basis of them, and P of them and ĉ,
//
//	V ← V_{m+1}P,  H̄ ← Pᵀ H̄ P_k,  c ← Pᵀĉ
//
// is again such a relation, full in its first k columns, and grows by Arnoldi
// steps to m. So the small eigenvalues that hold a restarted method up are
// found once and stay removed. The restart measures b − Ax again; where it has
// parted from V_{m+1}ĉ by a hundredth, or the cycle exhausted its space, the
// next cycle is one of GMRES.
type gmresdr struct {
	core
	values   linear.Values
	v        span      // length m+1
	z, u, r  []float64 // M⁻¹v and scratch, nil without a preconditioner; b − Ax; length n
	f        fit
	harmonic *spectrum.Harmonic
	p        [][]float64 // carried+2 columns of P, length m+1
	top      [][]float64 // their first m entries
	c, t     []float64   // ĉ, and scratch, length m+1
	fold     func(part int)
	folds    int  // columns of P in use by fold
	spent    bool // the cycle exhausted its space
	lost     float64
	opening  float64 // ‖r‖ at the start of the cycle
	size     float64 // largest ‖A M⁻¹v‖ of the cycle
}

func (s *gmresdr) Begin(p Problem) (trace.Reading, error) {
	*s = gmresdr{values: s.values}
	if err := s.begin(p); err != nil {
		return trace.Reading{}, err
	}
	m, most := cycle(s.n, s.values), carried(s.n, s.values)+1
	s.v, s.r, s.f = rows(m+1, s.n), linear.Bulk[float64](s.n), newFit(m, most)
	if !s.plain {
		s.z, s.u = linear.Bulk[float64](s.n), linear.Bulk[float64](s.n)
	}
	s.harmonic, s.c, s.t = spectrum.NewHarmonic(m), make([]float64, m+1), make([]float64, m+1)
	s.p, s.top = rows(most+1, m+1), make([][]float64, most)
	for i := range s.top {
		s.top[i] = s.p[i][:m]
	}
	s.fold = s.foldRows
	res := s.residual(s.r, p.X)
	s.open(res)
	return s.start(res), nil
}

// open starts a cycle of GMRES from the residual r of norm res.
func (s *gmresdr) open(res float64) {
	s.opening, s.size, s.spent, s.lost = res, 0, false, 1
	s.f.start()
	s.f.g[0] = res
	if res > 0 {
		linear.Scale(s.v[0], 1/res, s.r)
	}
}

func (s *gmresdr) Step() (trace.Reading, error) {
	s.next()
	if (s.f.k == len(s.v)-1 || s.spent) && s.restart() {
		return s.ended()
	}
	k := s.f.k
	w, from := s.v[k+1], s.v[k]
	if !s.plain {
		s.m.Apply(s.z, from)
		from = s.z
	}
	s.a.Apply(w, from) // the product
	before, after := s.v.orthogonalise(w, s.f.column(), k)
	if !finite(before) || !finite(after) {
		return s.overflow("|A inv(M) v|", before)
	}
	s.size = max(s.size, before)
	zero := 8 * float64(k+1) * unit // rounding left by k+1 projections
	s.spent = after <= zero*before
	if d := s.f.rotate(k + 2); s.spent && d <= zero*s.size {
		s.lost = cosine(d, s.size, 1)
		if k == 0 {
			return s.broken("R(k,k)", s.lost)
		}
		return s.reading(math.NaN(), math.NaN(), false), nil
	}
	s.last = s.f.accept()
	if !s.spent {
		linear.Scale(w, 1/after, w)
	}
	return s.reading(math.NaN(), math.NaN(), false), nil
}

// restart takes the cycle's correction into x, measures the residual afresh
// and opens the next cycle. It says whether that is the end: see arnoldi.
func (s *gmresdr) restart() (end bool) {
	s.correct(s.x)
	res := linear.Residual(s.r, s.a, s.x, s.b) // one more product
	if !finite(res) {
		s.event(trace.NonFinite, "|b-Ax|", res)
	}
	factor := res / s.opening
	s.event(trace.Restart, "cycle factor", factor)
	floor := s.spent && factor > 0.5
	if floor && s.lost < 1 {
		s.event(trace.Breakdown, "R(k,k)", s.lost)
	}
	s.last = res
	end = floor || res == 0 || !finite(res)
	if end || s.spent || !s.deflate(res) {
		s.open(res)
	}
	return end
}

// correct adds M⁻¹ V y to x, where y minimises the residual over the cycle's
// space.
func (s *gmresdr) correct(x []float64) {
	sum := x
	if !s.plain {
		clear(s.u)
		sum = s.u
	}
	for j, yj := range s.f.solve() {
		linear.Axpy(yj, s.v[j], sum)
	}
	if !s.plain {
		s.m.Apply(s.z, s.u)
		linear.Axpy(1, s.z, x)
	}
}

// Solution writes the iterate of the present inner vector.
func (s *gmresdr) Solution(dst []float64) {
	copy(dst, s.x)
	s.correct(dst)
}
