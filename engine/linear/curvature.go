package linear

import (
	"math"
	"math/bits"
)

// Curvature returns xᵀA x for a square A, a rigorous bound on the rounding
// error of that value, and how far a change |E| ≤ delta·|A| of the entries can
// move it. A value below −bound proves that A has a direction of negative
// curvature; below −(bound+deltaBound), that every matrix within the printed
// digits has one. A value that overflowed gives bound +Inf: nothing is proved.
//
// The bound is γ·|x|ᵀ|A||x| with γ = (m + Block + log₂ n)·2⁻⁵³·1.01, m the
// largest number of entries in a row (Higham, Accuracy and Stability of
// Numerical Algorithms, 2002, §3.1), plus what underflow can add.
func Curvature(a *CSR, x []float64, delta float64) (value, bound, deltaBound float64) {
	y := make([]float64, a.NRows)
	value = a.ApplyDot(y, x)
	size := a.absForm(x)
	longest := 0
	for i := 0; i < a.NRows; i++ {
		longest = max(longest, a.Ptr[i+1]-a.Ptr[i])
	}
	terms := float64(longest + Block + bits.Len(uint(a.NRows)))
	bound = terms*0x1p-53*1.01*size + a.underflow(x)
	if math.IsNaN(bound) || math.IsNaN(value) || math.IsInf(value, 0) {
		return value, math.Inf(1), math.Inf(1)
	}
	return value, bound, delta * size * (1 + 1e-9)
}

// underflow bounds what products below the smallest normal number lose.
func (a *CSR) underflow(x []float64) float64 {
	return (float64(len(a.Val))*NormInf(x) + float64(a.NRows)) * 0x1p-1074
}

// absForm returns |x|ᵀ|A||x|.
func (a *CSR) absForm(x []float64) float64 {
	j := begin(absFormKernel, a.NRows)
	j.m, j.x = a, x[:a.NCols]
	return j.finishSum()
}

func absFormKernel(j *job, lo, hi, block int) {
	sum := 0.0
	for i := lo; i < hi; i++ {
		cols, vals := j.m.Row(i)
		s := 0.0
		for k, c := range cols {
			s += math.Abs(vals[k] * j.x[c])
		}
		sum += s * math.Abs(j.x[i])
	}
	j.part[block] = sum
}
