package run

import (
	"math"
	"slices"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// producer is the ability of a preconditioner to apply M itself.
type producer interface{ Product(dst, x []float64) }

// deviator is the ability of factors to tell ‖A − M‖_F/‖A‖_F, false where that
// is not cheap.
type deviator interface {
	Deviation(a *linear.CSR) (float64, bool)
}

// probe looks at a preconditioner with two random vectors, off the clock and
// uncounted: is M⁻¹ symmetric, linear and the same each time, positive, and
// how far is M⁻¹A from a multiple of the identity? It takes five uses of M⁻¹
// and one product, and changes no iterate. Complete factors are looked at only
// where the method supposes that they are definite.
func (t *Trial) probe() {
	if t.method.Precond.Name == "none" || t.hist.Direct && !t.hist.SPDM {
		return
	}
	s := t.scratch // nobody else works in it now
	p := prober{m: t.m.inner, u: s.x, v: s.r, mu: s.w, mv: s.own, w: linear.Bulk[float64](t.sys.N())}
	linear.Uniform(p.u, 1)
	linear.Uniform(p.v, 2)
	p.m.Apply(p.mu, p.u)
	p.m.Apply(p.mv, p.v)
	found := trace.MProbe{Asymmetry: p.asymmetry(), Plain: math.NaN(), WrongWay: math.NaN(), Transposed: math.NaN()}
	if e, ok := p.negative(); ok && t.hist.SPDM {
		t.event(e)
	}
	found.Opposite = linear.Dot(p.u, p.mu) < 0 && linear.Dot(p.v, p.mv) < 0
	found.Nonlinear, found.Unrepeatable = p.nonlinear(), p.unrepeatable()
	av, d := p.u, p.mu // what they held has had its last use
	t.a.inner.Apply(av, p.v)
	p.m.Apply(p.w, av)
	found.Distance = distance(p.v, p.w)
	if t.diagonal(d) {
		for i := range p.w {
			p.w[i] = av[i] / d[i]
		}
		found.Plain = distance(p.v, p.w)
	}
	if f, ok := t.m.inner.(deviator); ok && t.method.From == "" && t.prepared.Matrix() != nil {
		if share, ok := f.Deviation(t.prepared.Matrix()); ok {
			found.Deviation = share
		}
	}
	if t.method.Precond.InUserUnits {
		found.WrongWay = t.wrongWay(p.v, av, p.w)
		if mt, ok := linear.As[linear.Transposer](t.m.inner); ok {
			mt.ApplyT(p.w, av)
			found.Transposed = distance(p.v, p.w)
		}
	}
	t.mu.Lock()
	t.hist.Probe = &found
	if t.hist.SPDM {
		t.hist.PrecondAsymmetry = found.Asymmetry
	}
	t.mu.Unlock()
}

// prober holds two random vectors, what M⁻¹ makes of them, and room.
type prober struct {
	m               linear.Applier
	u, v, mu, mv, w []float64 // length n each
}

// asymmetry is |uᵀM⁻¹v − vᵀM⁻¹u| relative to ‖u‖‖M⁻¹v‖.
func (p *prober) asymmetry() float64 {
	gap := math.Abs(linear.Dot(p.u, p.mv) - linear.Dot(p.v, p.mu))
	return over(gap, linear.Norm2(p.u)*linear.Norm2(p.mv))
}

// nonlinear is ‖M⁻¹(u+v) − M⁻¹u − M⁻¹v‖ relative to ‖M⁻¹u‖ + ‖M⁻¹v‖. It
// leaves u + v in u.
func (p *prober) nonlinear() float64 {
	linear.Axpy(1, p.v, p.u)
	p.m.Apply(p.w, p.u)
	linear.Axpy(-1, p.mu, p.w)
	linear.Axpy(-1, p.mv, p.w)
	return over(linear.Norm2(p.w), linear.Norm2(p.mu)+linear.Norm2(p.mv))
}

// unrepeatable is how much M⁻¹v changes when it is asked for again.
func (p *prober) unrepeatable() float64 {
	p.m.Apply(p.w, p.v)
	linear.Axpy(-1, p.mv, p.w)
	return over(linear.Norm2(p.w), linear.Norm2(p.mv))
}

// negative reports a random vector with vᵀM⁻¹v < 0.
func (p *prober) negative() (trace.Event, bool) {
	for _, q := range [][2][]float64{{p.u, p.mu}, {p.v, p.mv}} {
		if d := linear.Dot(q[0], q[1]); d < 0 {
			return trace.Event{Kind: trace.PrecondIndefinite, Quantity: "v'inv(M)v of a random v",
				Value: d / (linear.Norm2(q[0]) * linear.Norm2(q[1]))}, true
		}
	}
	return trace.Event{}, false
}

// distance is ‖v − γw‖/‖v‖ with the best γ: the sine of the angle between
// them; NaN where w is zero or no number.
func distance(v, w []float64) float64 {
	vv, ww, vw := linear.Dot(v, v), linear.Dot(w, w), linear.Dot(v, w)
	return math.Sqrt(math.Max(0, 1-(vw/vv)*(vw/ww)))
}

// diagonal writes the diagonal of the prepared matrix to d; false where it is
// not known or an entry is zero.
func (t *Trial) diagonal(d []float64) bool {
	a := t.prepared.Matrix()
	if a == nil {
		return false
	}
	a.Diagonal(d)
	return !slices.Contains(d, 0)
}

// wrongWay is how far the user's own preconditioner is from A when it is taken
// for the opposite of what it was given as: M for M⁻¹, or M⁻¹ for M. NaN where
// the opposite cannot be applied. v is a vector, av = A v, w is room.
func (t *Trial) wrongWay(v, av, w []float64) float64 {
	switch m := t.m.inner.(type) {
	case *linear.CSR: // given as M⁻¹: does it act like A?
		m.Apply(w, v)
		return distance(av, w)
	case producer: // factors of M: does M A act like the identity?
		m.Product(w, av)
		return distance(v, w)
	}
	if t.method.Precond.Name != "solve" || t.prepared.Open == nil {
		return math.NaN()
	}
	m, err := t.prepared.Open(t.method.PrecondValues.Path("file"))
	if err != nil {
		return math.NaN()
	}
	m.Apply(w, av) // M, to be solved with: does M A act like the identity?
	return distance(v, w)
}
