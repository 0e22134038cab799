package prepare

import (
	"context"
	"math"

	"dwindle/engine/linear"
)

const (
	maxSweeps   = 20
	closeEnough = 0.1 // |norm − 1| of every row and column at which sweeps end
	maxExponent = 500 // of one factor, so that no product of two leaves the range
)

// equilibrate returns the binary exponents of the row and column factors that
// bring every nonzero row and column of Dr A Dc to a largest entry near 1: in
// each sweep every factor is divided by the square root of its row's or
// column's norm (Ruiz 2001, in the maximum norm). With symmetric, both are the
// same. The iteration runs on logarithms, which cannot overflow.
func equilibrate(ctx context.Context, a *linear.CSR, symmetric bool) (row, col []int, err error) {
	n := a.NRows
	r, c := make([]float64, n), make([]float64, n)
	rn, cn := make([]float64, n), make([]float64, n)
	if symmetric {
		c = r
	}
	lg := logs(a)
	for range maxSweeps {
		if err := ctx.Err(); err != nil {
			return nil, nil, err
		}
		norms(a, lg, r, c, rn, cn)
		worst := relax(r, rn)
		if !symmetric {
			worst = max(worst, relax(c, cn))
		}
		if worst <= math.Log2(1+closeEnough) {
			break
		}
	}
	row = exponents(r)
	if symmetric {
		return row, row, nil
	}
	return row, exponents(c), nil
}

// logs returns log₂|a_ij| of every entry, −∞ for zeros.
func logs(a *linear.CSR) []float64 {
	lg := make([]float64, len(a.Val))
	for k, v := range a.Val {
		lg[k] = math.Log2(math.Abs(v))
	}
	return lg
}

// norms writes log₂ of the largest entry of each row and column of Dr A Dc.
func norms(a *linear.CSR, lg, r, c, rn, cn []float64) {
	for i := range rn {
		rn[i], cn[i] = math.Inf(-1), math.Inf(-1)
	}
	for i := range rn {
		for k := a.Ptr[i]; k < a.Ptr[i+1]; k++ {
			j := a.Col[k]
			v := lg[k] + r[i] + c[j]
			rn[i], cn[j] = max(rn[i], v), max(cn[j], v)
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

func exponents(d []float64) []int {
	e := make([]int, len(d))
	for i, v := range d {
		e[i] = int(min(max(math.Round(v), -maxExponent), maxExponent))
	}
	return e
}
