package krylov_test

import (
	"math"
	"testing"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// Full GCR and full FGMRES have the residuals of full GMRES, with a
// preconditioner too, and so have their restarted forms.
func TestMinimalMethodsAgree(t *testing.T) {
	a, b := drift(80), random(80, 11)
	for _, m := range []string{"none", "jacobi", "ssor"} {
		for _, cycle := range []string{"80", "7"} {
			base := begun(t, a, b, nil, "gmres:"+cycle+"+"+m)
			gcr, flexible := begun(t, a, b, nil, "gcr:"+cycle+"+"+m), begun(t, a, b, nil, "fgmres:"+cycle+"+"+m)
			for base.last.Residual > 1e-9*base.first.Residual {
				want := base.step().Residual
				near(t, m+" gcr", gcr.step().Residual, want, 1e-10)
				near(t, m+" fgmres", flexible.step().Residual, want, 1e-10)
			}
			for _, r := range []*trial{base, gcr, flexible} {
				near(t, "told − true", r.last.Residual, r.truth(), 1e-12)
			}
			if base.steps < 3 {
				t.Fatalf("%s ends in %d steps", m, base.steps)
			}
		}
	}
}

// changing is a preconditioner that is another one at every use: Jacobi's
// diagonal to a changing power.
type changing struct {
	d    []float64
	uses *int
}

func (c changing) Apply(dst, x []float64) {
	*c.uses++
	power := 0.3 * float64(*c.uses%4)
	for i, v := range x {
		dst[i] = v / math.Pow(c.d[i], power)
	}
}

// With an M that changes from step to step FGMRES and GCR still tell the true
// residual, minimise it and converge; GMRES, which assumes a fixed M, does not.
func TestFlexibleMethods(t *testing.T) {
	a, b := uneven(10), random(100, 12)
	d := make([]float64, 100)
	a.Diagonal(d)
	m := func() changing { return changing{d, new(int)} }
	part := func(name string) linear.Part { return linear.Part{Name: name, Args: []linear.Arg{{Text: "100"}}} }
	for _, name := range []string{"fgmres", "gcr"} {
		r := begunWith(t, a, m(), b, nil, part(name))
		for !r.last.Done && r.last.Residual > 1e-9*r.first.Residual && r.steps < 100 {
			before := r.last.Residual
			if rd := r.step(); rd.Residual > before*(1+1e-12) {
				t.Errorf("%s: ‖r‖ grows from %g to %g", name, before, rd.Residual)
			}
			near(t, name+" told − true", r.last.Residual, r.truth(), 1e-11)
		}
		if r.last.Residual > 1e-9*r.first.Residual {
			t.Errorf("%s: %g after %d steps", name, r.last.Residual, r.steps)
		}
	}
	r := begunWith(t, a, m(), b, nil, part("gmres"))
	for r.last.Residual > 1e-6*r.first.Residual {
		r.step()
	}
	if r.truth() < 10*r.last.Residual {
		t.Errorf("gmres with a changing M: %g told, %g true: the test has no teeth", r.last.Residual, r.truth())
	}
}

// The cyclic shift: FGMRES does as GMRES; qᵀr₀ = 0 stops GCR, which says so.
func TestCyclicShiftMinimal(t *testing.T) {
	a := shift(8)
	r := begun(t, a, e1(8), nil, "fgmres:8")
	for range 7 {
		near(t, "fgmres", r.step().Residual, 1, 1e-12)
	}
	near(t, "fgmres at the end", r.step().Residual, 0, 1e-12)
	near(t, "true residual", r.truth(), 0, 1e-12)
	r = begun(t, a, e1(8), nil, "gcr:8")
	r.until(0, 20)
	if e, ok := r.event(trace.Breakdown); !r.last.Done || !ok || e.Quantity != "|A inv(M) r|" || e.Value != 0 || r.steps != 3 {
		t.Errorf("gcr: %d steps, %+v, events %+v", r.steps, r.last, r.seen)
	}
	near(t, "gcr", r.truth(), 1, 0)
}

// A singular A ends GCR with the same event, at the residual out of reach.
func TestGCRSingular(t *testing.T) {
	r := begun(t, diagonal(0, 2), ones(2), nil, "gcr:5")
	r.until(0, 20)
	if e, ok := r.event(trace.Breakdown); !r.last.Done || !ok || e.Quantity != "|A inv(M) r|" {
		t.Errorf("%+v, events %+v", r.last, r.seen)
	}
	near(t, "told", r.last.Residual, 1, 1e-14)
	near(t, "true", r.truth(), 1, 1e-14)
}

// From the left GMRES minimises ‖M⁻¹(b − Ax)‖₂: it is GMRES for M⁻¹A and
// M⁻¹b, and says so; without a preconditioner the side is of no matter.
func TestGMRESFromTheLeft(t *testing.T) {
	const n = 60
	a, b := drift(n), random(n, 13)
	d := make([]float64, n)
	a.Diagonal(d)
	scaled, rhs := drift(n), make([]float64, n)
	for i := range n {
		for k := a.Ptr[i]; k < a.Ptr[i+1]; k++ {
			scaled.Val[k] /= d[i]
		}
		rhs[i] = b[i] / d[i]
	}
	for _, cycle := range []string{"60", "5"} {
		left, base := begun(t, a, b, nil, "gmres:"+cycle+",left+jacobi"), begun(t, scaled, rhs, nil, "gmres:"+cycle)
		near(t, "first", left.first.Residual, base.first.Residual, 1e-14)
		for range 12 {
			near(t, "‖M⁻¹r‖", left.step().Residual, base.step().Residual, 1e-12)
			res := make([]float64, n)
			linear.Residual(res, a, left.x(), b)
			for i := range res {
				res[i] /= d[i]
			}
			near(t, "told − true", left.last.Residual, linear.Norm2(res), 1e-12)
		}
	}
	e := begun(t, a, b, nil, "gmres:5,left").entry
	for side, want := range map[string]trace.Norm{"left": trace.LeftNorm, "right": trace.TwoNorm} {
		v, err := linear.Resolve("gmres", e.Params, []linear.Arg{{Name: "side", Text: side}})
		if err != nil || e.Watched(v) != want {
			t.Errorf("%s watches %q, %v", side, e.Watched(v), err)
		}
	}
	one, two := begun(t, a, b, nil, "gmres:5,left"), begun(t, a, b, nil, "gmres:5")
	for range 8 {
		if x, y := one.step(), two.step(); !same(x.Residual, y.Residual) {
			t.Errorf("%g and %g", x.Residual, y.Residual)
		}
	}
}

// IDR(s) ends within n + n/s products (Sonneveld and van Gijzen 2008), the
// cyclic shift included, which stops the BiCG family at once. (With s = 1 on
// the shift, rounding is far ahead of that.)
func TestIDREnds(t *testing.T) {
	for _, s := range []int{1, 2, 4, 8} {
		for name, a := range map[string]*linear.CSR{"drift": drift(24), "shift": shift(24), "plate": plate(5)} {
			if s == 1 && name == "shift" {
				continue
			}
			n := a.NRows
			pairing := "idr:" + string(rune('0'+s))
			r := begun(t, a, random(n, 14), nil, pairing)
			limit := n + (n+s-1)/s
			for !r.last.Done && r.last.Residual > 1e-6*r.first.Residual && (r.steps+1)*(s+1) <= limit+s {
				r.step()
			}
			if got := r.truth() / r.first.Residual; got > 1e-5 {
				t.Errorf("%s on %s: %g after %d products, events %+v", pairing, name, got, r.steps*(s+1), r.seen)
			}
			near(t, "told − true", r.last.Residual, r.truth(), 1e-8*r.first.Residual)
		}
	}
}

// More dimensions need fewer products on a hard problem.
func TestIDRNeedsFewerProducts(t *testing.T) {
	a := opened(t, "olm1000.mtx")
	one, eight := begun(t, a, ones(1000), nil, "idr:1+ilu:0"), begun(t, a, ones(1000), nil, "idr:8+ilu:0")
	few, many := 9*eight.until(1e-8, 100), 2*one.until(1e-8, 1000)
	for _, r := range []*trial{one, eight} {
		if !(r.truth() <= 2e-8*r.first.Residual) {
			t.Errorf("true residual %g, %+v", r.truth(), r.seen)
		}
	}
	if few >= many {
		t.Errorf("idr:8 takes %d products, idr:1 %d", few, many)
	}
	t.Logf("idr:8 takes %d products, idr:1 %d", few, many)
}

// A skew matrix: tᵀr = 0 leaves IDR without an ω.
func TestIDRSkew(t *testing.T) {
	r := begun(t, fromRows([]float64{0, 1, 0, 0}, []float64{-1, 0, 0, 0}, []float64{0, 0, 0, 2}, []float64{0, 0, -2, 0}), ones(4), nil, "idr:1")
	r.until(0, 9)
	if e, ok := r.event(trace.Breakdown); !ok || e.Quantity != "omega" || !r.last.Done || math.Abs(e.Value) > 1e-30 {
		t.Errorf("%+v, events %+v", r.last, r.seen)
	}
	near(t, "told − true", r.last.Residual, r.truth(), 1e-13)
}
