package check

import (
	"math"

	"dwindle/engine/linear"
)

// unit is the rounding unit of double precision.
const unit = 0x1p-53

// Residual is b−Ax, evaluated in twice the working precision.
type Residual struct {
	One, Two, Inf float64 // its norms
	Bound         float64 // of the rounding error in it, 2-norm
	Plain         float64 // what rounding could make of it in plain double precision, 2-norm
}

// residual computes r = b − Ax with compensated dot products, whose error in
// each row is at most u|r_i| + γ_m²(|A||x|+|b|)_i for m terms (Ogita, Rump and
// Oishi, SIAM J. Sci. Comput. 26 (2005) 1955–1988), and r₀ likewise.
func (w *work) residual() Residual {
	n := w.a.NRows
	w.r, w.size = make([]float64, n), make([]float64, n)
	bound, plain := make([]float64, n), make([]float64, n)
	for i := range n {
		w.r[i], w.size[i] = w.a.RowResidual(i, w.q.X, nil, w.q.System.B[i])
		g := gamma(w.a.Ptr[i+1] - w.a.Ptr[i] + 1)
		bound[i] = unit*math.Abs(w.r[i]) + g*g*w.size[i]
		plain[i] = g * w.size[i]
	}
	w.r0 = w.q.System.B
	if x0 := w.q.System.Guess; x0 != nil {
		w.r0 = make([]float64, n)
		for i := range n {
			w.r0[i], _ = w.a.RowResidual(i, x0, nil, w.q.System.B[i])
		}
	}
	return Residual{One: norm1(w.r), Two: linear.Norm2(w.r), Inf: linear.NormInf(w.r),
		Bound: linear.Norm2(bound), Plain: linear.Norm2(plain)}
}

// gamma is γ_m = m u/(1−m u).
func gamma(m int) float64 { return float64(m) * unit / (1 - float64(m)*unit) }

func norm1(x []float64) float64 {
	s := 0.0
	for _, v := range x {
		s += math.Abs(v)
	}
	return s
}
