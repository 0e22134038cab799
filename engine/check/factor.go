package check

import (
	"errors"
	"fmt"
	"math"

	"dwindle/engine/direct"
	"dwindle/engine/linear"
	"dwindle/engine/spectrum"
)

// Factor is what a factorisation of A tells of a solution.
type Factor struct {
	How       string  // "Cholesky" or "LU"
	Condition float64 // ‖A‖₁‖A⁻¹‖₁, a lower bound that is rarely far off
	// Reach is ‖|A⁻¹|(|A||x|+|b|)‖∞/‖x‖∞, estimated: what a componentwise
	// backward error is multiplied with in x (Skeel; Arioli, Demmel and Duff,
	// SIAM J. Matrix Anal. Appl. 10 (1989) 165–190). No scaling of rows changes
	// it.
	Reach float64
	// Error2, ErrorInf and Energy are ‖x*−x‖/‖x*‖ with A(x*−x) = r solved and
	// refined once; Energy is in the norm of A, NaN where A is not definite.
	Error2, ErrorInf, Energy float64
	Sure                     bool // the refinement changed x*−x by less than a tenth
	// Digits are the correct decimal digits that a stable solver can be expected
	// to give in double precision, and Written those to which the printed digits
	// of the matrix determine x: 0 to 16.
	Digits, Written float64
}

// factors solve with A and Aᵀ.
type factors struct {
	how         string
	solve, back func(dst, b []float64)
}

// leastSure is the relative error that rounding may make in x for a factor to
// be trusted: a singular matrix is factorised by chance.
const leastSure = 1e-3

// sumsToZero says whether constants on a component of A are a null vector, to
// rounding or within the printed digits.
func (w *work) sumsToZero() bool {
	for _, z := range linear.FindComponents(w.a).RowSums(w.a, w.q.System.Delta()) {
		if z != linear.NotZero {
			return true
		}
	}
	return false
}

// factor factorises A within the limits and measures condition and error.
func (w *work) factor() error {
	if w.sumsToZero() {
		w.out.NoFactor = "A is singular: the rows of a connected part of it sum to zero, and x is open there by a constant"
		return nil
	}
	f, err := w.factorise()
	var pivot *direct.PivotError
	switch {
	case w.ctx.Err() != nil:
		return w.ctx.Err()
	case errors.Is(err, direct.ErrTooLarge):
		w.tooLarge = true
		w.out.NoFactor = "A is too large to be factorised here: condition and error of x are not known"
		return nil
	case errors.As(err, &pivot):
		w.out.NoFactor = "A cannot be factorised, it is singular to rounding: x is not determined by A and b"
		return nil
	case err != nil:
		w.tooLarge = true
		w.out.NoFactor = "A cannot be factorised: " + err.Error()
		return nil
	}
	out := &Factor{How: f.how, Energy: math.NaN()}
	out.Condition = w.out.Norms.One * spectrum.OneNorm(w.a.NRows, f.solve, f.back)
	star := w.errorsBy(f, out)
	out.Reach = w.reach(f, star)
	out.Digits = correct(unit * out.Reach)
	out.Written = correct(math.Max(unit, w.q.System.Delta()) * out.Reach)
	if !(unit*out.Reach <= leastSure) || out.Condition*unit > 1 && !out.Sure {
		w.out.NoFactor = fmt.Sprintf("A is singular to rounding, or nearly so (condition %.1e or more): double precision does not determine x", out.Condition)
		return nil
	}
	w.out.Factor = out
	return nil
}

// correct is the number of correct decimal digits behind a relative error.
func correct(e float64) float64 { return math.Min(math.Max(-math.Log10(e), 0), 16) }

// factorise makes the cheaper factor that A admits.
func (w *work) factorise() (factors, error) {
	l := w.q.Factor
	if w.a.NRows > l.Rows {
		return factors{}, direct.ErrTooLarge
	}
	if w.symmetric {
		sym := direct.Predict(w.a, direct.Best)
		if sym.Work > l.Work || sym.Bytes()+sym.Stack > l.Bytes {
			return factors{}, direct.ErrTooLarge
		}
		if c, err := direct.FactorCholesky(w.ctx, w.a, sym, nil); err == nil {
			return factors{"Cholesky", c.Solve, c.Solve}, nil
		}
	}
	plan := direct.PredictLU(w.a, direct.Best)
	if plan.Work > l.Work || 16*plan.Entries > l.Bytes {
		return factors{}, direct.ErrTooLarge
	}
	lu, err := direct.FactorLU(w.ctx, w.a, plan, nil)
	if err != nil {
		return factors{}, err
	}
	return factors{"LU", lu.Solve, lu.SolveT}, nil
}

// errorsBy solves A e = r, refines e once with a compensated residual, and
// returns x* = x + e.
func (w *work) errorsBy(f factors, out *Factor) []float64 {
	n := w.a.NRows
	e, d, rest := make([]float64, n), make([]float64, n), make([]float64, n)
	f.solve(e, w.r)
	for i := range n {
		rest[i], _ = w.a.RowResidual(i, e, nil, w.r[i])
	}
	f.solve(d, rest)
	linear.Axpy(1, d, e)
	out.Sure = linear.Norm2(d) <= 0.1*linear.Norm2(e)
	star := make([]float64, n)
	linear.Lin(star, 1, w.q.X, 1, e)
	out.Error2 = over(linear.Norm2(e), linear.Norm2(star))
	out.ErrorInf = over(linear.NormInf(e), linear.NormInf(star))
	if f.how == "Cholesky" {
		w.a.Apply(d, star)
		out.Energy = math.Sqrt(over(math.Max(linear.Dot(e, w.r), 0), math.Max(linear.Dot(star, d), 0)))
	}
	return star
}

// reach estimates ‖A⁻¹G‖∞/‖x*‖∞ with G = diag(|A||x*|+|b|): the 1-norm of its
// transpose.
func (w *work) reach(f factors, star []float64) float64 {
	n := w.a.NRows
	g, t := make([]float64, n), make([]float64, n)
	for i := range n {
		_, g[i] = w.a.RowResidual(i, star, nil, w.q.System.B[i])
	}
	apply := func(dst, x []float64) { // G A⁻ᵀ x
		f.back(dst, x)
		for i := range dst {
			dst[i] *= g[i]
		}
	}
	applyT := func(dst, x []float64) { // A⁻¹ G x
		for i := range t {
			t[i] = g[i] * x[i]
		}
		f.solve(dst, t)
	}
	return over(spectrum.OneNorm(n, apply, applyT), linear.NormInf(star))
}
