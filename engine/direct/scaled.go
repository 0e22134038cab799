package direct

import (
	"math"

	"dwindle/engine/linear"
)

// scaled is D A D with D = diag(2^exp): its diagonal lies in [1,4). Nothing is
// rounded, since the factors are powers of two.
type scaled struct {
	a   *linear.CSR
	exp []int     // length n
	d   []float64 // 2^exp
}

// newScaled scales a, whose diagonal d is positive.
func newScaled(a *linear.CSR, d []float64) *scaled {
	s := &scaled{a: a, exp: make([]int, len(d)), d: make([]float64, len(d))}
	for i, v := range d {
		_, k := math.Frexp(v)
		s.exp[i] = (2 - k) >> 1
		s.d[i] = math.Ldexp(1, s.exp[i])
	}
	return s
}

// at returns the scaled value of a stored entry v = a_ij.
func (s *scaled) at(i, j int, v float64) float64 { return math.Ldexp(v, s.exp[i]+s.exp[j]) }

func (s *scaled) diagonal() []float64 {
	d := make([]float64, len(s.exp))
	s.a.Diagonal(d)
	for i := range d {
		d[i] = s.at(i, i, d[i])
	}
	return d
}

// normInf returns the largest row sum of |D A D|, rounded up a little.
func (s *scaled) normInf() float64 {
	largest := 0.0
	for i := range s.exp {
		sum := 0.0
		cols, vals := s.a.Row(i)
		for k, j := range cols {
			sum += math.Abs(s.at(i, int(j), vals[k]))
		}
		largest = max(largest, sum)
	}
	return largest * (1 + 1e-6)
}

// apply computes dst = D A D x with work as scratch, all of length n.
func (s *scaled) apply(dst, x, work []float64) {
	linear.MulDot(work, s.d, x)
	s.a.Apply(dst, work)
	linear.MulDot(dst, s.d, dst)
}
