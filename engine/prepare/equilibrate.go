package prepare

import (
	"context"
	"math"

	"dwindle/engine/linear"
)

const (
	maxSweeps   = 20
	closeEnough = 0.01 // |norm − 1| of every row and column at which sweeps end
	maxExponent = 500  // of one factor, so that no product of two leaves the range
)

// equilibrate returns the row and column factors that bring the largest entry
// of every nonzero row and column of Dr A Dc near 1: a sweep divides each
// factor by the square root of the norm of its row, then of its column (Ruiz
// 2001, in the maximum norm, rows and columns in turn). With symmetric, one
// sweep serves both and the factors are the same. The iteration runs on
// logarithms, which cannot overflow.
func equilibrate(ctx context.Context, a *linear.CSR, symmetric bool) (row, col []float64, err error) {
	n := a.NRows
	r, c, norm := make([]float64, n), make([]float64, n), make([]float64, n)
	if symmetric {
		c = r
	}
	lg := logs(a)
	for range maxSweeps {
		if err := ctx.Err(); err != nil {
			return nil, nil, err
		}
		rowNorms(a, lg, r, c, norm)
		worst := relax(r, norm)
		if !symmetric {
			colNorms(a, lg, r, c, norm)
			worst = max(worst, relax(c, norm))
		}
		if worst <= math.Log2(1+closeEnough) {
			break
		}
	}
	row = powers(r)
	if symmetric {
		return row, row, nil
	}
	return row, powers(c), nil
}

// logs returns log₂|a_ij| of every entry, −∞ for zeros.
func logs(a *linear.CSR) []float64 {
	lg := make([]float64, len(a.Val))
	for k, v := range a.Val {
		lg[k] = math.Log2(math.Abs(v))
	}
	return lg
}

// rowNorms writes log₂ of the largest entry of each row of Dr A Dc.
func rowNorms(a *linear.CSR, lg, r, c, norm []float64) {
	for i := range norm {
		norm[i] = math.Inf(-1)
		for k := a.Ptr[i]; k < a.Ptr[i+1]; k++ {
			norm[i] = max(norm[i], lg[k]+r[i]+c[a.Col[k]])
		}
	}
}

// colNorms writes log₂ of the largest entry of each column of Dr A Dc.
func colNorms(a *linear.CSR, lg, r, c, norm []float64) {
	for j := range norm {
		norm[j] = math.Inf(-1)
	}
	for i := range r {
		for k := a.Ptr[i]; k < a.Ptr[i+1]; k++ {
			j := a.Col[k]
			norm[j] = max(norm[j], lg[k]+r[i]+c[j])
		}
	}
}

// relax divides each factor by the square root of its norm and returns the
// largest |log₂ norm|. Empty rows keep their factor.
func relax(d, norm []float64) float64 {
	worst := 0.0
	for i, v := range norm {
		if !math.IsInf(v, -1) {
			d[i] -= v / 2
			worst = max(worst, math.Abs(v))
		}
	}
	return worst
}

// powers returns 2^e of each exponent.
func powers(e []float64) []float64 {
	d := make([]float64, len(e))
	for i, v := range e {
		d[i] = math.Exp2(min(max(v, -maxExponent), maxExponent))
	}
	return d
}
