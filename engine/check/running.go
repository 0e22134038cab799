package check

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/spectrum"
)

// Running is what a minimal residual method without a preconditioner keeps as
// it goes from x₀: MINRES where A is symmetric, LSQR elsewhere (Paige and
// Saunders 1975 and 1982). Its estimate of ‖A‖ is the Frobenius norm of the
// matrix that the Lanczos process has built; it grows from step to step and
// passes ‖A‖_F once orthogonality is lost.
type Running struct {
	Method    string    // "minres" or "lsqr"
	Norms     []float64 // ‖A‖ after step k = 1, 2, ...
	WithStart []float64 // of codes that count ‖r₀‖ among the entries; nil where that changes nothing
	Residuals []float64 // ‖b−Ax_k‖₂ by recurrence
	// Condition is the ratio of the outermost Ritz values of a symmetric A whose
	// Ritz values are all positive, a lower bound of its condition; NaN else.
	Condition float64
}

const (
	mostSteps   = 2000
	productWork = 1e9 // floating-point operations spent on the products

	// alike is how near the residual of x must be to that of the method for x
	// to pass as its iterate: rounding moves the curve of a long Lanczos run.
	alike = 0.02
)

// running follows the Lanczos process from r₀; for a matrix that is not
// symmetric the bidiagonalisation of Golub and Kahan.
func (w *work) running() error {
	n := w.a.NRows
	steps := min(max(5*n, 50), mostSteps)
	steps = max(min(steps, int(productWork/float64(4*w.a.Entries()+20*n+1))), 10)
	run := &w.out.Running
	run.Condition = math.NaN()
	square := 0.0
	keep := func(add, residual float64) bool {
		square += add
		run.Norms = append(run.Norms, math.Sqrt(square))
		run.Residuals = append(run.Residuals, residual)
		return square < math.MaxFloat64
	}
	if w.symmetric {
		run.Method = "minres"
		w.minres(steps, keep)
	} else {
		run.Method = "lsqr"
		w.lsqr(steps, keep)
	}
	w.withStart()
	return w.ctx.Err()
}

// minres hands out, for each step, what the entries of T add to its square and
// the residual: T is brought to triangular form by rotations (c, s), and each
// takes the residual down by s.
func (w *work) minres(steps int, keep func(add, residual float64) bool) {
	residual, before := linear.Norm2(w.r0), 0.0
	c, s, dbar := -1.0, 0.0, 0.0
	t := new(spectrum.Tridiagonal)
	w.lanczos(w.r0, steps, func(alpha, beta float64) bool {
		t.AddLanczos(alpha, beta)
		gbar := s*dbar - c*alpha
		dbar = -c * beta
		gamma := math.Hypot(gbar, beta)
		c, s = over(gbar, gamma), over(beta, gamma)
		residual *= s
		more := keep(alpha*alpha+before*before+beta*beta, residual)
		before = beta
		return more
	})
	w.out.Running.Condition = t.Extremes().Condition()
}

// lsqr does the same with the lower bidiagonal matrix of Golub and Kahan
// (1965), α_k on its diagonal and β_{k+1} below.
func (w *work) lsqr(steps int, keep func(add, residual float64) bool) {
	n := w.a.NRows
	u, v, y := make([]float64, n), make([]float64, n), make([]float64, n)
	residual := linear.Norm2(w.r0)
	if !(residual > 0) || math.IsInf(residual, 0) {
		return
	}
	linear.Scale(u, 1/residual, w.r0)
	beta, most, c := 0.0, 0.0, -1.0
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
		bar := -c * alpha
		rho := math.Hypot(bar, beta)
		c = over(bar, rho)
		residual *= over(beta, rho)
		if !keep(alpha*alpha+beta*beta, residual) || !(beta > exhausted*most) {
			return
		}
		linear.Scale(u, 1/beta, u)
	}
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

// passes says whether x has the residual of the method's iterate after k steps.
func (w *work) passes(k int) bool {
	two := w.out.Residual.Two
	return two > 0 && math.Abs(w.out.Running.Residuals[k-1]-two) <= alike*two
}

// runningMeasures adds what the method tests with its running norm.
func (w *work) runningMeasures() {
	run, r, x := w.out.Running, w.out.Residual.Two, linear.Norm2(w.q.X)
	w.runningMeasure("running", Minimal, "||r||2/(||A||run ||x||2)", run.Norms, r/x)
	if run.Method == "minres" {
		w.runningMeasure("running-start", Minimal, "||r||2/(||A||run,r0 ||x||2)", run.WithStart, r/x)
		return
	}
	z := make([]float64, len(w.r))
	w.at.Apply(z, w.r)
	w.runningMeasure("running-normal", Normal, "||A'r||2/(||A||run ||r||2)", run.Norms, linear.Norm2(z)/r)
}

// runningMeasure adds a measure that is size over the running norm, where x
// passes as one of the method's iterates: the value after the last step with
// which it does, and the first after which the measure holds.
func (w *work) runningMeasure(name string, kind Kind, formula string, norms []float64, size float64) {
	d := Definition{Name: name, Kind: kind, Formula: formula, Stops: true, Value: math.NaN(),
		after: func(k int) float64 { return size / norms[k-1] }}
	for k := 1; k <= len(norms); k++ {
		if !w.passes(k) {
			continue
		}
		d.Value = d.after(k)
		if d.Value <= w.q.Tol && d.From == 0 {
			d.From, d.Holds = k, true
		}
	}
	if !math.IsNaN(d.Value) && !math.IsInf(size, 0) {
		w.out.Definitions = append(w.out.Definitions, d)
	}
}
