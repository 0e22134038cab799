package krylov_test

import (
	"math"
	"math/cmplx"
	"sort"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// stretched returns Morgan's kind of example: diagonal 1…n but for its first
// entries, which are small, and 0.1 above it.
func stretched(n int, small ...float64) *linear.CSR {
	var e []linear.Entry
	for i := range n {
		d := float64(i + 1)
		if i < len(small) {
			d = small[i]
		}
		e = append(e, linear.Entry{I: i, J: i, V: d})
		if i+1 < n {
			e = append(e, linear.Entry{I: i, J: i + 1, V: 0.1})
		}
	}
	return linear.FromEntries(n, n, e)
}

// A few small eigenvalues hold restarted GMRES up; GMRES-DR finds them once.
// What it tells stays true through many deflated restarts.
func TestDeflatedRestartBeatsRestart(t *testing.T) {
	a, b := stretched(400, 0.005, 0.01, 0.02, 0.05, 0.1), random(400, 21)
	deflated, plain := begun(t, a, b, nil, "gmresdr:24,6"), begun(t, a, b, nil, "gmres:24")
	full := begun(t, a, b, nil, "gmres:400")
	for !deflated.last.Done && deflated.last.Residual > 1e-9*deflated.first.Residual && deflated.steps < 3000 {
		before := deflated.last.Residual
		if deflated.step().Residual > before*(1+1e-6) {
			t.Errorf("step %d: ‖r‖ grows from %g to %g", deflated.steps, before, deflated.last.Residual)
		}
		rounding := 0x1p-53 * 400 * linear.Norm2(deflated.x()) // u‖A‖‖x‖
		near(t, "told − true", deflated.last.Residual, deflated.truth(), 1e-12+20*rounding)
	}
	plain.until(1e-9, 10*deflated.steps)
	full.until(1e-9, 400)
	if deflated.steps >= plain.steps/3 || deflated.steps < full.steps {
		t.Errorf("gmresdr takes %d steps, gmres %d, full gmres %d", deflated.steps, plain.steps, full.steps)
	}
	if e, ok := deflated.event(trace.Restart); !ok || !(e.Value < 1) {
		t.Errorf("events %+v", deflated.seen)
	}
	t.Logf("gmresdr takes %d steps, gmres %d (residual %.1e), full gmres %d",
		deflated.steps, plain.steps, plain.last.Residual/plain.first.Residual, full.steps)
}

// With A D and M = D the residuals are those of A alone.
func TestDeflatedRestartPreconditioned(t *testing.T) {
	a, b, scale := stretched(200, 0.02, 0.05, 0.2), random(200, 24), random(200, 25)
	columns := stretched(200, 0.02, 0.05, 0.2)
	for k, c := range columns.Col {
		columns.Val[k] *= 2 + scale[c]
	}
	for i := range scale {
		scale[i] = 1 / (2 + scale[i])
	}
	r := begunWith(t, columns, scaled(scale), b, nil, linear.Part{Name: "gmresdr", Args: []linear.Arg{{Text: "15"}, {Text: "4"}}})
	plain := begun(t, a, b, nil, "gmresdr:15,4")
	for range 60 {
		near(t, "‖r‖", r.step().Residual, plain.step().Residual, 1e-9)
		near(t, "told − true", r.last.Residual, r.truth(), 1e-9)
	}
}

// The first cycle is GMRES, and the second minimises over the harmonic Ritz
// vectors of the first and the Krylov space of its residual (Morgan 2002):
// here by dense least squares over that space, with the vectors from gonum.
func TestSecondCycleIsAugmented(t *testing.T) {
	const n, m = 60, 12
	cut := false
	for name, a := range map[string]*linear.CSR{"stretched": stretched(n, 0.01, 0.03, 0.1), "skew": nearSkew(n)} {
		for k := 1; k <= 5; k++ {
			b := random(n, 22)
			r, plain := begun(t, a, b, nil, "gmresdr:12,"+string(rune('0'+k))), begun(t, a, b, nil, "gmres:12")
			for range m {
				near(t, name+" first cycle", r.step().Residual, plain.step().Residual, 1e-11)
			}
			space := harmonicVectors(a, b, m, k)
			cut = cut || len(space) > k
			res := make([]float64, n)
			linear.Residual(res, a, r.x(), b)
			v, _ := arnoldi(a, res, m)
			for j := len(space); j < m; j++ {
				want := leastOver(a, res, append(space[:len(space):len(space)], v[:j-len(space)+1]...))
				near(t, name+" second cycle", r.step().Residual/want, 1, 1e-7)
			}
		}
	}
	if !cut {
		t.Error("no pair was ever at the cut")
	}
}

// leastOver returns min ‖b − A y‖ over the span of the vectors.
func leastOver(a *linear.CSR, b []float64, vectors [][]float64) float64 {
	image := mat.NewDense(len(b), len(vectors), nil)
	w := make([]float64, len(b))
	for j, u := range vectors {
		a.Apply(w, u)
		image.SetCol(j, w)
	}
	return fit(image, b)
}

// harmonicVectors returns V g for the k harmonic Ritz vectors g of least
// value, one more where a pair is at the cut: real and imaginary parts.
func harmonicVectors(a *linear.CSR, b []float64, m, k int) [][]float64 {
	v, h := arnoldi(a, b, m)
	g := mat.DenseCopyOf(h.Slice(0, m, 0, m))
	e, f := mat.NewVecDense(m, nil), mat.NewVecDense(m, nil)
	e.SetVec(m-1, h.At(m, m-1)*h.At(m, m-1))
	if err := f.SolveVec(g.T(), e); err != nil {
		panic(err)
	}
	for i := range m {
		g.Set(i, m-1, g.At(i, m-1)+f.AtVec(i))
	}
	var eig mat.Eigen
	eig.Factorize(g, mat.EigenRight)
	values, vectors := eig.Values(nil), mat.CDense{}
	eig.VectorsTo(&vectors)
	order := make([]int, m)
	for i := range order {
		order[i] = i
	}
	sort.SliceStable(order, func(i, j int) bool { return cmplx.Abs(values[order[i]]) < cmplx.Abs(values[order[j]]) })
	var out [][]float64
	for _, j := range order {
		if len(out) >= k || imag(values[j]) < 0 {
			if len(out) >= k {
				break
			}
			continue
		}
		re, im := make([]float64, len(b)), make([]float64, len(b))
		for i := range m {
			linear.Axpy(real(vectors.At(i, j)), v[i], re)
			linear.Axpy(imag(vectors.At(i, j)), v[i], im)
		}
		out = append(out, unitOf(re))
		if math.Abs(imag(values[j])) > 0 {
			out = append(out, unitOf(im))
		}
	}
	return out
}

// arnoldi returns m+1 vectors and H̄, with full reorthogonalisation.
func arnoldi(a *linear.CSR, b []float64, m int) ([][]float64, *mat.Dense) {
	v, h := [][]float64{unitOf(b)}, mat.NewDense(m+1, m, nil)
	for j := range m {
		w := make([]float64, len(b))
		a.Apply(w, v[j])
		for range 2 {
			for i, u := range v {
				d := linear.Dot(u, w)
				h.Set(i, j, h.At(i, j)+d)
				linear.Axpy(-d, u, w)
			}
		}
		h.Set(j+1, j, linear.Norm2(w))
		v = append(v, unitOf(w))
	}
	return v, h
}

// A cycle of one vector has none to carry and is GMRES(1); a cycle that spans
// everything ends as GMRES does.
func TestShortAndLongCycles(t *testing.T) {
	a, b := drift(12), random(12, 23)
	for _, cycle := range []string{"1", "12", "40"} {
		r, plain := begun(t, a, b, nil, "gmresdr:"+cycle), begun(t, a, b, nil, "gmres:"+cycle)
		for range 11 {
			near(t, cycle, r.step().Residual, plain.step().Residual, 1e-12)
		}
	}
	for _, a := range []*linear.CSR{fromRows([]float64{0, 1}, []float64{0, 0}), diagonal(0, 2)} {
		r := begun(t, a, ones(2), nil, "gmresdr:5")
		r.until(0, 10)
		if e, ok := r.event(trace.Breakdown); !r.last.Done || !ok || e.Quantity != "R(k,k)" {
			t.Errorf("%+v, events %+v", r.last, r.seen)
		}
		near(t, "told", r.last.Residual, r.truth(), 1e-14)
	}
	r := begun(t, shift(8), e1(8), nil, "gmresdr:8")
	for range 7 {
		near(t, "shift", r.step().Residual, 1, 1e-12)
	}
	near(t, "shift at the end", r.step().Residual, 0, 1e-12)
}
