package run

import (
	"fmt"
	"math"

	"dwindle/engine/linear"
)

// sizes are norms of the system that audits are held against.
type sizes struct {
	b, bInf       float64   // ‖b‖₂, ‖b‖∞
	fields        []float64 // ‖b_f‖₂ of each field of unknowns; nil without fields
	aInf, fro, a2 float64   // ‖A‖∞, ‖A‖_F, and √(‖A‖₁‖A‖∞) ≥ ‖A‖₂; NaN for a matrix-free A
}

// measure finds the norms that audits are held against.
func measure(s linear.System) sizes {
	z := sizes{b: linear.Norm2(s.B), bInf: linear.NormInf(s.B), fields: fieldNorms(s, s.B)}
	if z.b == 0 {
		z.b = 1 // a zero right-hand side: residuals are absolute
	}
	m := s.Matrix()
	if m == nil {
		z.aInf, z.fro, z.a2 = math.NaN(), math.NaN(), math.NaN()
		return z
	}
	colSum := make([]float64, m.NCols)
	for i := 0; i < m.NRows; i++ {
		cols, vals := m.Row(i)
		row := 0.0
		for k, c := range cols {
			v := math.Abs(vals[k])
			row += v
			colSum[c] += v
		}
		z.aInf = math.Max(z.aInf, row)
	}
	z.fro = linear.Norm2(m.Val)
	z.a2 = math.Sqrt(z.aInf * linear.NormInf(colSum))
	return z
}

// Bytes prints a size of memory.
func Bytes(n int64) string {
	switch {
	case n >= 1<<30:
		return fmt.Sprintf("%.1f GB", float64(n)/(1<<30))
	case n >= 1<<20:
		return fmt.Sprintf("%.0f MB", float64(n)/(1<<20))
	}
	return fmt.Sprintf("%.0f kB", math.Ceil(float64(n)/(1<<10)))
}
