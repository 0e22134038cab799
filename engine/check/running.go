package check

import (
	"math"

	"dwindle/engine/linear"
)

// Running are the estimates of ‖A‖ that minimal residual methods keep as they
// go: the Frobenius norm of the matrix that their Lanczos process has built
// (Paige and Saunders 1975 and 1982). They grow from step to step and pass
// ‖A‖_F once orthogonality is lost. From r₀, as such a method starts.
type Running struct {
	Norms []float64 // after step k = 1, 2, ...
	// WithStart are those of codes that also count the norm of r₀, nil where
	// that changes nothing.
	WithStart []float64
}

const (
	mostSteps   = 2000
	productWork = 1e9 // floating-point operations spent on the products
)

// running follows a Lanczos process from r₀; for a matrix that is not
// symmetric the bidiagonalisation of Golub and Kahan from r₀.
func (w *work) running() error {
	n := w.a.NRows
	steps := min(max(5*n, 50), mostSteps)
	steps = max(min(steps, int(productWork/float64(4*w.a.Entries()+20*n+1))), 10)
	sum := 0.0
	keep := func(square float64) bool {
		sum += square
		w.out.Running.Norms = append(w.out.Running.Norms, math.Sqrt(sum))
		return !math.IsInf(sum, 0) && !math.IsNaN(sum)
	}
	if w.symmetric {
		before := 0.0
		w.lanczos(w.r0, steps, func(alpha, beta float64) bool {
			more := keep(alpha*alpha + before*before + beta*beta)
			before = beta
			return more
		})
	} else {
		w.bidiagonal(steps, keep)
	}
	w.withStart()
	return w.ctx.Err()
}

// withStart adds what codes get that count ‖r₀‖ among the entries.
func (w *work) withStart() {
	r, b := &w.out.Running, linear.Norm2(w.r0)
	changed := false
	for _, a := range r.Norms {
		with := math.Hypot(a, b)
		r.WithStart = append(r.WithStart, with)
		changed = changed || with > 1.001*a
	}
	if !changed {
		r.WithStart = nil
	}
}

// bidiagonal runs the bidiagonalisation of Golub and Kahan (1965) from r₀ and
// hands out α_k² + β_{k+1}².
func (w *work) bidiagonal(steps int, keep func(square float64) bool) {
	n := w.a.NRows
	u, v, y := make([]float64, n), make([]float64, n), make([]float64, n)
	beta := linear.Norm2(w.r0)
	if !(beta > 0) || math.IsInf(beta, 0) {
		return
	}
	linear.Scale(u, 1/beta, w.r0)
	beta = 0
	most := 0.0
	for range steps {
		if w.ctx.Err() != nil {
			return
		}
		w.at.Apply(y, u)
		linear.Lin(v, 1, y, -beta, v)
		alpha := linear.Norm2(v)
		if !(alpha > exhausted*most) {
			return
		}
		linear.Scale(v, 1/alpha, v)
		w.a.Apply(y, v)
		linear.Lin(u, 1, y, -alpha, u)
		beta = linear.Norm2(u)
		most = math.Max(most, alpha+beta)
		if !keep(alpha*alpha+beta*beta) || !(beta > exhausted*most) {
			return
		}
		linear.Scale(u, 1/beta, u)
	}
}
