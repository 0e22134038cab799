package linear

import "math"

// A vector in two doubles is the unevaluated sum x + low of two vectors, where
// x is the sum rounded to double: about 32 decimal digits an entry.

// Refiner is the ability to evaluate a residual in twice the working precision.
type Refiner interface {
	// PairResidual computes dst = b − A (x + low), rounded to double once it is
	// known, and returns ‖dst‖₂. A nil low is zero. All have length n.
	PairResidual(dst, x, low, b []float64) float64
}

// RowResidual returns b − (A(x+low))_i, and |b| + (|A||x|)_i: the dot product
// is compensated, so that its error for m terms is at most u|r| + γ_m²(|A||x|+|b|)_i
// (Ogita, Rump and Oishi, SIAM J. Sci. Comput. 26 (2005) 1955–1988); the
// products with low, of the size of the roundings, need no compensation. A nil
// low is zero.
func (a *CSR) RowResidual(i int, x, low []float64, b float64) (r, size float64) {
	cols, vals := a.Row(i)
	sum, rest := b, 0.0
	size = math.Abs(b)
	for k, c := range cols {
		p, e1 := TwoProduct(-vals[k], x[c])
		s, e2 := TwoSum(sum, p)
		sum, rest = s, rest+(e1+e2)
		if low != nil {
			rest -= float64(vals[k] * low[c])
		}
		size += math.Abs(p)
	}
	return sum + rest, size
}

// PairResidual computes dst = b − A (x + low) row by row on the thread team.
func (a *CSR) PairResidual(dst, x, low, b []float64) float64 {
	j := begin(pairResidualKernel, a.NRows)
	j.m, j.w, j.x, j.y, j.v = a, dst[:a.NRows], x[:a.NCols], low, b[:a.NRows]
	if s := j.finishSum(); s > 1e-280 && s < 1e300 {
		return math.Sqrt(s)
	}
	return Norm2(dst)
}

func pairResidualKernel(j *job, lo, hi, block int) {
	for i := lo; i < hi; i++ {
		j.w[i], _ = j.m.RowResidual(i, j.x, j.y, j.v[i])
	}
	j.part[block] = dot(j.w[lo:hi], j.w[lo:hi])
}

// PairAxpy computes dst + dstLow = x + low + a d, each entry to within a few
// units of the second double's last place (the addition of Dekker, Numer. Math.
// 18 (1971) 224–242). dst and dstLow may be x and low.
func PairAxpy(dst, dstLow []float64, a float64, d, x, low []float64) {
	n := len(dst)
	j := begin(pairAxpyKernel, n)
	j.a, j.w, j.v, j.u, j.x, j.y = a, dst, dstLow[:n], d[:n], x[:n], low[:n]
	j.finish()
}

func pairAxpyKernel(j *job, lo, hi, _ int) {
	for i := lo; i < hi; i++ {
		s, e := TwoSum(j.x[i], float64(j.a*j.u[i]))
		j.w[i], j.v[i] = TwoSum(s, e+j.y[i])
	}
}
