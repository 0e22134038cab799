package check

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/spectrum"
)

// Norms are those of A.
type Norms struct {
	One, Inf, Fro float64
	Two           float64 // from below, by Lanczos on A or AᵀA
	TwoSettled    bool    // within one per cent of a singular value
}

// norms measures A and finds out whether it is symmetric.
func (w *work) norms() Norms {
	w.symmetric = w.a.ExactlySymmetric()
	w.at = w.a
	if !w.symmetric {
		w.at = w.a.Transpose()
	}
	z := Norms{Inf: rowSum(w.a), One: rowSum(w.at), Fro: linear.Norm2(w.a.Val)}
	start := make([]float64, w.a.NRows)
	linear.Uniform(start, 1)
	z.Two, z.TwoSettled = w.two(start)
	return z
}

// rowSum returns ‖A‖∞.
func rowSum(a *linear.CSR) float64 {
	most := 0.0
	for i := range a.NRows {
		_, vals := a.Row(i)
		most = math.Max(most, norm1(vals))
	}
	return most
}

// twoSteps bounds the products spent on ‖A‖₂.
const twoSteps = 120

// two returns the largest |Ritz value| of a Lanczos run, and whether it is
// settled to a thousandth.
func (w *work) two(start []float64) (value float64, settled bool) {
	t := new(spectrum.Tridiagonal)
	look := func() {
		e := t.Extremes()
		value, settled = math.Abs(e.Largest), e.ResidualLargest <= 1e-3*math.Abs(e.Largest)
		if -e.Smallest > value {
			value, settled = -e.Smallest, e.ResidualSmallest <= -1e-3*e.Smallest
		}
	}
	next := 10
	w.lanczos(start, twoSteps, func(alpha, beta float64) bool {
		more := t.AddLanczos(alpha, beta)
		if t.Order() >= next {
			next = t.Order() + t.Order()/4
			look()
		}
		return more && !settled
	})
	if t.Order() > 0 {
		look()
	}
	if !w.symmetric {
		value = math.Sqrt(value)
	}
	return value, settled
}

// exhausted is the size of a new direction, relative to A, that is nothing but
// rounding: the Krylov space is complete.
const exhausted = 10 * unit

// lanczos runs Lanczos on A, or on AᵀA where A is not symmetric, from the
// direction of start, and hands out the coefficients T_jj and T_{j+1,j} of
// each step until take returns false (Golub and Van Loan, Matrix Computations,
// §10.1). There is no reorthogonalisation: the methods it stands for have none.
func (w *work) lanczos(start []float64, steps int, take func(alpha, beta float64) bool) {
	n := w.a.NRows
	v, u, old := make([]float64, n), make([]float64, n), make([]float64, n)
	scratch := make([]float64, n)
	size := linear.Norm2(start)
	if !(size > 0) || math.IsInf(size, 0) {
		return
	}
	linear.Scale(v, 1/size, start)
	beta, most := 0.0, 0.0
	for range steps {
		if w.ctx.Err() != nil {
			return
		}
		if w.symmetric {
			w.a.Apply(u, v)
		} else {
			w.a.Apply(scratch, v)
			w.at.Apply(u, scratch)
		}
		linear.Axpy(-beta, old, u)
		alpha := linear.Dot(v, u)
		linear.Axpy(-alpha, v, u)
		beta = linear.Norm2(u)
		most = math.Max(most, math.Abs(alpha)+beta)
		if !take(alpha, beta) || !(beta > exhausted*most) || math.IsInf(beta, 0) {
			return
		}
		old, v, u = v, u, old
		linear.Scale(v, 1/beta, v)
	}
}
